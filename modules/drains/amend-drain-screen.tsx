import { useTranslation } from 'react-i18next'
import { readDrain } from '@/shared/contracts/drains'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useSite } from '../session/site-provider'
import { useSession } from '../session/use-session'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { AmendDrainForm } from './amend-drain-form'
import { useDrainChoices } from './use-drain-choices'

/** Amends a drain: as recorded on one side, as it should be on the other. */
export function AmendDrainScreen({ id }: { id: string }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const { sites } = useSite()
  const drain = useContract(readDrain, { params: { id } })
  const site = sites.find((known) => known.id === drain.data?.siteId)
  const { choices } = useDrainChoices(site)
  const title = t('drains.form.amendTitle', { number: drain.data?.number ?? id })
  const back = (
    <LinkText href={`/drains/${id}`}>{t('drains.detail.title', { number: id })}</LinkText>
  )

  if (drain.data?.state === 'struck') {
    return (
      <Screen title={title} before={back}>
        <Notice kind="voided" title={t('drains.problems.already-struck.title')}>
          {t('drains.problems.already-struck.detail')}
        </Notice>
      </Screen>
    )
  }
  if (drain.data !== undefined && !can('amend-drain', { siteId: drain.data.siteId })) {
    return (
      <Screen title={title} before={back}>
        <Notice kind="note" title={t('problems.not-allowed.title')}>
          {t('problems.not-allowed.detail')}
        </Notice>
      </Screen>
    )
  }
  if (drain.data === undefined || site === undefined || choices === undefined) {
    return (
      <Screen title={title} before={back}>
        {drain.error === undefined ? <Loading /> : <CouldNotLoad reply={drain} />}
      </Screen>
    )
  }
  return (
    <Screen title={title} before={back} width="usual">
      <AmendDrainForm
        drain={drain.data}
        site={site}
        choices={choices}
        onReadAgain={drain.refresh}
      />
    </Screen>
  )
}
