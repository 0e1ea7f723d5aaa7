import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { setPassword } from '@/shared/contracts/set-up'
import { call } from '../api/call'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { Notice } from '../ui/notice'

/** A new password for somebody who lost theirs; it ends their sessions. */
export function PasswordCard({ personId }: { personId: string }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const showProblem = useShowProblem('setup')
  const [password, setTyped] = useState('')
  const [state, setState] = useState<'open' | 'busy' | 'done'>('open')
  const [problem, setProblem] = useState<ShownProblem>()
  if (!can('change-people')) return null
  const save = async () => {
    setState('busy')
    setProblem(undefined)
    try {
      await call(setPassword, { params: { id: personId }, body: { password } })
      setTyped('')
      setState('done')
    } catch (error) {
      setProblem(showProblem(error))
      setState('open')
    }
  }
  return (
    <Card role="region" label={t('setup.password.title')}>
      <Heading level={2}>{t('setup.password.title')}</Heading>
      <Field
        label={t('setup.password.label')}
        hint={t('setup.hints.password')}
        type="password"
        autoComplete="new-password"
        value={password}
        onChange={setTyped}
      />
      {state === 'done' && <Notice kind="settled" title={t('setup.password.done')} />}
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
      <Button
        label={t('setup.password.act')}
        busy={state === 'busy'}
        disabled={password.length < 10}
        onPress={() => void save()}
      />
    </Card>
  )
}
