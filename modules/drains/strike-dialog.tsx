import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { strikeDrain, type Drain } from '@/shared/contracts/drains'
import { call } from '../api/call'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { Button } from '../ui/button'
import { Dialog } from '../ui/dialog'
import { Field } from '../ui/field'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'

/** Strikes out a drain that did not happen or stands twice; asks why. */
export function StrikeDialog({ drain, onClose }: { drain: Drain; onClose: () => void }) {
  const { t } = useTranslation()
  const showProblem = useShowProblem('drains')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [reason, setReason] = useState('')
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()

  async function strike() {
    setBusy(true)
    setProblem(undefined)
    try {
      await call(strikeDrain, {
        params: { id: drain.id },
        body: { expectedRevision: drain.revision, reason },
      })
      await refreshWhatChanged(whatPouringChanges)
      onClose()
    } catch (error) {
      setProblem(showProblem(error))
      setBusy(false)
    }
  }

  return (
    <Dialog
      isOpen
      title={t('drains.detail.strikeTitle', { number: drain.number })}
      onClose={onClose}
      actions={
        <>
          <Button kind="primary" label={t('drains.detail.strikeStay')} onPress={onClose} />
          <Button
            kind="danger"
            label={t('drains.detail.strikeConfirm', { number: drain.number })}
            busy={isBusy}
            disabled={reason.trim() === ''}
            onPress={() => void strike()}
          />
        </>
      }
    >
      <Text>{t('drains.detail.strikeText')}</Text>
      <Field
        label={t('drains.detail.strikeReason')}
        hint={t('drains.detail.strikeReasonHint')}
        maxLength={300}
        value={reason}
        onChange={setReason}
      />
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
    </Dialog>
  )
}
