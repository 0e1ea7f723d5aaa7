import { useTranslation } from 'react-i18next'
import { View } from 'react-native'
import type { DrainRow } from '@/shared/contracts/drains'
import { localTime } from '@/shared/calendar'
import { LinkBlock } from '../ui/link-text'
import { gap, target } from '../ui/measures'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'
import { containersOf, DrainStates, drainWords, machineOf, volumeOf } from './drain-summary'

/** A drain in the list of a phone: the whole row opens it. */
export function DrainRowCard({ row }: { row: DrainRow }) {
  const { t } = useTranslation()
  const colours = useColours()
  const isStruck = row.state === 'struck'
  return (
    <LinkBlock href={`/drains/${row.number}`} label={drainWords(t, row)}>
      <View
        style={{
          minHeight: target.yard,
          gap: gap.tiny,
          padding: gap.gutter,
          backgroundColor: colours.sheet,
          borderBottomWidth: 1,
          borderColor: colours.hairline,
        }}
      >
        <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: gap.small }}>
          <Text kind="strong" struck={isStruck} style={{ flexShrink: 1 }}>
            {machineOf(row)}
          </Text>
          <Text kind="figure" struck={isStruck} style={{ fontWeight: '700' }}>
            {volumeOf(row)}
          </Text>
        </View>
        <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: gap.small }}>
          <Text kind="label">
            {[localTime(row.occurredAt, row.timeZone), containersOf(row), row.recordedBy.name].join(
              ' · ',
            )}
          </Text>
          <Text kind="code" style={{ fontSize: 15 }}>
            {row.number}
          </Text>
        </View>
        <DrainStates row={row} />
      </View>
    </LinkBlock>
  )
}
