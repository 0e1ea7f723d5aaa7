import { useEffect } from 'react'
import { Pressable, Text as NativeText, View, useWindowDimensions } from 'react-native'
import { useTranslation } from 'react-i18next'
import { Icon } from './icon'
import { fonts, radius } from './measures'
import { useColours } from './theme'

const rows = [
  ['1', '2', '3'],
  ['4', '5', '6'],
  ['7', '8', '9'],
  ['point', '0', 'back'],
] as const

type Key = (typeof rows)[number][number]

/** What a key makes of the figure typed so far: one point, no leading zeros, at most 9 signs. */
export function typed(value: string, key: Key, point: string): string {
  if (key === 'back') return value.slice(0, -1)
  if (key === 'point') {
    if (/[.,]/.test(value) || value.length >= 8) return value
    return value === '' ? `0${point}` : value + point
  }
  if (value.length >= 9) return value
  return value === '0' ? key : value + key
}

/**
 * The in-page keypad: keys big enough for gloves, and no phone keyboard over the picture. `listens` takes digits from
 * a keyboard as well, wherever the focus is that takes no text itself.
 */
export function Keypad({
  value,
  onChange,
  decimalPoint = '.',
  listens = false,
}: {
  value: string
  onChange: (value: string) => void
  decimalPoint?: string
  listens?: boolean
}) {
  const { t } = useTranslation()
  const colours = useColours()
  const { height } = useWindowDimensions()
  const keyHeight = height >= 700 ? 64 : 56

  useEffect(() => {
    if (!listens) return undefined
    const hear = (event: KeyboardEvent) => {
      const on = event.target as HTMLElement | null
      if (event.ctrlKey || event.metaKey || event.altKey || on?.closest('input, textarea, select'))
        return
      const key: Key | undefined = /^\d$/.test(event.key)
        ? (event.key as Key)
        : event.key === '.' || event.key === ','
          ? 'point'
          : event.key === 'Backspace'
            ? 'back'
            : undefined
      if (key === undefined) return
      event.preventDefault()
      onChange(typed(value, key, decimalPoint))
    }
    document.addEventListener('keydown', hear)
    return () => document.removeEventListener('keydown', hear)
  }, [listens, value, onChange, decimalPoint])

  const nameOf = (key: Key) =>
    key === 'point' ? t('ui.keypad.point') : key === 'back' ? t('ui.keypad.back') : key
  return (
    <View role="group" aria-label={t('ui.keypad.name')} style={{ gap: 8 }}>
      {rows.map((row) => (
        <View key={row[0]} style={{ flexDirection: 'row', gap: 8 }}>
          {row.map((key) => (
            <Pressable
              key={key}
              role="button"
              aria-label={nameOf(key)}
              onPress={() => onChange(typed(value, key, decimalPoint))}
              style={({ pressed }) => ({
                flex: 1,
                height: keyHeight,
                alignItems: 'center',
                justifyContent: 'center',
                borderRadius: radius,
                borderWidth: pressed ? 2 : 1,
                borderColor: pressed ? colours.act : colours.edge,
                backgroundColor: pressed ? colours.actWash : colours.sheet,
              })}
            >
              {key === 'back' ? (
                <Icon name="backspace" />
              ) : (
                <NativeText style={{ fontFamily: fonts.heading, fontSize: 28, color: colours.ink }}>
                  {key === 'point' ? decimalPoint : key}
                </NativeText>
              )}
            </Pressable>
          ))}
        </View>
      ))}
    </View>
  )
}
