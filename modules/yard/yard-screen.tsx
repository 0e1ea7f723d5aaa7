import { useState } from 'react'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { readYard, type Yard } from '@/shared/contracts/containers'
import type { Site } from '@/shared/contracts/set-up'
import { formatDay } from '@/shared/calendar'
import { formatLitresAs } from '@/shared/quantities/format'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { gap } from '../ui/measures'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { useWindowClass } from '../ui/use-window-class'
import { Cautions } from './cautions'
import { areCautionsHidden, hideCautions, showCautions } from './hidden-cautions'
import { LatestDrains } from './latest-drains'
import { YardContainers } from './yard-containers'
import { YardMarks } from './yard-marks'
import { YardPickups } from './yard-pickups'

/** Today at one site: what is near its line, what waits for somebody, what was drained last. */
export function YardScreen() {
  const { t } = useTranslation()
  const { can } = useSession()
  const { site, isLoading } = useSite()
  const yard = useContract(
    readYard,
    site === undefined || !can('read-yard') ? null : { query: { siteId: site.id } },
  )
  if (site === undefined) {
    return (
      <Screen title={t('yard.title')}>
        {isLoading ? (
          <Loading />
        ) : (
          <EmptyState
            title={t('session.site.none')}
            action={
              can('change-set-up') ? (
                <LinkText href="/setup">{t('session.site.setUp')}</LinkText>
              ) : undefined
            }
          >
            {t('session.site.noneDetail')}
          </EmptyState>
        )}
      </Screen>
    )
  }
  return (
    <Screen title={t('yard.title')} width="full">
      <AsOf reply={yard} />
      {yard.isLoading && <Loading />}
      {yard.data === undefined && yard.error !== undefined && <CouldNotLoad reply={yard} />}
      {yard.data !== undefined && <Today site={site} yard={yard.data} />}
    </Screen>
  )
}

function Today({ site, yard }: { site: Site; yard: Yard }) {
  const { t } = useTranslation()
  const windowClass = useWindowClass()
  const isWide = windowClass === 'desk' || windowClass === 'wide'
  const column = isWide ? { flex: 1, minWidth: 0, gap: gap.medium } : { gap: gap.medium }
  return (
    <View style={{ gap: gap.medium }}>
      <View>
        <Text kind="label">
          {t('yard.subtitle', { site: site.name, day: formatDay(yard.today) })}
        </Text>
        <Text kind="figure">
          {yard.drainsToday === 0
            ? t('yard.today.none')
            : t('yard.today.some', {
                count: yard.drainsToday,
                volume: formatLitresAs(yard.litresToday, site.volumeUnit),
              })}
        </Text>
      </View>
      <View
        style={
          isWide
            ? { flexDirection: 'row', gap: gap.large, alignItems: 'flex-start' }
            : { gap: gap.medium }
        }
      >
        <View style={column}>
          <YardContainers site={site} containers={yard.containers} />
          <YardMarks site={site} marks={yard.marks} />
        </View>
        <View style={column}>
          <BeforeYouDrain day={yard.today} />
          <Limits openFlags={yard.openFlags} />
          <YardPickups pickups={yard.pickups} />
          <LatestDrains site={site} drains={yard.latestDrains} />
        </View>
      </View>
    </View>
  )
}

function BeforeYouDrain({ day }: { day: string }) {
  const { t } = useTranslation()
  const [isHidden, setHidden] = useState(() => areCautionsHidden(day))
  if (isHidden) {
    return (
      <View>
        <Button
          kind="quiet"
          icon="info"
          label={t('yard.cautions.show')}
          onPress={() => {
            showCautions()
            setHidden(false)
          }}
        />
        <Text kind="hint">{t('yard.deferral')}</Text>
      </View>
    )
  }
  return (
    <Card role="region" label={t('yard.cautions.title')}>
      <Heading level={2}>{t('yard.cautions.title')}</Heading>
      <Cautions isShort />
      <Button
        kind="quiet"
        label={t('yard.cautions.hide')}
        onPress={() => {
          hideCautions(day)
          setHidden(true)
        }}
      />
    </Card>
  )
}

function Limits({ openFlags }: { openFlags: number }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const router = useRouter()
  return (
    <Card role="region" label={t('yard.flags.title')}>
      <Heading level={2}>{t('yard.flags.title')}</Heading>
      <Text kind={openFlags > 0 ? 'strong' : 'body'}>
        {openFlags > 0 ? t('yard.flags.open', { count: openFlags }) : t('yard.flags.none')}
      </Text>
      {can('read-books') && (
        <Button
          label={t('yard.flags.see')}
          icon="flag"
          onPress={() => router.push('/books/limits')}
        />
      )}
      <Text kind="hint">{t('yard.flags.note')}</Text>
    </Card>
  )
}
