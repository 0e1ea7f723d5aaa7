import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { localDay } from '@/shared/calendar'
import { receivedMethods, receivePickup, type Pickup } from '@/shared/contracts/pickups'
import { parseQuantity, type ParsedQuantity } from '@/shared/quantities/parse'
import { measureOf, unitSymbol, type Unit } from '@/shared/quantities/units'
import { call } from '../api/call'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Card, Stack } from '../ui/card'
import { Field, Select, TextArea } from '../ui/field'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

type Line = Pickup['lines'][number]
type Method = (typeof receivedMethods)[number]
type Typed = { typed: string; unit: Unit; pieces: string; method: Method }

const fluidUnits: readonly Unit[] = ['gal_us', 'L', 'gal_imp', 'kg', 'lb_avdp', 'tonne']
const solidUnits: readonly Unit[] = ['kg', 'lb_avdp', 'tonne']

/** What the facility received, line by line; entered again it corrects what was entered before. */
export function ReceiveCard({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const { sites } = useSite()
  const act = usePickupAct()
  const volumeUnit = sites.find(({ id }) => id === pickup.siteId)?.volumeUnit ?? 'L'
  const [today] = useState(() => localDay(new Date(), pickup.timeZone))
  const [receivedOn, setReceivedOn] = useState(pickup.received?.on ?? today)
  const [ticket, setTicket] = useState(pickup.received?.ticket ?? '')
  const [note, setNote] = useState(pickup.received?.note ?? '')
  const [lines, setLines] = useState<Record<string, Typed>>(() =>
    Object.fromEntries(pickup.lines.map((line) => [line.id, typedOf(line, volumeUnit)])),
  )
  const [errors, setErrors] = useState<Record<string, string>>({})
  const [isOpen, setOpen] = useState(pickup.received === null)

  const enter = async () => {
    const wrong: Record<string, string> = {}
    const body = pickup.lines.map((line) => {
      const { typed = '', unit = 'kg', pieces = '0', method = 'weighbridge' } = lines[line.id] ?? {}
      const read = readReceived(typed, unit)
      if (!read.ok) wrong[line.id] = t(`pickups.fields.${read.code}`)
      return {
        lineId: line.id,
        quantity: read.ok ? { value: read.value, unit: read.unit } : { value: '0', unit },
        pieces: /^\d{1,5}$/.test(pieces) ? Number(pieces) : 0,
        method,
        note: '',
      }
    })
    setErrors(wrong)
    if (Object.keys(wrong).length > 0) return
    await act.run(() =>
      call(receivePickup, {
        params: { id: pickup.id },
        body: { version: pickup.version, receivedOn, ticket, note, lines: body },
      }),
    )
  }

  if (!isOpen) {
    return <Button label={t('pickups.received.again')} icon="pen" onPress={() => setOpen(true)} />
  }
  return (
    <Card role="region" label={t('pickups.received.title')}>
      <Heading level={2}>{t('pickups.received.title')}</Heading>
      <Text kind="hint">{t('pickups.received.hint')}</Text>
      {pickup.lines.map((line, index) => {
        const value = lines[line.id] ?? typedOf(line, volumeUnit)
        const set = (more: Partial<Typed>) =>
          setLines((old) => ({ ...old, [line.id]: { ...value, ...more } }))
        const isFluid = line.stream.kind === 'fluid'
        return (
          <Stack key={line.id} space={4}>
            <Text kind="strong">{`${line.containerCode}, ${line.stream.name}`}</Text>
            <Field
              label={t('pickups.received.quantity', { container: line.containerCode })}
              inputMode="decimal"
              characters={12}
              value={value.typed}
              onChange={(typed) => set({ typed })}
              error={
                errors[line.id] ??
                act.fieldErrors[`lines.${index}.quantity.unit`] ??
                act.fieldErrors[`lines.${index}.quantity.value`]
              }
            />
            <Select
              label={t('pickups.received.unit', { container: line.containerCode })}
              value={value.unit}
              onChange={(unit) =>
                set({
                  unit:
                    (isFluid ? fluidUnits : solidUnits).find((one) => one === unit) ?? value.unit,
                })
              }
              options={(isFluid ? fluidUnits : solidUnits).map((unit) => ({
                value: unit,
                label: unitSymbol(unit),
              }))}
            />
            {!isFluid && (
              <Field
                label={t('pickups.received.pieces', { container: line.containerCode })}
                inputMode="numeric"
                characters={6}
                value={value.pieces}
                onChange={(pieces) => set({ pieces })}
              />
            )}
            <Select
              label={t('pickups.received.method', { container: line.containerCode })}
              value={value.method}
              onChange={(method) =>
                set({ method: receivedMethods.find((one) => one === method) ?? 'estimate' })
              }
              options={receivedMethods.map((method) => ({
                value: method,
                label: t(`pickups.methods.${method}`),
              }))}
            />
          </Stack>
        )
      })}
      <Field
        label={t('pickups.received.day')}
        type="date"
        characters={14}
        max={today}
        value={receivedOn}
        onChange={setReceivedOn}
        error={act.fieldErrors['receivedOn']}
      />
      <Field
        label={t('pickups.received.ticket')}
        characters={20}
        maxLength={60}
        value={ticket}
        onChange={setTicket}
      />
      <TextArea
        label={t('pickups.note')}
        rows={2}
        maxLength={1000}
        value={note}
        onChange={setNote}
      />
      <Refusal problem={act.problem} />
      <Button
        kind="primary"
        label={t('pickups.received.enter')}
        busy={act.isBusy}
        onPress={() => void enter()}
      />
    </Card>
  )
}

function typedOf(line: Line, volumeUnit: Unit): Typed {
  const got = line.received
  if (got !== null) {
    return {
      typed: got.quantity.value,
      unit: got.quantity.unit,
      pieces: String(got.pieces),
      method: got.method,
    }
  }
  const isFluid = line.stream.kind === 'fluid'
  return {
    typed: '',
    unit: isFluid ? volumeUnit : 'kg',
    pieces: String(line.pieces),
    method: isFluid ? 'facility-gauge' : 'weighbridge',
  }
}

/** Like any typed quantity, but nothing received is a figure as well. */
function readReceived(typed: string, unit: Unit): ParsedQuantity {
  if (/^0+([.,]0+)?$/.test(typed.trim())) return { ok: true, value: '0', unit, unitWasTyped: false }
  return parseQuantity(typed, { defaultUnit: unit, measure: measureOf(unit) })
}
