import { useState } from 'react'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { readDrain, type Drain } from '@/shared/contracts/drains'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { isProblem } from '../api/problem-error'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { gap } from '../ui/measures'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { useWindowClass } from '../ui/use-window-class'
import { DrainFactsCard } from './drain-facts-card'
import { DrainHistory } from './drain-history'
import { DrainMarks } from './drain-marks'
import { DrainStates } from './drain-summary'
import { StrikeDialog } from './strike-dialog'

/** Everything about one drain, its history and what needs a look in it. */
export function DrainDetailScreen({ id }: { id: string }) {
  const { t } = useTranslation()
  const drain = useContract(readDrain, { params: { id } })
  const back = <LinkText href="/drains">{t('drains.detail.toList')}</LinkText>
  if (drain.data === undefined) {
    return (
      <Screen title={t('drains.detail.title', { number: id })} before={back}>
        {drain.isLoading && <Loading />}
        {isProblem(drain.error, 'not-found') ? (
          <Text>{t('drains.detail.notFound', { number: id })}</Text>
        ) : (
          <CouldNotLoad reply={drain} />
        )}
      </Screen>
    )
  }
  return (
    <Found drain={drain.data}>
      {back}
      <AsOf reply={drain} />
    </Found>
  )
}

function Found({ drain, children }: { drain: Drain; children: React.ReactNode }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { can } = useSession()
  const { sites } = useSite()
  const [isStriking, setStriking] = useState(false)
  const windowClass = useWindowClass()
  const isWide = windowClass === 'desk' || windowClass === 'wide'
  const stands = drain.state === 'standing'
  const subject = { siteId: drain.siteId }
  const site = sites.find(({ id }) => id === drain.siteId)
  const column = isWide ? { flex: 1, minWidth: 0, gap: gap.medium } : { gap: gap.medium }
  return (
    <Screen
      title={t('drains.detail.title', { number: drain.number })}
      before={children}
      width="full"
      actions={
        stands ? (
          <>
            {can('amend-drain', subject) && (
              <Button
                icon="pen"
                label={t('drains.detail.amend')}
                onPress={() => router.push(`/drains/${drain.number}/amend`)}
              />
            )}
            {can('strike-drain', subject) && (
              <Button
                kind="danger"
                label={t('drains.detail.strike')}
                onPress={() => setStriking(true)}
              />
            )}
          </>
        ) : undefined
      }
    >
      <DrainStates row={drain} />
      <View
        style={
          isWide
            ? { flexDirection: 'row', gap: gap.large, alignItems: 'flex-start' }
            : { gap: gap.medium }
        }
      >
        <View style={column}>
          <DrainFactsCard drain={drain} siteName={site?.name} />
        </View>
        <View style={column}>
          <DrainMarks drain={drain} />
          <DrainHistory drain={drain} />
        </View>
      </View>
      {isStriking && <StrikeDialog drain={drain} onClose={() => setStriking(false)} />}
    </Screen>
  )
}
