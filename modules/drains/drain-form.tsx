import { useId, useRef, useState } from 'react'
import { get, useForm } from 'react-hook-form'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Site } from '@/shared/contracts/set-up'
import { isPositive } from '@/shared/quantities/decimals'
import { formatTyped } from '@/shared/quantities/format'
import { unitWordsKey, type VolumeUnit } from '@/shared/quantities/units'
import { useQueuedRecords } from '../offline/queue-provider'
import { isUnsent } from '../offline/queued-record'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Checkbox } from '../ui/choice'
import { Keypad } from '../ui/keypad'
import { Notice } from '../ui/notice'
import { gap } from '../ui/measures'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'
import { useWindowClass } from '../ui/use-window-class'
import { ContainerPicker } from './container-picker'
import { DrainDetailsEntry } from './drain-details-entry'
import { DrainFormTop } from './drain-form-top'
import { readVolume } from './drain-legs'
import { prefersPhoneKeys, rememberPhoneKeys } from './drain-preferences'
import { DrainQuestionsPanel, type QuestionChoice } from './drain-questions-panel'
import { DrainSaved } from './drain-saved'
import type { DrainMachine, DrainValues } from './drain-values'
import { LegsEntry } from './legs-entry'
import { machineName } from './machine-name'
import { MachinePicker } from './machine-picker'
import { namesOfDrain } from './names-of-drain'
import { PickRow } from './pick-row'
import { roomAfter } from './room-after'
import type { DrainChoices } from './use-drain-choices'
import { useDrainEditor } from './use-drain-editor'
import { forgetDrainDraft, useKeptDraft } from './use-drain-draft'
import { useSaveDrain } from './use-save-drain'
import { VolumeEntry } from './volume-entry'

export type DrainStart = {
  recordId: string
  values: DrainValues
  /** Taken up again from the phone: said once, with a way to begin empty. */
  isDraft: boolean
  title: string
}

type Props = {
  start: DrainStart
  site: Site
  choices: DrainChoices
  /** A new form: with the same machine, or empty. */
  onAnother: (machine: DrainMachine) => void
}

