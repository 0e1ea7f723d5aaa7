import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { settleCauses, settlePickup, type Pickup } from '@/shared/contracts/pickups'
import { call } from '../api/call'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Select, TextArea } from '../ui/field'
import { Heading } from '../ui/heading'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

/** Closes the pickup: the difference goes to adjustment with its cause. */
export function SettleCard({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const act = usePickupAct()
  const differs = pickup.stage === 'differs'
  const [cause, setCause] = useState(differs ? '' : 'within-rule')
  const [note, setNote] = useState('')
  const causes = settleCauses.filter((one) => !differs || one !== 'within-rule')
  const settle = () =>
    act.run(() =>
      call(settlePickup, {
        params: { id: pickup.id },
        body: {
          version: pickup.version,
          cause: causes.find((one) => one === cause) ?? 'within-rule',
          note,
        },
      }),
    )
  return (
    <Card role="region" label={t('pickups.settle.title')}>
      <Heading level={2}>{t('pickups.settle.title')}</Heading>
      <Text>{t(differs ? 'pickups.settle.differs' : 'pickups.settle.within')}</Text>
      <Select
        label={t('pickups.settle.cause')}
        {...(differs ? { placeholder: t('pickups.settle.choose') } : {})}
        value={cause}
        onChange={setCause}
        options={causes.map((one) => ({ value: one, label: t(`pickups.causes.${one}`) }))}
        error={act.fieldErrors['cause']}
      />
      <TextArea
        label={t('pickups.settle.note')}
        rows={2}
        maxLength={1000}
        value={note}
        onChange={setNote}
        error={act.fieldErrors['note']}
      />
      <Refusal problem={act.problem} />
      <Button
        kind="primary"
        label={t('pickups.settle.act')}
        busy={act.isBusy}
        onPress={() => void settle()}
      />
    </Card>
  )
}
