import { useEffect, useRef, type ReactNode } from 'react'
import { Text as NativeText, View } from 'react-native'
import { fonts } from './measures'
import { useColours } from './theme'
import { useWindowClass } from './use-window-class'

/** A heading; level 1 carries the level line with the gauge tick at its left end. */
export function Heading({
  level,
  children,
  id,
  takesFocus = false,
}: {
  level: 1 | 2 | 3
  children: ReactNode
  id?: string
  /** Takes the focus when it appears: a new page, or a card that tells what was done. */
  takesFocus?: boolean
}) {
  const colours = useColours()
  const isPhone = useWindowClass() === 'phone'
  const here = useRef<NativeText>(null)
  useEffect(() => {
    if (takesFocus) (here.current as unknown as HTMLElement | null)?.focus({ preventScroll: true })
  }, [takesFocus])
  const size = level === 1 ? (isPhone ? 28 : 32) : level === 2 ? 22 : 18
  const words = (
    <NativeText
      ref={here}
      id={id}
      role="heading"
      aria-level={level}
      {...(takesFocus ? { tabIndex: -1 as const } : {})}
      style={{
        fontFamily: fonts.heading,
        fontWeight: '600',
        fontSize: size,
        lineHeight: size * 1.25,
        color: colours.ink,
      }}
    >
      {children}
    </NativeText>
  )
  if (level !== 1) return words
  return (
    <View style={{ gap: 4, alignItems: 'stretch', flexShrink: 1 }}>
      {words}
      <LevelLine />
    </View>
  )
}

/** The level line: one rule with a short gauge tick at its left end. */
export function LevelLine() {
  const colours = useColours()
  return (
    <View aria-hidden style={{ height: 10, flexDirection: 'row', alignItems: 'flex-end' }}>
      <View style={{ width: 3, height: 10, backgroundColor: colours.ink }} />
      <View style={{ flex: 1, height: 3, backgroundColor: colours.ink }} />
    </View>
  )
}