/** The drain form: everything to save a usual drain fits 360 x 640 without scrolling; the rest is below. */
export function DrainForm({ start, site, choices, onAnother }: Props) {
  const { t } = useTranslation()
  const colours = useColours()
  const router = useRouter()
  const { person } = useSession()
  const windowClass = useWindowClass()
  const errorId = useId()
  const volumeField = useRef<HTMLInputElement>(null)
  const [usesPhoneKeys, setPhoneKeys] = useState(prefersPhoneKeys)
  const waiting = useQueuedRecords().filter(isUnsent)
  const form = useForm<DrainValues>({ defaultValues: start.values })
  const { errors } = form.formState
  const editor = useDrainEditor(form, site, choices)
  const { values } = editor
  const saving = useSaveDrain({
    form,
    recordId: start.recordId,
    personId: person.id,
    site,
    known: { ...choices, waiting: waiting.filter(({ id }) => id !== start.recordId) },
    names: (body) => namesOfDrain(body, choices),
  })
  useKeptDraft(form.control, {
    personId: person.id,
    recordId: start.recordId,
    siteId: site.id,
    isKept: !saving.isSaved,
  })

  const read = readVolume(values.typed, values.unit)
  const container = editor.containerOf(0)
  const isSplit = values.legs.length > 1
  const poured = editor.litresOfLeg(0)
  const isOver =
    !isSplit &&
    container !== undefined &&
    isPositive(container.roomLitres) &&
    roomAfter(container, poured).isOver
  const saveLabel = read.ok
    ? t('drains.form.save', { volume: formatTyped(read.value, read.unit) })
    : t('drains.form.saveNothing')
  const save = (presets?: Record<string, string>) => void saving.save(presets)
  const errorOf = (field: string) =>
    (get(errors, field) as { message?: string } | undefined)?.message
  const topError =
    errorOf('typed') ??
    errorOf('machine') ??
    errorOf('legs.0.containerId') ??
    errors.legs?.message ??
    errorOf('legs.root')
  const hasQuestions = saving.openQuestions.length > 0

  function follow(choice: QuestionChoice) {
    saving.dropQuestions()
    if (choice.kind === 'split') editor.split()
    else if (choice.kind === 'other-machine') editor.pick({ what: 'machine' })
    else if (choice.kind === 'set-volume') editor.setVolume(choice.typed, choice.unit)
    else if (choice.kind === 'change-volume') volumeField.current?.focus()
    else if (choice.kind === 'change-fluid') document.getElementById('drain-fluid')?.focus()
    else if (choice.kind === 'other-container') {
      const leg = values.legs.findIndex(
        (_leg, position) => editor.containerOf(position)?.code === choice.containerCode,
      )
      editor.pick({ what: 'container', leg: Math.max(0, leg) })
    } else {
      void forgetDrainDraft(person.id)
      router.replace(choice.drainId === undefined ? '/drains' : `/drains/${choice.drainId}`)
    }
  }

  if (saving.isSaved) {
    return (
      <DrainSaved
        recordId={start.recordId}
        values={values}
        choices={choices}
        unit={read.ok ? (read.unit as VolumeUnit) : values.unit}
        onSameMachine={() => onAnother(values.machine)}
        onAnother={() => onAnother(null)}
      />
    )
  }

  const entry = (
    <View style={{ gap: gap.small }}>
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
        detail={editor.machine?.fluidName}
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
      <VolumeEntry
        typed={values.typed}
        unit={values.unit}
        onType={editor.type}
        onUnitTyped={editor.unitTyped}
        onNextUnit={editor.nextUnit}
        onSubmit={save}
        usesPhoneKeys={usesPhoneKeys || isSplit}
        errorId={topError === undefined ? undefined : errorId}
        container={container}
        pouredLitres={poured}
        fieldRef={volumeField}
      />
      {editor.unitSaid !== undefined && (
        <Text kind="hint" role="status">
          {t('drains.form.unitSwitched', { unit: t(unitWordsKey(editor.unitSaid), { count: 2 }) })}
        </Text>
      )}
      {isSplit && (
        <LegsEntry
          legs={values.legs}
          shares={editor.shares}
          containers={choices.containers}
          unit={values.unit}
          errorOf={errorOf}
          onType={(leg, typed) => form.setValue(`legs.${leg}.typed`, typed, { shouldDirty: true })}
          onPick={(leg) => editor.pick({ what: 'container', leg })}
          onAdd={editor.split}
          onRemove={editor.removeLeg}
        />
      )}
      {hasQuestions && read.ok ? (
        <DrainQuestionsPanel
          questions={saving.openQuestions}
          answered={saving.answeredQuestions}
          byPhone={saving.askedByPhone}
          typedVolume={{ value: read.value, unit: read.unit as VolumeUnit }}
          canSplit={!isSplit}
          shownIn={{ unit: read.unit as VolumeUnit, timeZone: site.timeZone }}
          onChoice={follow}
          onKeep={saving.answer}
          onTakeBack={saving.takeBack}
        />
      ) : (
        !isSplit && !usesPhoneKeys && <Keypad value={values.typed} onChange={editor.type} listens />
      )}
      {saving.problem !== undefined && (
        <Notice kind="stop" title={saving.problem.title}>
          {saving.problem.detail}
        </Notice>
      )}
      {topError !== undefined && (
        <Text kind="strong" id={errorId} role="alert" colour={colours.stop.text}>
          {topError}
        </Text>
      )}
      {isOver && !hasQuestions ? (
        <View style={{ flexDirection: 'row', gap: gap.small }}>
          <View style={{ flex: 1 }}>
            <Button
              kind="primary"
              isWide
              isLarge
              label={t('drains.form.split')}
              onPress={editor.split}
            />
          </View>
          <View style={{ flex: 1 }}>
            <Button
              isWide
              busy={saving.isAsking}
              label={t('drains.questions.over-fill-line.keeps.already-poured')}
              hint={saveLabel}
              onPress={() =>
                save({
                  'over-fill-line': t('drains.questions.over-fill-line.keeps.already-poured'),
                })
              }
            />
          </View>
        </View>
      ) : (
        <Button
          kind="primary"
          isLarge
          isWide
          busy={saving.isAsking}
          label={saving.isAsking ? t('drains.form.saving') : saveLabel}
          onPress={() => save()}
        />
      )}
    </View>
  )

  const details = (
    <View style={{ gap: gap.medium }}>
      {start.isDraft && (
        <Notice kind="note" title={t('drains.form.draftBack')}>
          <Button
            kind="quiet"
            label={t('drains.form.draftThrow')}
            onPress={() => {
              void forgetDrainDraft(person.id).then(() => onAnother(null))
            }}
          />
        </Notice>
      )}
      {!isSplit && <Button icon="plus" label={t('drains.form.addLeg')} onPress={editor.split} />}
      <DrainDetailsEntry
        form={form}
        site={site}
        streams={choices.streams}
        fluids={choices.catalogue.fluids}
      />
      <Checkbox
        label={t('drains.form.phoneKeys')}
        checked={usesPhoneKeys}
        onChange={(isOn) => {
          rememberPhoneKeys(isOn)
          setPhoneKeys(isOn)
        }}
      />
    </View>
  )
  const isWide = windowClass === 'desk' || windowClass === 'wide'

  return (
    <View
      role="main"
      id="main"
      style={{
        flex: 1,
        width: '100%',
        maxWidth: isWide ? 1080 : 560,
        alignSelf: windowClass === 'phone' ? 'center' : 'flex-start',
        paddingHorizontal: isWide ? gap.large : gap.gutter,
        paddingBottom: gap.huge,
        // With 4 px here the usual drain fits 640 px to the pixel.
        gap: gap.tiny,
      }}
    >
      <DrainFormTop title={start.title} />
      <View style={isWide ? { flexDirection: 'row', gap: gap.huge } : { gap: gap.large }}>
        <View style={isWide ? { width: 440 } : undefined}>{entry}</View>
        <View style={isWide ? { flex: 1 } : undefined}>{details}</View>
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
