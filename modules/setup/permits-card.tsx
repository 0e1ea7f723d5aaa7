import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { formatDay } from '@/shared/calendar'
import { addPermit, permitBody, retirePermit, type Permit } from '@/shared/contracts/set-up'
import { call } from '../api/call'
import { fieldWords } from '../api/field-words'
import { newId } from '../api/new-id'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged } from '../api/use-refresh-what-changed'
import { useSession } from '../session/use-session'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { Notice } from '../ui/notice'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { expiryOf } from './expiry'
import type { SetUpRecord } from './form-values'
import type { Kind } from './kinds'

const nothing = { number: '', startsOn: '', endsOn: '', note: '' }

/** Permits with their last day; a new one is added, a wrong one taken out of use. */
export function PermitsCard({ kind, record }: { kind: Kind; record: SetUpRecord }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const showProblem = useShowProblem('setup')
  const refreshWhatChanged = useRefreshWhatChanged()
  const permits = (record['permits'] as Permit[] | undefined) ?? []
  const [id, setId] = useState(newId)
  const [values, setValues] = useState(nothing)
  const [errors, setErrors] = useState<Record<string, string>>({})
  const [problem, setProblem] = useState<ShownProblem>()
  const [isBusy, setBusy] = useState(false)
  const [today] = useState(() => new Date().toISOString().slice(0, 10))
  const mayChange = can(kind.change)

  const run = async (act: () => Promise<unknown>) => {
    setBusy(true)
    setProblem(undefined)
    try {
      await act()
      await refreshWhatChanged(kind.refreshes)
    } catch (error) {
      setProblem(showProblem(error))
    }
    setBusy(false)
  }
  const add = async () => {
    const parsed = permitBody.safeParse({ ...values, id })
    setErrors(
      Object.fromEntries(
        (parsed.error?.issues ?? []).map((issue) => {
          const path = issue.path.join('.')
          const code = /^[a-z]+(-[a-z]+)+$/.test(issue.message) ? issue.message : 'required'
          return [path, fieldWords(t, 'setup', { path, code })]
        }),
      ),
    )
    if (!parsed.success) return
    await run(async () => {
      await call(addPermit, { params: { id: record.id }, body: parsed.data })
      setValues(nothing)
      setId(newId())
    })
  }
  const field = (name: keyof typeof nothing, type: 'text' | 'date') => (
    <Field
      label={t(`setup.permits.${name}`)}
      type={type}
      characters={type === 'date' ? 14 : 24}
      value={values[name]}
      error={errors[name]}
      onChange={(value) => setValues((old) => ({ ...old, [name]: value }))}
    />
  )
  return (
    <Card role="region" label={t('setup.permits.title')}>
      <Heading level={2}>{t('setup.permits.title')}</Heading>
      {permits.length === 0 && <Text>{t('setup.permits.none')}</Text>}
      {permits.map((permit) => (
        <Row key={permit.id}>
          <Text struck={permit.retiredAt !== null}>
            {t('setup.permits.line', {
              number: permit.number,
              from: formatDay(permit.startsOn),
              to: formatDay(permit.endsOn),
            })}
          </Text>
          {permit.retiredAt === null && expiryOf(permit.endsOn, today).kind !== 'note' && (
            <Status
              kind={expiryOf(permit.endsOn, today).kind}
              label={t(expiryOf(permit.endsOn, today).words, { day: formatDay(permit.endsOn) })}
            />
          )}
          {permit.retiredAt === null && mayChange && (
            <Button
              label={t('setup.permits.retire')}
              hint={permit.number}
              busy={isBusy}
              onPress={() => void run(() => call(retirePermit, { params: { id: permit.id } }))}
            />
          )}
        </Row>
      ))}
      {mayChange && (
        <>
          {field('number', 'text')}
          <Row align="flex-start">
            {field('startsOn', 'date')}
            {field('endsOn', 'date')}
          </Row>
          {field('note', 'text')}
          <Button
            label={t('setup.permits.add')}
            icon="plus"
            busy={isBusy}
            onPress={() => void add()}
          />
        </>
      )}
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
    </Card>
  )
}
