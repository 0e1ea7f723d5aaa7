import { useState } from 'react'
import { get, useForm } from 'react-hook-form'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { amendDrain, amendReasons, type Drain } from '@/shared/contracts/drains'
import type { Site } from '@/shared/contracts/set-up'
import { formatLitresAs } from '@/shared/quantities/format'
import { unitSymbol, unitWordsKey } from '@/shared/quantities/units'
import { call } from '../api/call'
import { fieldWords } from '../api/field-words'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { ChoiceChips } from '../ui/choice'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { gap } from '../ui/measures'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import { useWindowClass } from '../ui/use-window-class'
import { amendEffect } from './amend-effect'
import { ContainerPicker } from './container-picker'
import { DrainDetailsEntry } from './drain-details-entry'
import { valuesOfFacts, type DrainValues, type FactsInput } from './drain-values'
import { FactList } from '../ui/fact-list'
import { factsOfValues } from './facts-of-values'
import { keepUntouched } from './keep-untouched'
import { LegsEntry } from './legs-entry'
import { machineName } from './machine-name'
import { MachinePicker } from './machine-picker'
import { PickRow } from './pick-row'
import { codesOf, factsInWords } from './revision-facts'
import type { DrainChoices } from './use-drain-choices'
import { useDrainEditor } from './use-drain-editor'
import { formFieldOf } from './use-save-drain'

type Props = {
  drain: Drain
  site: Site
  choices: DrainChoices
  /** After somebody else changed the drain: the left side must show what stands now. */
  onReadAgain: () => Promise<void>
}

type ReasonCode = (typeof amendReasons)[number]

