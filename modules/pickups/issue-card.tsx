import { useTranslation } from 'react-i18next'
import { issuePickup, type Pickup } from '@/shared/contracts/pickups'
import { call } from '../api/call'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

/** What is missing, and Issue when nothing is. A missing permit may still be asked for: the answer explains it. */
export function IssueCard({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const act = usePickupAct()
  const isHeldBack = pickup.missing.some(({ code }) => code !== 'permit-expired')
  const issue = () =>
    act.run(() =>
      call(issuePickup, { params: { id: pickup.id }, body: { version: pickup.version } }),
    )
  return (
    <Card role="region" label={t('pickups.missing.title')}>
      <Heading level={2}>{t('pickups.missing.title')}</Heading>
      {pickup.missing.length === 0 ? (
        <Text>{t('pickups.missing.nothing')}</Text>
      ) : (
        <ul style={{ margin: 0, paddingLeft: 20 }}>
          {pickup.missing.map(({ code, facts }, index) => (
            <li key={index}>
              <Text>{t(`pickups.missing.${code}`, facts)}</Text>
            </li>
          ))}
        </ul>
      )}
      <Refusal problem={act.problem} />
      <Row>
        <Button
          kind="primary"
          icon="seal"
          label={t('pickups.issue')}
          busy={act.isBusy}
          disabled={isHeldBack}
          onPress={() => void issue()}
        />
        <LinkText href={`/pickups/${pickup.id}/plan`}>{t('pickups.plan.change')}</LinkText>
      </Row>
      {isHeldBack && <Text kind="hint">{t('pickups.missing.why')}</Text>}
    </Card>
  )
}
