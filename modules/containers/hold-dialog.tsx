import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import {
  holdContainer,
  releaseContainer,
  type ContainerDetail,
} from '@/shared/contracts/containers'
import { call } from '../api/call'
import { newId } from '../api/new-id'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged, whatPouringChanges } from '../api/use-refresh-what-changed'
import { Button } from '../ui/button'
import { Dialog } from '../ui/dialog'
import { Field, TextArea } from '../ui/field'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'

/** Holds a container with the reason, or releases a held one with what was found. */
export function HoldDialog({
  container,
  onClose,
}: {
  container: ContainerDetail
  onClose: () => void
}) {
  const { t } = useTranslation()
  const showProblem = useShowProblem('containers')
  const refreshWhatChanged = useRefreshWhatChanged()
  const isHeld = container.hold !== null
  const [id] = useState(newId)
  const [reason, setReason] = useState('')
  const [ppm, setPpm] = useState('')
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const title = t(isHeld ? 'containers.hold.releaseTitle' : 'containers.hold.title', {
    code: container.code,
  })

  async function save() {
    setBusy(true)
    setProblem(undefined)
    try {
      const params = { id: container.id }
      if (isHeld) await call(releaseContainer, { params, body: { note: reason } })
      else
        await call(holdContainer, {
          params,
          body: { id, reason, halogensPpm: ppm.trim() === '' ? null : ppm.trim() },
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
      title={title}
      onClose={onClose}
      actions={
        <>
          <Button label={t('containers.cancel')} onPress={onClose} />
          <Button
            kind="primary"
            label={title}
            busy={isBusy}
            disabled={reason.trim() === ''}
            onPress={() => void save()}
          />
        </>
      }
    >
      <Text>{t(isHeld ? 'containers.hold.releaseText' : 'containers.hold.meaning')}</Text>
      <TextArea
        label={t(isHeld ? 'containers.hold.result' : 'containers.hold.reason')}
        rows={2}
        maxLength={300}
        value={reason}
        onChange={setReason}
      />
      {!isHeld && (
        <Field
          label={t('containers.hold.ppm')}
          hint={t('containers.hold.ppmHint')}
          inputMode="numeric"
          characters={6}
          value={ppm}
          onChange={setPpm}
        />
      )}
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
    </Dialog>
  )
}
