import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { voidPickup, type Pickup } from '@/shared/contracts/pickups'
import { call } from '../api/call'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Dialog } from '../ui/dialog'
import { Field } from '../ui/field'
import { Text } from '../ui/text'
import { Refusal } from './refusal'
import { usePickupAct } from './use-pickup-act'

const stages: readonly Pickup['stage'][] = [
  'planned',
  'ready',
  'at-the-gate',
  'signed-out',
  'return-due',
]

/** Voids a manifest (it keeps its number) or a plan, with the reason. */
export function VoidPickup({ pickup }: { pickup: Pickup }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const act = usePickupAct()
  const [isOpen, setOpen] = useState(false)
  const [reason, setReason] = useState('')
  const mayVoid =
    can('void-pickup', { siteId: pickup.siteId }) &&
    stages.includes(pickup.stage) &&
    pickup.received === null
  if (!mayVoid) return null
  const name =
    pickup.number === null
      ? t('pickups.void.plan')
      : t('pickups.void.manifest', { number: pickup.number })
  const confirm = async () => {
    const isDone = await act.run(() =>
      call(voidPickup, { params: { id: pickup.id }, body: { version: pickup.version, reason } }),
    )
    if (isDone) setOpen(false)
  }
  return (
    <>
      <Button kind="danger" label={name} onPress={() => setOpen(true)} />
      {isOpen && (
        <Dialog
          isOpen
          title={name}
          onClose={() => setOpen(false)}
          actions={
            <>
              <Button
                kind="primary"
                label={t('pickups.void.keep')}
                onPress={() => setOpen(false)}
              />
              <Button
                kind="danger"
                label={name}
                busy={act.isBusy}
                disabled={reason.trim() === ''}
                onPress={() => void confirm()}
              />
            </>
          }
        >
          <Text>
            {t(pickup.signedOutAt === null ? 'pickups.void.text' : 'pickups.void.signedText')}
          </Text>
          <Field
            label={t('pickups.void.reason')}
            maxLength={500}
            value={reason}
            onChange={setReason}
          />
          <Refusal problem={act.problem} />
        </Dialog>
      )}
    </>
  )
}
