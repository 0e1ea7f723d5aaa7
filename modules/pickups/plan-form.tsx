import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import type { Container } from '@/shared/contracts/containers'
import type { Catalogue, Site } from '@/shared/contracts/set-up'
import type { PlanPickupBody } from '@/shared/contracts/pickups'
import { parseQuantity } from '@/shared/quantities/parse'
import { formatFigure, formatLitresAs } from '@/shared/quantities/format'
import { newId } from '../api/new-id'
import { Button } from '../ui/button'
import { Card, Row, Stack } from '../ui/card'
import { Checkbox } from '../ui/choice'
import { Field, Select, TextArea } from '../ui/field'
import { Heading } from '../ui/heading'
import { LevelPicture } from '../ui/level-picture'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

export type Plan = Omit<PlanPickupBody, 'id' | 'siteId'>
type Chosen = Record<string, { lineId: string; typed: string }>

/**
 * A pickup planned from containers. A quantity is typed only where the book is not to be taken at its word: left
 * empty, exactly what the book holds goes.
 */
export function PlanForm({
  site,
  catalogue,
  containers,
  before,
  onSave,
  saveLabel,
}: {
  site: Site
  catalogue: Catalogue
  containers: readonly Container[]
  before: Plan
  onSave: (plan: Plan) => Promise<void>
  saveLabel: string
}) {
  const { t } = useTranslation()
  const act = usePickupAct()
  const [facts, setFacts] = useState(before)
  const [chosen, setChosen] = useState<Chosen>(() =>
    Object.fromEntries(
      before.lines.map(({ id, containerId, quantity }) => [
        containerId,
        {
          lineId: id,
          typed:
            quantity === undefined
              ? ''
              : `${quantity.value} ${quantity.unit === 'L' ? 'L' : ''}`.trim(),
        },
      ]),
    ),
  )
  const [errors, setErrors] = useState<Record<string, string>>({})
  const change = (more: Partial<Plan>) => setFacts((old) => ({ ...old, ...more }))

  const save = async () => {
    const wrong: Record<string, string> = {}
    const lines = Object.entries(chosen).map(([containerId, { lineId, typed }]) => {
      const container = containers.find(({ id }) => id === containerId)
      const isFluid = container?.stream.kind !== 'solid'
      const line = { id: lineId, containerId, pieces: 0, containerCount: 1 }
      if (typed.trim() === '') return line
      const read = parseQuantity(typed, {
        defaultUnit: isFluid ? site.volumeUnit : 'kg',
        measure: isFluid ? 'volume' : 'mass',
      })
      if (!read.ok) {
        wrong[containerId] = t(`pickups.fields.${read.code}`)
        return line
      }
      return { ...line, quantity: { value: read.value, unit: read.unit } }
    })
    if (lines.length === 0) wrong['lines'] = t('pickups.fields.noContainer')
    if (facts.plannedOn === '') wrong['plannedOn'] = t('pickups.fields.required')
    setErrors(wrong)
    if (Object.keys(wrong).length > 0) return
    await act.run(() => onSave({ ...facts, lines }))
  }

  return (
    <Stack>
      <Refusal problem={act.problem} />
      <Card>
        <Heading level={2}>{t('pickups.plan.containers')}</Heading>
        <Text kind="hint">{t('pickups.plan.containersHint')}</Text>
        {errors['lines'] !== undefined && (
          <Text kind="strong" role="alert">
            {errors['lines']}
          </Text>
        )}
        {containers.map((container) => {
          const line = chosen[container.id]
          return (
            <Stack key={container.id} space={4}>
              <Row>
                <LevelPicture
                  kind={container.type}
                  capacity={Number(container.capacityLitres)}
                  fillLine={Number(container.fillLineLitres)}
                  contents={Number(container.litres)}
                  label={`${container.code}: ${holds(container, site)}`}
                  height={56}
                />
                <Checkbox
                  label={`${container.code}, ${container.stream.name}: ${holds(container, site)}`}
                  checked={line !== undefined}
                  onChange={(isChecked) =>
                    setChosen(({ [container.id]: _gone, ...others }) =>
                      isChecked
                        ? { ...others, [container.id]: { lineId: newId(), typed: '' } }
                        : others,
                    )
                  }
                />
              </Row>
              {line !== undefined && (
                <Field
                  label={t('pickups.plan.quantity', { container: container.code })}
                  hint={t('pickups.plan.quantityHint')}
                  inputMode="decimal"
                  characters={12}
                  value={line.typed}
                  error={errors[container.id]}
                  onChange={(typed) =>
                    setChosen((old) => ({ ...old, [container.id]: { ...line, typed } }))
                  }
                />
              )}
            </Stack>
          )
        })}
      </Card>
      <Card>
        <Heading level={2}>{t('pickups.plan.parties')}</Heading>
        <Select
          label={t('pickups.hauler')}
          placeholder={t('pickups.plan.later')}
          value={facts.haulerId ?? ''}
          onChange={(id) => change({ haulerId: id === '' ? null : id })}
          options={catalogue.haulers.map(({ id, name }) => ({ value: id, label: name }))}
          error={act.fieldErrors['haulerId']}
        />
        <Select
          label={t('pickups.facility')}
          placeholder={t('pickups.plan.later')}
          value={facts.facilityId ?? ''}
          onChange={(id) => change({ facilityId: id === '' ? null : id })}
          options={catalogue.facilities.map(({ id, name }) => ({ value: id, label: name }))}
          error={act.fieldErrors['facilityId']}
        />
        <Field
          label={t('pickups.plannedOn')}
          type="date"
          characters={14}
          value={facts.plannedOn}
          onChange={(plannedOn) => change({ plannedOn })}
          error={errors['plannedOn'] ?? act.fieldErrors['plannedOn']}
        />
        <Field
          label={t('pickups.orderNumber')}
          characters={20}
          maxLength={60}
          value={facts.orderNumber}
          onChange={(orderNumber) => change({ orderNumber })}
        />
        <TextArea
          label={t('pickups.note')}
          maxLength={1000}
          value={facts.note}
          onChange={(note) => change({ note })}
        />
      </Card>
      <Button
        kind="primary"
        isLarge
        label={saveLabel}
        busy={act.isBusy}
        onPress={() => void save()}
      />
    </Stack>
  )
}

/** What the book says is in a container: litres of a fluid, pieces and kilograms of solids. */
export function holds(container: Container, site: Site): string {
  if (container.stream.kind === 'fluid') return formatLitresAs(container.litres, site.volumeUnit)
  const pieces = container.pieces > 0 ? `${container.pieces} ×` : ''
  const mass =
    Number(container.kilograms) > 0 || pieces === ''
      ? `${formatFigure(container.kilograms, 1)}\u00a0kg`
      : ''
  return [pieces, mass].filter(Boolean).join(' ')
}
