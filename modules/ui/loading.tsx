import { useEffect, useState, type ReactNode } from 'react'
import { View } from 'react-native'
import Svg, { Line, Path } from 'react-native-svg'
import { useTranslation } from 'react-i18next'
import { gap } from './measures'
import { Text } from './text'
import { useColours } from './theme'

/** Shown only when waiting takes a while: words after 300 ms, reassurance after ten seconds. */
export function Loading() {
  const { t } = useTranslation()
  const [waited, setWaited] = useState<'no' | 'a-while' | 'long'>('no')
  useEffect(() => {
    const soon = setTimeout(() => setWaited('a-while'), 300)
    const later = setTimeout(() => setWaited('long'), 10_000)
    return () => {
      clearTimeout(soon)
      clearTimeout(later)
    }
  }, [])
  return (
    <View
      role="status"
      aria-live="polite"
      style={{ minHeight: 120, padding: gap.medium, gap: gap.small }}
    >
      {waited !== 'no' && (
        <Text kind="hint">{waited === 'long' ? t('ui.loading.long') : t('ui.loading.short')}</Text>
      )}
    </View>
  )
}

/** Nothing here yet: what this is, and the one next act. */
export function EmptyState({
  title,
  children,
  action,
}: {
  title: string
  children?: ReactNode
  action?: ReactNode
}) {
  const colours = useColours()
  return (
    <View style={{ alignItems: 'flex-start', gap: gap.gutter, paddingVertical: gap.large }}>
      <Svg width={72} height={72} viewBox="0 0 72 72" aria-hidden>
        <Path
          d="M16 10h40v52h-40zM16 26h40M16 44h40"
          fill="none"
          stroke={colours.inkFaint}
          strokeWidth={2}
        />
        <Line x1={6} x2={66} y1={62} y2={62} stroke={colours.fluid} strokeWidth={3} />
        <Line x1={6} x2={6} y1={52} y2={62} stroke={colours.fluid} strokeWidth={3} />
      </Svg>
      <Text kind="strong">{title}</Text>
      {typeof children === 'string' ? <Text>{children}</Text> : children}
      {action}
    </View>
  )
}
