import type { ReactNode } from 'react'
import { View, type StyleProp, type ViewStyle } from 'react-native'
import { gap, radius } from './measures'
import { useColours } from './theme'

/** A flat sheet with a hairline; no shadow, which the sun would eat. */
export function Card({
  children,
  style,
  role,
  label,
}: {
  children: ReactNode
  style?: StyleProp<ViewStyle>
  role?: 'region' | 'group' | 'status'
  label?: string
}) {
  const colours = useColours()
  return (
    <View
      role={role}
      aria-label={label}
      style={[
        {
          backgroundColor: colours.sheet,
          borderColor: colours.hairline,
          borderWidth: 1,
          borderRadius: radius,
          padding: gap.medium,
          gap: gap.small,
        },
        style,
      ]}
    >
      {children}
    </View>
  )
}

/** Things under one another. */
export function Stack({
  children,
  space = gap.medium,
  style,
}: {
  children: ReactNode
  space?: number
  style?: StyleProp<ViewStyle>
}) {
  return <View style={[{ gap: space }, style]}>{children}</View>
}

/** Things side by side that wrap. */
export function Row({
  children,
  space = gap.small,
  style,
  align = 'center',
}: {
  children: ReactNode
  space?: number
  style?: StyleProp<ViewStyle>
  align?: ViewStyle['alignItems']
}) {
  return (
    <View
      style={[{ flexDirection: 'row', flexWrap: 'wrap', gap: space, alignItems: align }, style]}
    >
      {children}
    </View>
  )
}
