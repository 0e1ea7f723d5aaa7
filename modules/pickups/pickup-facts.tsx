import { useTranslation } from 'react-i18next'
import { formatDay, localDay, localTime } from '@/shared/calendar'
import type { Pickup } from '@/shared/contracts/pickups'
import { formatFigure } from '@/shared/quantities/format'
import { Card } from '../ui/card'
import { FactList, type Fact } from '../ui/fact-list'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'

/** Who, when, and how it ended; the difference where the rule says it is one. */
export function PickupFacts({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const at = (instant: string) =>
    `${formatDay(localDay(instant, pickup.timeZone))}, ${localTime(instant, pickup.timeZone)}`
  const facts: (Fact | null)[] = [
    { name: t('pickups.hauler'), value: pickup.hauler?.name ?? t('pickups.noHauler') },
    { name: t('pickups.facility'), value: pickup.facility?.name ?? t('pickups.noFacility') },
    { name: t('pickups.plannedOn'), value: formatDay(pickup.plannedOn) },
    pickup.orderNumber === ''
      ? null
      : { name: t('pickups.orderNumber'), value: pickup.orderNumber },
    pickup.note === '' ? null : { name: t('pickups.note'), value: pickup.note },
    pickup.issuedAt === null
      ? null
      : {
          name: t('pickups.issued'),
          value: `${at(pickup.issuedAt)}, ${pickup.issuedBy?.name ?? ''}`,
        },
    ...pickup.signatures.map((signature) => ({
      name: t(`pickups.sign.${signature.party}`),
      value: [
        signature.name,
        signature.capacity,
        at(signature.signedAt),
        signature.dispute && t('pickups.sign.disputed', { text: signature.dispute }),
      ]
        .filter(Boolean)
        .join(', '),
    })),
    pickup.returnDueOn === null
      ? null
      : { name: t('pickups.returnDue'), value: formatDay(pickup.returnDueOn) },
    pickup.received === null
      ? null
      : {
          name: t('pickups.received.fact'),
          value: [
            formatDay(pickup.received.on),
            pickup.received.by.name,
            pickup.received.ticket,
            pickup.received.note,
          ]
            .filter(Boolean)
            .join(', '),
        },
    pickup.settled === null
      ? null
      : {
          name: t('pickups.settle.fact'),
          value: [
            at(pickup.settled.at),
            pickup.settled.by.name,
            t(`pickups.causes.${pickup.settled.cause}`),
            pickup.settled.note,
          ]
            .filter(Boolean)
            .join(', '),
        },
    pickup.voided === null
      ? null
      : {
          name: t('pickups.void.fact'),
          value: [at(pickup.voided.at), pickup.voided.by.name, pickup.voided.reason].join(', '),
        },
  ]
  const { difference } = pickup
  return (
    <>
      {difference !== null && difference.exceeds && (
        <Notice
          kind={pickup.stage === 'settled' ? 'note' : 'stop'}
          title={t('pickups.differs.title')}
        >
          <Text>
            {t('pickups.differs.text', {
              percent: difference.percent === null ? '–' : formatFigure(difference.percent, 1),
              rule: difference.rulePercent,
            })}
          </Text>
        </Notice>
      )}
      <Card>
        <FactList facts={facts.filter((fact) => fact !== null)} />
      </Card>
    </>
  )
}
