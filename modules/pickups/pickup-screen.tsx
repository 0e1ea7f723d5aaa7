import { useTranslation } from 'react-i18next'
import { readPickup, type Pickup } from '@/shared/contracts/pickups'
import { AsOf } from '../api/as-of'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { useSession } from '../session/use-session'
import { Row } from '../ui/card'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { IssueCard } from './issue-card'
import { PickupFacts } from './pickup-facts'
import { PickupHistory } from './pickup-history'
import { PickupLines } from './pickup-lines'
import { PickupPapers } from './pickup-papers'
import { ReceiveCard } from './receive-card'
import { SettleCard } from './settle-card'
import { SignCard } from './sign-card'
import { StageStatus } from './stage-status'
import { VoidPickup } from './void-pickup'

/** One pickup from plan to settled: what it is, and the one next step. */
export function PickupScreen({ id }: { id: string }) {
  const { t } = useTranslation()
  const reply = useContract(readPickup, { params: { id } })
  const { data } = reply
  return (
    <Screen
      title={data?.number ?? t('pickups.one')}
      before={<LinkText href="/pickups">{t('pickups.all')}</LinkText>}
      actions={data !== undefined && <VoidPickup pickup={data} />}
    >
      <AsOf reply={reply} />
      {data === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {data !== undefined && (
        <>
          <Row>
            <StageStatus stage={data.stage} />
          </Row>
          <PickupFacts pickup={data} />
          <PickupLines pickup={data} />
          <NextStep pickup={data} />
          <PickupPapers pickup={data} />
          <PickupHistory pickup={data} />
        </>
      )}
    </Screen>
  )
}

/** The step that comes next, for those who may take it. */
function NextStep({ pickup }: { pickup: Pickup }) {
  const { can } = useSession()
  const may = (act: Parameters<typeof can>[0]) => can(act, { siteId: pickup.siteId })
  switch (pickup.stage) {
    case 'planned':
      return may('issue-pickup') ? <IssueCard pickup={pickup} /> : null
    case 'ready':
    case 'at-the-gate':
      return may('sign-pickup') ? <SignCard key={pickup.version} pickup={pickup} /> : null
    case 'signed-out':
    case 'return-due':
    case 'differs':
      return may('receive-pickup') ? (
        <>
          <ReceiveCard key={`receive-${pickup.version}`} pickup={pickup} />
          {pickup.received !== null && <SettleCard pickup={pickup} />}
        </>
      ) : null
    case 'settled':
    case 'voided':
      return null
  }
}
