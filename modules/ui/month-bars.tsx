import { View } from 'react-native'
import Svg, { Line, Rect, Text as SvgText } from 'react-native-svg'
import { scaleBand, scaleLinear } from 'd3-scale'
import { fonts } from './measures'
import { useColours } from './theme'

/**
 * One bar a month from a zero line; the table beside it says the same.
 * @param label one sentence that says what the bars show
 */
export function MonthBars({
  label,
  bars,
  height = 160,
}: {
  label: string
  bars: readonly { key: string; label: string; value: number; shown: string }[]
  height?: number
}) {
  const colours = useColours()
  const width = 720
  const across = scaleBand<string>()
    .domain(bars.map(({ key }) => key))
    .range([0, width])
    .padding(0.3)
  const highest = Math.max(1, ...bars.map(({ value }) => value))
  const up = scaleLinear()
    .domain([0, highest])
    .range([height - 24, 18])
  return (
    <View role="img" aria-label={label} style={{ width: '100%', maxWidth: width }}>
      <Svg width="100%" viewBox={`0 0 ${width} ${height}`} aria-hidden>
        {bars.map(({ key, label: month, value, shown }) => {
          const x = across(key) ?? 0
          const y = up(Math.max(0, value))
          const middle = x + across.bandwidth() / 2
          return [
            <Rect
              key={`${key}-bar`}
              x={x}
              y={y}
              width={across.bandwidth()}
              height={height - 24 - y}
              fill={colours.fluid}
            />,
            value > 0 ? (
              <SvgText
                key={`${key}-value`}
                x={middle}
                y={y - 4}
                textAnchor="middle"
                fontSize={12}
                fontFamily={fonts.text}
                fill={colours.ink}
              >
                {shown}
              </SvgText>
            ) : null,
            <SvgText
              key={`${key}-month`}
              x={middle}
              y={height - 6}
              textAnchor="middle"
              fontSize={13}
              fontFamily={fonts.text}
              fill={colours.inkSoft}
            >
              {month}
            </SvgText>,
          ]
        })}
        <Line
          x1={0}
          x2={width}
          y1={height - 24}
          y2={height - 24}
          stroke={colours.ink}
          strokeWidth={2}
        />
      </Svg>
    </View>
  )
}
