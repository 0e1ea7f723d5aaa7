import { View } from 'react-native'
import Svg, {
  ClipPath,
  Defs,
  G,
  Line,
  Path,
  Pattern,
  Rect,
  Text as SvgText,
} from 'react-native-svg'
import { fonts } from './measures'
import { useColours } from './theme'

export type LevelKind = 'drum' | 'tote' | 'tank' | 'pail' | 'bin' | 'van'

/** Outline of each kind on a 100 x 120 box, and the part of it that fluid can stand in. */
const outlines: Record<LevelKind, { body: string; top: number; bottom: number; details: string }> =
  {
    drum: {
      body: 'M18 12h64v100h-64z',
      top: 12,
      bottom: 112,
      details: 'M18 44h64M18 78h64M62 12v-6h12v6',
    },
    tote: {
      body: 'M10 14h80v84h-80z',
      top: 14,
      bottom: 98,
      details: 'M10 42h80M10 70h80M36 14v84M64 14v84M16 98v14M50 98v14M84 98v14M42 14v-7h16v7',
    },
    tank: {
      body: 'M8 44a16 26 0 0 1 16 -26h52a16 26 0 0 1 0 52h-52a16 26 0 0 1 -16 -26z',
      top: 18,
      bottom: 70,
      details: 'M26 70v18M74 70v18M44 18v-8h12v8',
    },
    pail: {
      body: 'M16 24h68l-8 86h-52z',
      top: 24,
      bottom: 110,
      details: 'M16 24a34 24 0 0 1 68 0',
    },
    bin: { body: 'M14 20h72l-6 92h-60z', top: 20, bottom: 112, details: 'M10 20h80' },
    van: {
      body: 'M8 34h30l-4 64h-22zM56 34h30l-4 64h-22z',
      top: 34,
      bottom: 98,
      details: 'M4 104h92',
    },
  }

/**
 * A container with its level: what is in it solid, what is being poured hatched, the fill line dashed with the
 * headroom above it, and what goes over the line standing on top. The picture says nothing that its label does not.
 * @param label the whole picture in words, for screen readers
 */
export function LevelPicture({
  kind,
  capacity,
  fillLine,
  contents,
  adding = 0,
  label,
  overLabel,
  height = 104,
}: {
  kind: LevelKind
  /** All four in litres; a picture needs no more digits than a float has. */
  capacity: number
  fillLine: number
  contents: number
  adding?: number
  label: string
  /** Shown in the block above the line, like "+4.1". */
  overLabel?: string
  height?: number
}) {
  const colours = useColours()
  const { body, top, bottom, details } = outlines[kind]
  const whole = Math.max(capacity, 1)
  const y = (litres: number) =>
    bottom - (Math.max(0, Math.min(litres, whole)) / whole) * (bottom - top)
  const after = contents + adding
  const lineAt = y(fillLine)
  const isOver = after > fillLine
  const filled = y(Math.min(contents, fillLine))
  const raised = y(Math.min(after, fillLine))
  const isLevel = kind !== 'bin'
  return (
    <View role="img" aria-label={label} style={{ height, width: (height * 100) / 120 }}>
      <Svg width="100%" height="100%" viewBox="0 0 100 120" aria-hidden>
        <Defs>
          <ClipPath id={`inside-${kind}`}>
            <Path d={body} />
          </ClipPath>
          <Pattern id={`pour-${kind}`} width={6} height={6} patternUnits="userSpaceOnUse">
            <Rect width={6} height={6} fill={colours.fluidWash} />
            <Path d="M0 6l6 -6" stroke={colours.fluid} strokeWidth={1.6} />
          </Pattern>
        </Defs>
        <Path d={body} fill={colours.sheet} />
        {isLevel && (
          <G clipPath={`url(#inside-${kind})`}>
            <Rect
              x={0}
              y={top}
              width={100}
              height={Math.max(0, lineAt - top)}
              fill={colours.well}
            />
            <Rect x={0} y={filled} width={100} height={bottom - filled} fill={colours.fluid} />
            {adding > 0 && (
              <>
                <Rect
                  x={0}
                  y={raised}
                  width={100}
                  height={Math.max(0, filled - raised)}
                  fill={`url(#pour-${kind})`}
                />
                <Line
                  x1={0}
                  x2={100}
                  y1={raised}
                  y2={raised}
                  stroke={colours.ink}
                  strokeWidth={2.5}
                />
              </>
            )}
          </G>
        )}
        <Path d={body} fill="none" stroke={colours.ink} strokeWidth={2} />
        <Path d={details} fill="none" stroke={colours.ink} strokeWidth={2} strokeLinecap="square" />
        {isLevel && (
          <Line
            x1={4}
            x2={96}
            y1={lineAt}
            y2={lineAt}
            stroke={colours.ink}
            strokeWidth={2}
            strokeDasharray="5 4"
          />
        )}
        {isOver && isLevel && (
          <>
            <Rect
              x={30}
              y={0}
              width={40}
              height={16}
              fill={colours.stop.bg}
              stroke={colours.stop.edge}
              strokeWidth={2}
            />
            {overLabel !== undefined && (
              <SvgText
                x={50}
                y={12}
                textAnchor="middle"
                fontSize={11}
                fontFamily={fonts.text}
                fill={colours.stop.text}
              >
                {overLabel}
              </SvgText>
            )}
          </>
        )}
      </Svg>
    </View>
  )
}
