import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import type { Site } from '@/shared/contracts/set-up'
import type { Mark } from '@/shared/contracts/values'
import { formatDay, localDay } from '@/shared/calendar'
import { markWords } from '../api/mark-words'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { gap } from '../ui/measures'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { useColours } from '../ui/theme'

const shownAtMost = 5

/** Records that somebody must look at, with what was found, each leading to its record. */
export function YardMarks({ site, marks }: { site: Site; marks: readonly Mark[] }) {
  const { t } = useTranslation()
  const colours = useColours()
  return (
    <Card role="region" label={t('yard.marks.title')}>
      <Heading level={2}>{t('yard.marks.title')}</Heading>
      {marks.length === 0 && <Text>{t('yard.marks.none')}</Text>}
      {marks.slice(0, shownAtMost).map((mark) => (
        <View
          key={mark.id}
          style={{
            gap: gap.tiny,
            paddingVertical: gap.small,
            borderTopWidth: 1,
            borderColor: colours.hairline,
          }}
        >
          <View
            style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: gap.small }}
          >
            <Status kind="check" label={t('drains.states.needs-a-look')} />
            <Text kind="label">{formatDay(localDay(mark.raisedAt, site.timeZone))}</Text>
          </View>
          <Text>{markWords(t, mark, { unit: site.volumeUnit, timeZone: site.timeZone })}</Text>
          {mark.drainNumber !== null ? (
            <LinkText href={`/drains/${mark.drainNumber}`}>{mark.drainNumber}</LinkText>
          ) : mark.containerCode !== null ? (
            <LinkText href={`/containers/${mark.containerCode}`}>{mark.containerCode}</LinkText>
          ) : null}
        </View>
      ))}
      {marks.length > shownAtMost && (
        <LinkText href="/drains?state=needs-a-look">{t('yard.marks.more')}</LinkText>
      )}
    </Card>
  )
}
