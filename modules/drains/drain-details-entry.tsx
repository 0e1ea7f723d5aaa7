import { useState } from 'react'
import { Controller, useWatch, type UseFormReturn } from 'react-hook-form'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { filterSizes, filterStates } from '@/shared/contracts/drains'
import type { Fluid, Site, Stream } from '@/shared/contracts/set-up'
import { localTime } from '@/shared/calendar'
import { measuringMethods, spreadOf, type MeasuringMethod } from '@/shared/quantities/methods'
import { unitSymbol, unitWordsKey } from '@/shared/quantities/units'
import { Button } from '../ui/button'
import { Stack } from '../ui/card'
import { ChoiceChips, Stepper } from '../ui/choice'
import { Field, Select, TextArea } from '../ui/field'
import { gap } from '../ui/measures'
import { Text } from '../ui/text'
import { instantOf, isWholeLocal, localNow } from './drain-time'
import type { DrainTime, DrainValues, FilterSize } from './drain-values'

type Props = {
  form: UseFormReturn<DrainValues>
  site: Site
  streams: readonly Stream[]
  fluids: readonly Fluid[]
}

/** Below the fold: what fluid, how it was measured, what came with it, when, and a note. */
export function DrainDetailsEntry({ form, site, streams, fluids }: Props) {
  const { t } = useTranslation()
  const { control, formState, setValue } = form
  const errors = formState.errors
  return (
    <Stack>
      <Controller
        control={control}
        name="fluidId"
        render={({ field }) => (
          <Select
            id="drain-fluid"
            label={t('drains.form.fluid')}
            placeholder={t('drains.stream.title')}
            value={field.value}
            onChange={(fluidId) => {
              field.onChange(fluidId)
              const fluid = fluids.find(({ id }) => id === fluidId)
              if (fluid !== undefined) setValue('streamId', fluid.streamId, { shouldDirty: true })
            }}
            options={fluids.map(({ id, name }) => ({ value: id, label: name }))}
          />
        )}
      />
      <Controller
        control={control}
        name="streamId"
        render={({ field }) => (
          <Select
            label={t('drains.form.stream')}
            hint={t('drains.stream.caution')}
            placeholder={t('drains.form.chooseStream')}
            value={field.value}
            error={errors.streamId?.message}
            onChange={field.onChange}
            options={streams.map(({ id, name }) => ({ value: id, label: name }))}
          />
        )}
      />
      <Controller
        control={control}
        name="method"
        render={({ field }) => (
          <ChoiceChips
            label={t('drains.form.method')}
            value={field.value}
            onChange={(method) => field.onChange(method as MeasuringMethod)}
            options={measuringMethods.map((method) => ({
              value: method,
              label: `${t(`drains.methods.${method}`)} ${t('drains.spread', { percent: spreadOf(method) })}`,
            }))}
          />
        )}
      />
      <PartsEntry form={form} />
      <TimeEntry form={form} site={site} />
      <Controller
        control={control}
        name="note"
        render={({ field }) => (
          <TextArea
            label={t('drains.form.note')}
            hint={t('drains.form.noteHint')}
            maxLength={1000}
            value={field.value}
            onChange={field.onChange}
          />
        )}
      />
    </Stack>
  )
}