/** Old values on the left (above, on a phone), the form on the right; why, and what it does, before the save. */
export function AmendDrainForm({ drain, site, choices, onReadAgain }: Props) {
  const { t } = useTranslation()
  const router = useRouter()
  const windowClass = useWindowClass()
  const isWide = windowClass === 'desk' || windowClass === 'wide'
  const showProblem = useShowProblem('drains')
  const refreshWhatChanged = useRefreshWhatChanged()
  const recorded = currentFacts(drain)
  const [before] = useState(() => valuesOfFacts(recorded, drain.timeZone, site.massUnit))
  const form = useForm<DrainValues>({ defaultValues: before })
  const { errors } = form.formState
  const editor = useDrainEditor(form, site, choices)
  const { values } = editor
  const [reason, setReason] = useState<ReasonCode>()
  const [reasonText, setReasonText] = useState('')
  const [isReasonAsked, setReasonAsked] = useState(false)
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()

  const read = factsOfValues(values, { now: new Date(), timeZone: drain.timeZone })
  const facts = read.ok ? keepUntouched(read.facts, recorded, before, values) : undefined
  const effect = facts === undefined ? [] : amendEffect(drain, facts, choices.containers)
  const errorOf = (field: string) =>
    (get(errors, field) as { message?: string } | undefined)?.message
  const isSplit = values.legs.length > 1
  const container = editor.containerOf(0)
  const unit = site.volumeUnit
  const isReasonMissing = reason === undefined || (reason === 'other' && reasonText.trim() === '')

  async function save() {
    form.clearErrors()
    setProblem(undefined)
    setReasonAsked(true)
    if (!read.ok) {
      read.fields.forEach(({ path, code }) =>
        form.setError(path as keyof DrainValues, {
          type: code,
          message: fieldWords(t, 'drains', { path, code }),
        }),
      )
      return
    }
    if (facts === undefined || reason === undefined || isReasonMissing) return
    setBusy(true)
    try {
      await call(amendDrain, {
        params: { id: drain.id },
        body: {
          ...facts,
          expectedRevision: drain.revision,
          reason: { code: reason, text: reasonText },
        },
      })
      await refreshWhatChanged(whatPouringChanges)
      router.replace(`/drains/${drain.number}`)
    } catch (error) {
      const shown = showProblem(error, { setError: form.setError, fieldOf: formFieldOf })
      setProblem(
        shown.code === 'offline' ? { ...shown, detail: t('drains.amend.needsSignal') } : shown,
      )
      if (shown.code === 'changed-under-you') await onReadAgain()
      setBusy(false)
    }
  }

  const old = (
    <Card role="region" label={t('drains.amend.old')}>
      <Heading level={2}>{t('drains.amend.old')}</Heading>
      <FactList
        facts={factsInWords(t, recorded, {
          catalogue: choices.catalogue,
          containerCode: codesOf(drain, choices.containers),
          timeZone: drain.timeZone,
        })}
      />
      <Text kind="hint">{t('drains.amend.kept')}</Text>
    </Card>
  )

  return (
    <View
      style={
        isWide
          ? { flexDirection: 'row', gap: gap.large, alignItems: 'flex-start' }
          : { gap: gap.medium }
      }
    >
      <View style={isWide ? { flex: 2, minWidth: 0 } : undefined}>{old}</View>
      <View style={isWide ? { flex: 3, minWidth: 0 } : undefined}>
        <Card role="region" label={t('drains.amend.new')}>
          <Heading level={2}>{t('drains.amend.new')}</Heading>
          <View style={{ gap: gap.medium }}>
            <PickRow
              label={t('drains.form.from')}
              value={
                editor.machine !== undefined
                  ? machineName(editor.machine)
                  : values.machine?.kind === 'unlisted'
                    ? values.machine.description
                    : undefined
              }
              placeholder={t('drains.form.chooseMachine')}
              icon="gear"
              hasError={errors.machine !== undefined}
              onPress={() => editor.pick({ what: 'machine' })}
            />
            {!isSplit && (
              <PickRow
                label={t('drains.form.into')}
                value={container?.code}
                placeholder={t('drains.form.chooseContainer')}
                detail={container?.stream.name}
                icon="drum"
                hasError={errors.legs !== undefined}
                onPress={() => editor.pick({ what: 'container', leg: 0 })}
              />
            )}
            <View style={{ flexDirection: 'row', alignItems: 'flex-end', gap: gap.small }}>
              <Field
                label={t('drains.form.volumeIn', {
                  unit: t(unitWordsKey(values.unit), { count: 2 }),
                })}
                inputMode="decimal"
                characters={9}
                value={values.typed}
                error={errorOf('typed')}
                onChange={editor.type}
              />
              <Button
                label={unitSymbol(values.unit)}
                hint={t('drains.form.unit', { unit: t(unitWordsKey(values.unit), { count: 2 }) })}
                onPress={editor.nextUnit}
              />
            </View>
            <LegsEntry
              legs={values.legs}
              shares={editor.shares}
              containers={choices.containers}
              unit={values.unit}
              errorOf={errorOf}
              onType={(leg, typed) =>
                form.setValue(`legs.${leg}.typed`, typed, { shouldDirty: true })
              }
              onPick={(leg) => editor.pick({ what: 'container', leg })}
              onAdd={editor.split}
              onRemove={editor.removeLeg}
            />
            <DrainDetailsEntry
              form={form}
              site={site}
              streams={choices.streams}
              fluids={choices.catalogue.fluids}
            />
            <ChoiceChips
              label={t('drains.amend.reason')}
              value={reason ?? ''}
              error={
                isReasonAsked && isReasonMissing ? t('drains.amend.reasonRequired') : undefined
              }
              onChange={(code) => setReason(code as ReasonCode)}
              options={amendReasons.map((code) => ({
                value: code,
                label: t(`drains.amend.reasons.${code}`),
              }))}
            />
            <Field
              label={t('drains.amend.reasonText')}
              maxLength={300}
              value={reasonText}
              onChange={setReasonText}
            />
            <View role="status" aria-live="polite" style={{ gap: gap.tiny }}>
              <Text kind="label">{t('drains.amend.effect')}</Text>
              {effect.length === 0 && <Text>{t('drains.amend.noEffect')}</Text>}
              {effect.map(({ containerId, code, fromLitres, toLitres }) => (
                <Text key={containerId} kind="strong">
                  {t('drains.amend.effectLine', {
                    container: code,
                    from: formatLitresAs(fromLitres, unit, { withUnit: false }),
                    to: formatLitresAs(toLitres, unit),
                  })}
                </Text>
              ))}
            </View>
            {problem !== undefined && (
              <Notice kind="stop" title={problem.title}>
                {problem.detail}
              </Notice>
            )}
            <Button
              kind="primary"
              isLarge
              isWide
              busy={isBusy}
              label={isBusy ? t('drains.amend.saving') : t('drains.amend.save')}
              onPress={() => void save()}
            />
            <Button
              kind="quiet"
              label={t('drains.amend.cancel')}
              onPress={() => router.replace(`/drains/${drain.number}`)}
            />
          </View>
        </Card>
      </View>
      {editor.picking?.what === 'machine' && (
        <MachinePicker
          machines={choices.machines}
          lastMachines={choices.lastMachines}
          siteName={site.name}
          unit={values.unit}
          value={values.machine}
          onChoose={editor.chooseMachine}
          onClose={() => editor.pick(undefined)}
        />
      )}
      {editor.picking?.what === 'container' && (
        <ContainerPicker
          containers={choices.containers}
          wanted={{ streamId: values.streamId, litres: editor.litresOfLeg(editor.picking.leg) }}
          siteName={site.name}
          unit={values.unit}
          chosenId={values.legs[editor.picking.leg]?.containerId ?? ''}
          onChoose={(chosen) => {
            if (editor.picking?.what === 'container') {
              editor.chooseContainer(editor.picking.leg, chosen)
            }
          }}
          onClose={() => editor.pick(undefined)}
        />
      )}
    </View>
  )
}

function currentFacts(drain: Drain): FactsInput {
  const current = drain.revisions.find(({ revision }) => revision === drain.revision)
  if (current === undefined) throw new Error(`${drain.number} has no revision ${drain.revision}`)
  return current.facts
}
