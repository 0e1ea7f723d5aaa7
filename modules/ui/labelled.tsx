import { useId, type ReactNode } from 'react'
import { View } from 'react-native'
import { fonts, gap } from './measures'
import { Text } from './text'
import { useColours } from './theme'
import { useWindowClass } from './use-window-class'

export type Labels = {
  label: string
  /** One short line, like "Read it off the pump meter". */
  hint?: string | undefined
  error?: string | undefined
}

/** Ids that connect a control with its label, hint and error. */
export function useLabelIds(id?: string) {
  const made = useId()
  const base = id ?? made
  return { control: base, hint: `${base}-hint`, error: `${base}-error` }
}

export function describedBy(
  ids: { hint: string; error: string },
  { hint, error }: Labels,
): string | undefined {
  const names = [hint === undefined ? '' : ids.hint, error === undefined ? '' : ids.error].filter(
    Boolean,
  )
  return names.length === 0 ? undefined : names.join(' ')
}

/** Label above, one line of hint, the control, and what to mend in place. */
export function Labelled({
  ids,
  labels,
  children,
}: {
  ids: { control: string; hint: string; error: string }
  labels: Labels
  children: ReactNode
}) {
  const colours = useColours()
  const isPhone = useWindowClass() === 'phone'
  return (
    <View style={{ gap: gap.tiny }}>
      <label
        htmlFor={ids.control}
        style={{
          fontFamily: fonts.text,
          fontSize: isPhone ? 16 : 15,
          fontWeight: 600,
          color: colours.inkSoft,
        }}
      >
        {labels.label}
      </label>
      {labels.hint !== undefined && (
        <Text kind="hint" id={ids.hint}>
          {labels.hint}
        </Text>
      )}
      {children}
      {labels.error !== undefined && (
        <Text kind="strong" id={ids.error} role="alert" colour={colours.stop.text}>
          {labels.error}
        </Text>
      )}
    </View>
  )
}
