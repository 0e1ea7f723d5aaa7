import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { listContainers, recordTransfer, type ContainerDetail } from '@/shared/contracts/containers'
import { measuringMethods } from '@/shared/quantities/methods'
import { formatLitresAs } from '@/shared/quantities/format'
import { parseQuantity } from '@/shared/quantities/parse'
import { unitSymbol, volumeUnits, type VolumeUnit } from '@/shared/quantities/units'
import { call } from '../api/call'
import { newId } from '../api/new-id'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useContract } from '../api/use-contract'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { Button } from '../ui/button'
import { Dialog } from '../ui/dialog'
import { Field, Select } from '../ui/field'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'

/** Moves fluid into another container of the site; the same stream is offered first. */
export function TransferDialog({
  container,
  unit,
  onClose,
}: {
  container: ContainerDetail
  unit: VolumeUnit
  onClose: () => void
}) {
  const { t } = useTranslation()
  const showProblem = useShowProblem('containers')
  const refreshWhatChanged = useRefreshWhatChanged()
  const others = useContract(listContainers, { query: { siteId: container.siteId } })
  const [id] = useState(newId)
  const [to, setTo] = useState('')
  const [typed, setTyped] = useState('')
  const [method, setMethod] = useState('pump-meter')
  const [error, setError] = useState<string>()
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const choices = (others.data?.rows ?? []).filter(
    (one) => one.id !== container.id && one.stream.kind === 'fluid' && one.hold === null,
  )

  async function save() {
    const read = parseQuantity(typed, { defaultUnit: unit, measure: 'volume' })
    setError(read.ok ? undefined : t(`containers.fields.${read.code}`))
    if (!read.ok) return
    setBusy(true)
    setProblem(undefined)
    try {
      await call(recordTransfer, {
        body: {
          id,
          siteId: container.siteId,
          fromContainerId: container.id,
          toContainerId: to,
          volume: { value: read.value, unit: volumeUnits.find((one) => one === read.unit) ?? unit },
          method: measuringMethods.find((one) => one === method) ?? 'pump-meter',
          occurredAt: new Date().toISOString(),
          note: '',
        },
      })
      await refreshWhatChanged(whatPouringChanges)
      onClose()
    } catch (refusal) {
      setProblem(showProblem(refusal))
      setBusy(false)
    }
  }

  return (
    <Dialog
      isOpen
      title={t('containers.transfer.title', { code: container.code })}
      onClose={onClose}
      actions={
        <>
          <Button label={t('containers.cancel')} onPress={onClose} />
          <Button
            kind="primary"
            label={t('containers.transfer.act')}
            busy={isBusy}
            disabled={to === ''}
            onPress={() => void save()}
          />
        </>
      }
    >
      <Text>{t('containers.transfer.caution')}</Text>
      <Select
        label={t('containers.transfer.to')}
        placeholder={t('containers.transfer.choose')}
        value={to}
        onChange={setTo}
        options={choices.map((one) => ({
          value: one.id,
          label: t('containers.transfer.choice', {
            code: one.code,
            stream: one.stream.name,
            room: formatLitresAs(one.roomLitres, unit),
          }),
          group:
            one.streamId === container.streamId
              ? t('containers.transfer.same')
              : t('containers.transfer.others'),
        }))}
      />
      <Field
        label={t('containers.transfer.volume', { unit: t(`units.${unit}`, { count: 2 }) })}
        inputMode="decimal"
        characters={10}
        suffix={unitSymbol(unit)}
        value={typed}
        onChange={setTyped}
        error={error}
      />
      <Select
        label={t('containers.transfer.method')}
        value={method}
        onChange={setMethod}
        options={measuringMethods.map((one) => ({ value: one, label: t(`drains.methods.${one}`) }))}
      />
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
    </Dialog>
  )
}
