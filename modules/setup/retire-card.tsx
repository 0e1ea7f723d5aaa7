import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { call } from '../api/call'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged } from '../api/use-refresh-what-changed'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import type { SetUpRecord } from './form-values'
import type { Kind } from './kinds'

/** Takes a record out of use, or brings it back. Nothing is deleted, so both can be undone. */
export function RetireCard({ kind, record }: { kind: Kind; record: SetUpRecord }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const showProblem = useShowProblem('setup')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  if (!can(kind.change)) return null
  const isRetired = record.retiredAt !== null
  const save = async () => {
    setBusy(true)
    setProblem(undefined)
    try {
      await call(isRetired ? kind.contracts.restore : kind.contracts.retire, {
        params: { id: record.id },
      })
    } catch (error) {
      setProblem(showProblem(error))
    }
    await refreshWhatChanged(kind.refreshes)
    setBusy(false)
  }
  return (
    <Card>
      <Text>{t(isRetired ? 'setup.restoreText' : 'setup.retireText')}</Text>
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
      <Button
        kind={isRetired ? 'secondary' : 'danger'}
        label={t(isRetired ? 'setup.restore' : 'setup.retire')}
        busy={isBusy}
        onPress={() => void save()}
      />
    </Card>
  )
}
