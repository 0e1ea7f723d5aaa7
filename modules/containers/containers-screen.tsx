import { useLocalSearchParams, useRouter } from 'expo-router'
import { useTranslation } from 'react-i18next'
import { listContainers, type Container } from '@/shared/contracts/containers'
import { compare } from '@/shared/quantities/decimals'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { useSession } from '../session/use-session'
import { useSite } from '../session/site-provider'
import { ChoiceChips } from '../ui/choice'
import { Select } from '../ui/field'
import { LinkText } from '../ui/link-text'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Row } from '../ui/card'
import { ContainerCard } from './container-card'

/** Containers of the site by room or by age, of one stream or all; the choice is in the address. */
export function ContainersScreen() {
  const { t } = useTranslation()
  const router = useRouter()
  const { stream = '', sort = 'room' } = useLocalSearchParams<{ stream?: string; sort?: string }>()
  const { site } = useSite()
  const { can } = useSession()
  const { catalogue } = useCatalogue()
  const reply = useContract(
    listContainers,
    site === undefined ? null : { query: { siteId: site.id } },
  )
  const rows = (reply.data?.rows ?? [])
    .filter((container) => stream === '' || container.streamId === stream)
    .sort(sort === 'age' ? byAge : byRoom)
  return (
    <Screen title={t('containers.title')}>
      <AsOf reply={reply} />
      <Row space={16} align="flex-end">
        <ChoiceChips
          label={t('containers.sort')}
          value={sort === 'age' ? 'age' : 'room'}
          onChange={(value) => router.setParams({ sort: value })}
          options={[
            { value: 'room', label: t('containers.byRoom') },
            { value: 'age', label: t('containers.byAge') },
          ]}
        />
        <Select
          label={t('containers.stream')}
          placeholder={t('containers.everyStream')}
          value={stream}
          onChange={(value) => router.setParams({ stream: value })}
          options={(catalogue?.streams ?? []).map(({ id, name }) => ({ value: id, label: name }))}
        />
      </Row>
      {reply.data === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {reply.data !== undefined && rows.length === 0 && (
        <EmptyState
          title={t('containers.empty', { site: site?.name })}
          action={can('change-set-up') && <LinkText href="/setup">{t('containers.add')}</LinkText>}
        />
      )}
      {rows.map((container) => (
        <ContainerCard key={container.id} container={container} unit={site?.volumeUnit ?? 'L'} />
      ))}
    </Screen>
  )
}

/** Least room first; solids, which have no line, behind. */
function byRoom(a: Container, b: Container): number {
  const bySolid = Number(a.stream.kind === 'solid') - Number(b.stream.kind === 'solid')
  return bySolid || compare(a.roomLitres, b.roomLitres)
}

/** Longest filled first. */
function byAge(a: Container, b: Container): number {
  return (b.ageDays ?? -1) - (a.ageDays ?? -1)
}
