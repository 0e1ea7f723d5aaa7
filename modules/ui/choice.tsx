import { useId } from 'react'
import { View } from 'react-native'
import { Button } from './button'
import { fonts, gap, radius } from './measures'
import { Text } from './text'
import { useColours } from './theme'
import { useTargetHeight } from './use-window-class'

/** One of a few, all in sight: chips that are radio buttons to a keyboard and a screen reader. */
export function ChoiceChips({
  label,
  options,
  value,
  onChange,
  error,
  isLabelHidden = false,
}: {
  label: string
  options: readonly { value: string; label: string }[]
  value: string
  onChange: (value: string) => void
  error?: string | undefined
  isLabelHidden?: boolean
}) {
  const colours = useColours()
  const height = useTargetHeight()
  const name = useId()
  return (
    <fieldset
      style={{ border: 0, margin: 0, padding: 0, minWidth: 0 }}
      aria-describedby={error === undefined ? undefined : `${name}-error`}
    >
      <legend
        style={
          isLabelHidden
            ? {
                position: 'absolute',
                width: 1,
                height: 1,
                overflow: 'hidden',
                clipPath: 'inset(50%)',
              }
            : {
                fontFamily: fonts.text,
                fontSize: 15,
                fontWeight: 600,
                color: colours.inkSoft,
                padding: 0,
                marginBottom: 4,
              }
        }
      >
        {label}
      </legend>
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: gap.small }}>
        {options.map((option) => {
          const isChosen = option.value === value
          return (
            <label
              key={option.value}
              style={{
                display: 'inline-flex',
                alignItems: 'center',
                gap: 8,
                minHeight: height,
                boxSizing: 'border-box',
                padding: '0 14px',
                borderRadius: radius,
                border: `${isChosen ? 2 : 1}px solid ${isChosen ? colours.act : colours.edge}`,
                backgroundColor: isChosen ? colours.actWash : colours.sheet,
                color: colours.ink,
                fontFamily: fonts.text,
                fontSize: 17,
                fontWeight: isChosen ? 700 : 500,
                cursor: 'pointer',
              }}
            >
              <input
                type="radio"
                name={name}
                value={option.value}
                checked={isChosen}
                onChange={() => onChange(option.value)}
                style={{ width: 20, height: 20, margin: 0, accentColor: colours.act }}
              />
              {option.label}
            </label>
          )
        })}
      </View>
      {error !== undefined && (
        <Text kind="strong" id={`${name}-error`} role="alert" colour={colours.stop.text}>
          {error}
        </Text>
      )}
    </fieldset>
  )
}

export function Checkbox({
  label,
  checked,
  onChange,
  id,
  disabled = false,
}: {
  label: string
  checked: boolean
  onChange: (checked: boolean) => void
  id?: string
  disabled?: boolean
}) {
  const colours = useColours()
  const height = useTargetHeight()
  return (
    <label
      style={{
        display: 'flex',
        alignItems: 'center',
        gap: 12,
        minHeight: height,
        color: colours.ink,
        fontFamily: fonts.text,
        fontSize: 17,
        cursor: disabled ? 'default' : 'pointer',
      }}
    >
      <input
        id={id}
        type="checkbox"
        checked={checked}
        disabled={disabled}
        onChange={(event) => onChange(event.target.checked)}
        style={{ width: 24, height: 24, margin: 0, flexShrink: 0, accentColor: colours.act }}
      />
      <span>{label}</span>
    </label>
  )
}

/** A small count: two big keys and the number between them. */
export function Stepper({
  label,
  value,
  onChange,
  fewerLabel,
  moreLabel,
  most = 500,
}: {
  label: string
  value: number
  onChange: (value: number) => void
  fewerLabel: string
  moreLabel: string
  most?: number
}) {
  return (
    <View
      role="group"
      aria-label={label}
      style={{ flexDirection: 'row', alignItems: 'center', gap: gap.small }}
    >
      <View style={{ flex: 1 }}>
        <Text>{label}</Text>
      </View>
      <Button
        isIconOnly
        label={fewerLabel}
        icon="minus"
        onPress={() => onChange(Math.max(0, value - 1))}
        disabled={value === 0}
      />
      <View style={{ minWidth: 40, alignItems: 'center' }}>
        <Text kind="figure" live="polite" style={{ fontSize: 22 }}>
          {String(value)}
        </Text>
      </View>
      <Button
        isIconOnly
        label={moreLabel}
        icon="plus"
        onPress={() => onChange(Math.min(most, value + 1))}
      />
    </View>
  )
}