/** Filters, absorbents, breather caps and refill: a drawer, since most drains bring none. */
function PartsEntry({ form }: { form: UseFormReturn<DrainValues> }) {
  const { t } = useTranslation()
  const { control, formState } = form
  const [counts, breatherCaps, absorbents, refill, unit, massUnit] = useWatch({
    control,
    name: ['filterCounts', 'breatherCaps', 'absorbentsTyped', 'refillTyped', 'unit', 'massUnit'],
  })
  const hasParts =
    filterSizes.some((size) => counts[size] > 0) ||
    breatherCaps > 0 ||
    absorbents !== '' ||
    refill !== ''
  const [isOpened, setOpened] = useState(false)
  const isOpen = isOpened || hasParts
  const hasFilters = filterSizes.some((size) => counts[size] > 0)
  if (!isOpen) {
    return (
      <Button
        icon="filter"
        label={t('drains.form.partsOpen')}
        expanded={false}
        onPress={() => setOpened(true)}
      />
    )
  }
  const count = (size: FilterSize) => (
    <Controller
      key={size}
      control={control}
      name={`filterCounts.${size}`}
      render={({ field }) => (
        <Stepper
          label={t(`drains.form.filterSizes.${size}`)}
          fewerLabel={t('drains.form.fewer', { of: t(`drains.form.filterSizes.${size}`) })}
          moreLabel={t('drains.form.oneMore', { of: t(`drains.form.filterSizes.${size}`) })}
          value={field.value}
          onChange={field.onChange}
        />
      )}
    />
  )
  return (
    <View role="group" aria-label={t('drains.form.parts')} style={{ gap: gap.medium }}>
      <Text kind="strong">{t('drains.form.parts')}</Text>
      <View style={{ gap: gap.small }}>{filterSizes.map(count)}</View>
      {hasFilters && (
        <Controller
          control={control}
          name="filterState"
          render={({ field }) => (
            <ChoiceChips
              label={t('drains.form.filterState')}
              value={field.value}
              onChange={field.onChange}
              options={filterStates.map((state) => ({
                value: state,
                label: t(`drains.form.filterStates.${state}`),
              }))}
            />
          )}
        />
      )}
      <Controller
        control={control}
        name="absorbentsTyped"
        render={({ field }) => (
          <Field
            {...field}
            label={t('drains.form.absorbentsIn', { unit: t(unitWordsKey(massUnit), { count: 2 }) })}
            inputMode="decimal"
            characters={7}
            suffix={unitSymbol(massUnit)}
            error={formState.errors.absorbentsTyped?.message}
          />
        )}
      />
      <Controller
        control={control}
        name="breatherCaps"
        render={({ field }) => (
          <Stepper
            label={t('drains.form.breatherCaps')}
            fewerLabel={t('drains.form.fewer', { of: t('drains.form.breatherCaps') })}
            moreLabel={t('drains.form.oneMore', { of: t('drains.form.breatherCaps') })}
            value={field.value}
            onChange={field.onChange}
            most={200}
          />
        )}
      />
      <Controller
        control={control}
        name="refillTyped"
        render={({ field }) => (
          <Field
            {...field}
            label={t('drains.form.refillIn', { unit: t(unitWordsKey(unit), { count: 2 }) })}
            inputMode="decimal"
            characters={7}
            suffix={unitSymbol(unit)}
            error={formState.errors.refillTyped?.message}
          />
        )}
      />
    </View>
  )
}

const timeKinds = ['now', 'ago15', 'ago60', 'pick'] as const

/** Now in one tap, a while ago in one, any other time typed or picked on the site's own clock. */
function TimeEntry({ form, site }: { form: UseFormReturn<DrainValues>; site: Site }) {
  const { t } = useTranslation()
  const time = useWatch({ control: form.control, name: 'time' })
  const error = form.formState.errors.time?.message
  const set = (next: DrainTime) => form.setValue('time', next, { shouldDirty: true })
  const kind = time.kind === 'ago' ? (time.minutes === 15 ? 'ago15' : 'ago60') : time.kind
  const picked = time.kind === 'at' && isWholeLocal(time.local) ? time : undefined
  const adjusted = picked === undefined ? undefined : instantOf(picked, new Date(0), site.timeZone)
  return (
    <View style={{ gap: gap.small }}>
      <ChoiceChips
        label={t('drains.form.time')}
        value={kind === 'at' ? 'pick' : kind}
        error={time.kind === 'at' ? undefined : error}
        options={timeKinds.map((value) => ({ value, label: t(`drains.form.times.${value}`) }))}
        onChange={(value) => {
          if (value === 'now') set({ kind: 'now' })
          else if (value === 'pick') set({ kind: 'at', local: localNow(new Date(), site.timeZone) })
          else set({ kind: 'ago', minutes: value === 'ago15' ? 15 : 60 })
        }}
      />
      {time.kind === 'at' && (
        <Field
          label={t('drains.form.timeAt', { site: site.name })}
          type="datetime-local"
          characters={18}
          max={localNow(new Date(), site.timeZone)}
          value={time.local}
          error={error}
          onChange={(local) => set({ kind: 'at', local: local.slice(0, 16) })}
        />
      )}
      {adjusted?.adjusted === 'moved-forward' && (
        <Text kind="hint" live="polite">
          {t('drains.form.movedForward', { time: localTime(adjusted.occurredAt, site.timeZone) })}
        </Text>
      )}
      {adjusted?.adjusted === 'first-of-two' && (
        <Text kind="hint" live="polite">
          {t('drains.form.firstOfTwo')}
        </Text>
      )}
    </View>
  )
}
