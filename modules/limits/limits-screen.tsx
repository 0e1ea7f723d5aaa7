import { useRouter } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { listFlags, type Flag } from '@/shared/contracts/limits'
import { formatDay, localDay } from '@/shared/calendar'
import { CouldNotLoad } from '../api/could-not-load'
import { usePages } from '../api/use-pages'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { ChoiceChips } from '../ui/choice'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { FlagStatus, measuredWords, reviewWords } from './flag-words'

const states = ['open', 'reviewed', 'withdrawn'] as const

/** Quantity flags: what was reached, and whether somebody has looked. */
export function LimitsScreen({ state }: { state: string }) {
  const { t } = useTranslation()
  const router = useRouter()
  const chosen = states.find((one) => one === state) ?? 'open'
  const reply = usePages(listFlags, { query: { state: chosen } })
  const { rows } = reply
  return (
    <Screen
      title={t('limits.title')}
      actions={
        <Button
          label={t('limits.rules.title')}
          onPress={() => router.push('/books/limits/rules')}
        />
      }
    >
      <Text>{t('limits.caution')}</Text>
      <ChoiceChips
        label={t('limits.state')}
        value={chosen}
        onChange={(value) => router.setParams({ state: value })}
        options={states.map((one) => ({ value: one, label: t(`limits.states.${one}`) }))}
      />
      {rows === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {rows?.length === 0 && <EmptyState title={t(`limits.empty.${chosen}`)} />}
      {rows?.map((flag) => (
        <FlagCard key={flag.id} flag={flag} />
      ))}
      {reply.hasMore && (
        <Button
          label={t('limits.more')}
          busy={reply.isLoadingMore}
          onPress={() => void reply.loadMore()}
        />
      )}
    </Screen>
  )
}

function FlagCard({ flag }: { flag: Flag }) {
  const { t } = useTranslation()
  const { sites } = useSite()
  const zone = sites.find(({ id }) => id === flag.siteId)?.timeZone ?? 'UTC'
  return (
    <Card>
      <Row>
        <LinkText href={`/books/limits/${flag.id}`}>{flag.rule.title}</LinkText>
        <FlagStatus flag={flag} />
      </Row>
      <Text>{`${flag.siteCode}: ${measuredWords(t, flag.finding)}`}</Text>
      <Text kind="hint">
        {t('limits.raised', {
          day: formatDay(localDay(flag.raisedAt, zone)),
          review: reviewWords(t, flag.rule.citation),
        })}
      </Text>
    </Card>
  )
}
