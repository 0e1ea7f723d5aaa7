import { useEffect, useRef } from 'react'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import Pad from 'signature_pad'
import { Button } from './button'
import { LevelLine } from './heading'
import { Text } from './text'
import { useColours } from './theme'

export type Strokes = [number, number][][]

const box = { width: 1000, height: 400 }

/**
 * Draws a signature with finger, pen or mouse. Gives the lines in a 1000 x 400 box, one decimal: small enough to
 * store, and drawn again as lines in the PDF. Whoever cannot draw types the name instead, elsewhere on the screen.
 */
export function SignaturePad({
  label,
  onChange,
}: {
  label: string
  onChange: (strokes: Strokes | null) => void
}) {
  const { t } = useTranslation()
  const colours = useColours()
  const canvas = useRef<HTMLCanvasElement>(null)
  const pad = useRef<Pad | null>(null)
  const changed = useRef(onChange)
  useEffect(() => {
    changed.current = onChange
  })

  useEffect(() => {
    const element = canvas.current
    if (element === null) return undefined
    const ratio = Math.max(1, window.devicePixelRatio)
    const { width, height } = element.getBoundingClientRect()
    element.width = width * ratio
    element.height = height * ratio
    element.getContext('2d')?.scale(ratio, ratio)
    const made = new Pad(element, { minWidth: 1, maxWidth: 2.5, penColor: '#000000' })
    pad.current = made
    const tell = () => changed.current(strokesOf(made, width, height))
    made.addEventListener('endStroke', tell)
    return () => {
      made.off()
      pad.current = null
    }
  }, [])

  return (
    <View style={{ gap: 8 }}>
      <Text kind="label">{label}</Text>
      <canvas
        ref={canvas}
        role="img"
        aria-label={label}
        style={{
          width: '100%',
          aspectRatio: '5 / 2',
          maxWidth: 560,
          touchAction: 'none',
          background: '#ffffff',
          border: `1px solid ${colours.edge}`,
          borderRadius: 6,
        }}
      />
      <View style={{ maxWidth: 560 }}>
        <LevelLine />
      </View>
      <Button
        label={t('ui.signature.clear')}
        kind="quiet"
        onPress={() => {
          pad.current?.clear()
          onChange(null)
        }}
      />
    </View>
  )
}

function strokesOf(pad: Pad, width: number, height: number): Strokes | null {
  const round = (value: number, most: number) =>
    Math.round(Math.max(0, Math.min(value, most)) * 10) / 10
  const strokes = pad
    .toData()
    .map(({ points }) =>
      points
        .slice(0, 2000)
        .map(({ x, y }): [number, number] => [
          round((x / width) * box.width, box.width),
          round((y / height) * box.height, box.height),
        ]),
    )
  return strokes.length === 0 ? null : strokes.slice(0, 200)
}

/** A stored signature, drawn again. */
export function SignatureLines({ strokes, label }: { strokes: Strokes; label: string }) {
  const path = strokes
    .map((stroke) => stroke.map(([x, y], index) => `${index === 0 ? 'M' : 'L'}${x} ${y}`).join(''))
    .join('')
  return (
    <svg
      viewBox="0 0 1000 400"
      role="img"
      aria-label={label}
      style={{ width: 200, height: 80, background: '#fff' }}
    >
      <path
        d={path}
        stroke="#000"
        strokeWidth={8}
        fill="none"
        strokeLinecap="round"
        strokeLinejoin="round"
      />
    </svg>
  )
}
