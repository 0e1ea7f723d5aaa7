import type { ReactNode } from 'react'
import { Text as NativeText, type StyleProp, type TextStyle } from 'react-native'
import { useColours } from './theme'
import { fonts } from './measures'
import { useWindowClass } from './use-window-class'

export type TextKind = 'body' | 'label' | 'hint' | 'strong' | 'code' | 'figure' | 'key'

/** Words. `figure` has digits of one width; `key` is the large number of a form; `code` is for numbers of things. */
export function Text({
  kind = 'body',
  children,
  style,
  struck = false,
  id,
  numberOfLines,
  role,
  live,
  label,
  colour,
}: {
  kind?: TextKind
  children: ReactNode
  style?: StyleProp<TextStyle>
  /** Struck through: an old value that is kept. */
  struck?: boolean
  id?: string
  numberOfLines?: number
  role?: 'alert' | 'status'
  /** Announced when it changes. */
  live?: 'polite' | 'assertive'
  /** What a screen reader says instead. */
  label?: string
  colour?: string
}) {
  const colours = useColours()
  const isPhone = useWindowClass() === 'phone'
  const body = isPhone ? 18 : 16
  const small = isPhone ? 15 : 14
  const kinds: Record<TextKind, TextStyle> = {
    body: { fontSize: body, lineHeight: body * 1.5, color: colours.ink },
    label: { fontSize: small, lineHeight: small * 1.4, color: colours.inkSoft, fontWeight: '500' },
    hint: { fontSize: small, lineHeight: small * 1.4, color: colours.inkFaint },
    strong: { fontSize: body, lineHeight: body * 1.5, color: colours.ink, fontWeight: '700' },
    code: { fontSize: body, lineHeight: body * 1.5, color: colours.ink, fontFamily: fonts.code },
    figure: {
      fontSize: body,
      lineHeight: body * 1.5,
      color: colours.ink,
      fontVariant: ['tabular-nums'],
    },
    key: {
      fontSize: 52,
      lineHeight: 58,
      color: colours.ink,
      fontFamily: fonts.heading,
      fontVariant: ['tabular-nums'],
    },
  }
  return (
    <NativeText
      id={id}
      role={role}
      aria-live={live}
      aria-label={label}
      numberOfLines={numberOfLines}
      style={[
        { fontFamily: fonts.text },
        kinds[kind],
        struck && { textDecorationLine: 'line-through', color: colours.inkFaint },
        colour !== undefined && { color: colour },
        style,
      ]}
    >
      {children}
    </NativeText>
  )
}
