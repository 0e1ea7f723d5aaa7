import type {
  CSSProperties,
  HTMLInputAutoCompleteAttribute,
  HTMLInputTypeAttribute,
  Ref,
} from 'react'
import { View } from 'react-native'
import { describedBy, Labelled, useLabelIds, type Labels } from './labelled'
import { fonts, gap, radius } from './measures'
import { Text } from './text'
import { useColours } from './theme'
import { useTargetHeight } from './use-window-class'

/** The look every control shares: a 3:1 edge, 18 px words, the height of a finger. */
export function useControlStyle(hasError: boolean): CSSProperties {
  const colours = useColours()
  const height = useTargetHeight()
  return {
    minHeight: height,
    boxSizing: 'border-box',
    padding: '8px 12px',
    fontFamily: fonts.text,
    fontSize: 18,
    color: colours.ink,
    backgroundColor: colours.sheet,
    border: `${hasError ? 3 : 1}px solid ${hasError ? colours.stop.edge : colours.edge}`,
    borderRadius: radius,
    width: '100%',
  }
}

export type FieldProps = Labels & {
  value: string
  onChange: (value: string) => void
  onBlur?: () => void
  id?: string
  name?: string
  type?: HTMLInputTypeAttribute
  inputMode?: 'none' | 'text' | 'decimal' | 'numeric' | 'tel' | 'email' | 'search'
  autoComplete?: HTMLInputAutoCompleteAttribute
  /** Shown after the box and part of the name a screen reader says. */
  suffix?: string
  /** Widest value, in characters: a box as wide as its answer. */
  characters?: number
  maxLength?: number
  disabled?: boolean
  required?: boolean
  min?: string
  max?: string
  step?: string
  onSubmit?: () => void
  ref?: Ref<HTMLInputElement>
}

/** One line of text with its label. Dates and times are typed or picked (`type="date"`, `type="time"`). */
export function Field({ ref, ...props }: FieldProps) {
  const ids = useLabelIds(props.id)
  const style = useControlStyle(props.error !== undefined)
  const isFigure = props.inputMode === 'decimal' || props.inputMode === 'numeric'
  return (
    <Labelled ids={ids} labels={props}>
      <View style={{ flexDirection: 'row', alignItems: 'center', gap: gap.small }}>
        <input
          ref={ref}
          id={ids.control}
          name={props.name}
          type={props.type ?? 'text'}
          inputMode={props.inputMode}
          autoComplete={props.autoComplete ?? 'off'}
          value={props.value}
          onChange={(event) => props.onChange(event.target.value)}
          onBlur={props.onBlur}
          onKeyDown={(event) => {
            if (event.key === 'Enter' && props.onSubmit !== undefined) {
              event.preventDefault()
              props.onSubmit()
            }
          }}
          disabled={props.disabled}
          required={props.required}
          min={props.min}
          max={props.max}
          step={props.step}
          maxLength={props.maxLength}
          aria-invalid={props.error !== undefined}
          aria-describedby={describedBy(ids, props)}
          style={{
            ...style,
            ...(props.characters === undefined
              ? {}
              : { width: `${props.characters + 3}ch`, maxWidth: '100%' }),
            ...(isFigure ? { fontVariantNumeric: 'tabular-nums' } : {}),
          }}
        />
        {props.suffix !== undefined && <Text>{props.suffix}</Text>}
      </View>
    </Labelled>
  )
}

/** Several lines of text. */
export function TextArea(
  props: Labels & {
    value: string
    onChange: (value: string) => void
    id?: string
    name?: string
    rows?: number
    maxLength?: number
    disabled?: boolean
  },
) {
  const ids = useLabelIds(props.id)
  const style = useControlStyle(props.error !== undefined)
  return (
    <Labelled ids={ids} labels={props}>
      <textarea
        id={ids.control}
        name={props.name}
        rows={props.rows ?? 3}
        maxLength={props.maxLength}
        disabled={props.disabled}
        value={props.value}
        onChange={(event) => props.onChange(event.target.value)}
        aria-invalid={props.error !== undefined}
        aria-describedby={describedBy(ids, props)}
        style={{ ...style, resize: 'vertical' }}
      />
    </Labelled>
  )
}

export type Option = { value: string; label: string; group?: string; disabled?: boolean }

/** A choice among many, by the browser's own list: keyboard, search by letter and big touch list come with it. */
export function Select(
  props: Labels & {
    value: string
    onChange: (value: string) => void
    options: readonly Option[]
    /** First entry with no value, like "Choose a hauler". */
    placeholder?: string
    id?: string
    name?: string
    disabled?: boolean
  },
) {
  const ids = useLabelIds(props.id)
  const style = useControlStyle(props.error !== undefined)
  const groups = [...new Set(props.options.map(({ group }) => group ?? ''))]
  const entry = (option: Option) => (
    <option key={option.value} value={option.value} disabled={option.disabled}>
      {option.label}
    </option>
  )
  return (
    <Labelled ids={ids} labels={props}>
      <select
        id={ids.control}
        name={props.name}
        value={props.value}
        disabled={props.disabled}
        onChange={(event) => props.onChange(event.target.value)}
        aria-invalid={props.error !== undefined}
        aria-describedby={describedBy(ids, props)}
        style={style}
      >
        {props.placeholder !== undefined && <option value="">{props.placeholder}</option>}
        {groups.map((group) => {
          const own = props.options.filter((option) => (option.group ?? '') === group)
          return group === '' ? (
            own.map(entry)
          ) : (
            <optgroup key={group} label={group}>
              {own.map(entry)}
            </optgroup>
          )
        })}
      </select>
    </Labelled>
  )
}
