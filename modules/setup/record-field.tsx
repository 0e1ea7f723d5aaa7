import { useTranslation } from 'react-i18next'
import type { Catalogue } from '@/shared/contracts/set-up'
import { roles } from '@/shared/policies'
import { massUnits, unitSymbol, volumeUnits, type VolumeUnit } from '@/shared/quantities/units'
import { Stack } from '../ui/card'
import { Checkbox } from '../ui/choice'
import { Field, Select, TextArea, type Option } from '../ui/field'
import { Text } from '../ui/text'
import type { Choices, FieldSpec } from './kinds'

/** One field of a set-up form, by its spec. */
export function RecordField({
  field,
  value,
  catalogue,
  unit,
  isDisabled,
  error,
  onChange,
}: {
  field: FieldSpec
  value: string | string[]
  catalogue: Catalogue
  unit: VolumeUnit
  isDisabled: boolean
  error: string | undefined
  onChange: (value: string | string[]) => void
}) {
  const { t } = useTranslation()
  const label = t(field.isOptional === true ? 'setup.optional' : 'setup.needed', {
    label: t(`setup.labels.${field.name}`),
  })
  const hint = field.hasHint === true ? t(`setup.hints.${field.name}`) : undefined
  const shared = { id: `field-${field.name}`, name: field.name, label, hint, error }
  const text = typeof value === 'string' ? value : ''
  const { input, choices } = field
  if (input === 'select' && choices !== undefined) {
    return (
      <Select
        {...shared}
        placeholder={t('setup.choose')}
        value={text}
        disabled={isDisabled}
        onChange={onChange}
        options={optionsOf(t, choices, catalogue)}
      />
    )
  }
  if (input === 'many' && choices !== undefined) {
    const chosen = Array.isArray(value) ? value : []
    return (
      <Stack space={0}>
        <Text kind="label">{label}</Text>
        {hint !== undefined && <Text kind="hint">{hint}</Text>}
        {optionsOf(t, choices, catalogue).map((option) => (
          <Checkbox
            key={option.value}
            label={option.label}
            checked={chosen.includes(option.value)}
            disabled={isDisabled}
            onChange={(isChecked) => {
              onChange(
                isChecked
                  ? [...chosen, option.value]
                  : chosen.filter((one) => one !== option.value),
              )
            }}
          />
        ))}
      </Stack>
    )
  }
  if (input === 'lines')
    return (
      <TextArea
        {...shared}
        {...mostOf(field)}
        value={text}
        disabled={isDisabled}
        onChange={onChange}
      />
    )
  const isFigure = input === 'figure' || input === 'quantity'
  return (
    <Field
      {...shared}
      {...mostOf(field)}
      value={text}
      disabled={isDisabled}
      onChange={onChange}
      type={input === 'password' ? 'password' : 'text'}
      autoComplete={input === 'password' ? 'new-password' : 'off'}
      {...(isFigure ? { inputMode: 'decimal' as const, characters: 12 } : {})}
      {...(input === 'email' ? { inputMode: 'email' as const } : {})}
      {...(input === 'tel' ? { inputMode: 'tel' as const } : {})}
      {...(input === 'quantity' ? { suffix: unitSymbol(unit) } : {})}
    />
  )
}

function mostOf({ most }: FieldSpec) {
  return most === undefined ? {} : { maxLength: most }
}

/** What a select or a list of boxes offers. */
export function optionsOf(
  t: ReturnType<typeof useTranslation>['t'],
  choices: Choices,
  catalogue: Catalogue,
): Option[] {
  switch (choices.from) {
    case 'words':
      return choices.of.map((value) => ({
        value,
        label: t(`setup.choices.${choices.words}.${value}`),
      }))
    case 'roles':
      return roles.map((value) => ({ value, label: t(`session.roles.${value}`) }))
    case 'sites':
      return catalogue.sites.map(({ id, code, name }) => ({
        value: id,
        label: `${code} · ${name}`,
      }))
    case 'streams':
      return catalogue.streams.map(({ id, name }) => ({ value: id, label: name }))
    case 'fluids':
      return catalogue.fluids.map(({ id, name }) => ({ value: id, label: name }))
    case 'volume-units':
      return volumeUnits.map((value) => ({ value, label: t(`units.${value}`, { count: 2 }) }))
    case 'mass-units':
      return massUnits.map((value) => ({ value, label: t(`units.${value}`, { count: 2 }) }))
    case 'time-zones':
      return Intl.supportedValuesOf('timeZone').map((value) => ({ value, label: value }))
  }
}
