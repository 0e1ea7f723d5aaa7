import { useRouter, type Href } from 'expo-router'
import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { type z } from 'zod'
import type { Catalogue } from '@/shared/contracts/set-up'
import { call } from '../api/call'
import { fieldWords } from '../api/field-words'
import { newId } from '../api/new-id'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged } from '../api/use-refresh-what-changed'
import { useSession } from '../session/use-session'
import { useAnnounce } from '../ui/announcer'
import { Button } from '../ui/button'
import { Card, Stack } from '../ui/card'
import { ErrorSummary } from '../ui/error-summary'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import { bodyOf, fieldOfPath, valuesOf, type SetUpRecord, type Values } from './form-values'
import type { Kind } from './kinds'
import { RecordField } from './record-field'

/** The form of one record. Errors stand at their field and above; a record changed meanwhile is not overwritten. */
export function RecordForm({
  kind,
  record,
  catalogue,
  siteId,
}: {
  kind: Kind
  record: SetUpRecord | undefined
  catalogue: Catalogue
  siteId: string
}) {
  const { t } = useTranslation()
  const router = useRouter()
  const announce = useAnnounce()
  const { can } = useSession()
  const showProblem = useShowProblem('setup')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [id] = useState(newId)
  const [values, setValues] = useState<Values>(() =>
    valuesOf(kind, record, usualOf(siteId, catalogue)),
  )
  const [errors, setErrors] = useState<Record<string, string>>({})
  const [problem, setProblem] = useState<ShownProblem>()
  const [isBusy, setBusy] = useState(false)
  const isNew = record === undefined
  const mayChange = can(kind.change)
  const unit =
    catalogue.sites.find((site) => site.id === values['siteId'])?.volumeUnit ??
    catalogue.sites[0]?.volumeUnit ??
    'L'
  const fields = kind.fields.filter(({ onlyNew }) => onlyNew !== true || isNew)

  const save = async () => {
    const contract = isNew ? kind.contracts.create : kind.contracts.change
    const body = { ...bodyOf(kind, values, unit, isNew), ...(isNew ? { id } : {}) }
    const wrong = judge(contract.body, body, (path, code) => fieldWords(t, 'setup', { path, code }))
    setErrors(wrong)
    setProblem(undefined)
    if (Object.keys(wrong).length > 0) return
    setBusy(true)
    try {
      if (isNew) await call(contract, { body })
      else await call(contract, { params: { id: record.id }, body, ifMatch: record.version })
      await refreshWhatChanged(kind.refreshes)
      announce(t('setup.saved'))
      router.replace(`/setup/${kind.name}` as Href)
    } catch (error) {
      const refused: Record<string, string> = {}
      setProblem(
        showProblem(error, {
          setError: (name, { message }) => (refused[name] = message ?? ''),
          fieldOf: fieldOfPath,
        }),
      )
      setErrors(refused)
      setBusy(false)
    }
  }

  return (
    <Stack>
      <ErrorSummary
        errors={Object.entries(errors).map(([name, message]) => ({
          fieldId: `field-${name}`,
          message,
        }))}
      />
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          <Text>{problem.detail}</Text>
          {problem.code === 'changed-under-you' && (
            <Button
              label={t('setup.readAgain')}
              onPress={() => void refreshWhatChanged(kind.refreshes)}
            />
          )}
        </Notice>
      )}
      {!mayChange && <Notice kind="note" title={t('setup.readOnly')} />}
      <Card>
        {fields.map((field) => (
          <RecordField
            key={field.name}
            field={field}
            value={values[field.name] ?? ''}
            catalogue={catalogue}
            unit={unit}
            isDisabled={!mayChange}
            error={errors[field.name]}
            onChange={(value) => setValues((old) => ({ ...old, [field.name]: value }))}
          />
        ))}
      </Card>
      {mayChange && (
        <Button
          kind="primary"
          isLarge
          label={t('setup.save')}
          busy={isBusy}
          onPress={() => void save()}
        />
      )}
    </Stack>
  )
}

function usualOf(siteId: string, catalogue: Catalogue): Values {
  const fluidStream = catalogue.streams.find(({ kind }) => kind === 'fluid')?.id ?? ''
  return {
    siteId,
    fillPercent: '95',
    type: 'drum',
    streamId: fluidStream,
    kind: '',
    role: 'technician',
    profile: 'us-federal-baseline',
    volumeUnit: 'gal_us',
    massUnit: 'lb_avdp',
    densityBasis: 'default',
    siteIds: siteId === '' ? [] : [siteId],
  }
}

/** The contract's own schema, its codes in words, by form field. */
function judge(
  schema: z.ZodType,
  body: unknown,
  words: (path: string, code: string) => string,
): Record<string, string> {
  const parsed = schema.safeParse(body)
  if (parsed.success) return {}
  const wrong: Record<string, string> = {}
  for (const issue of parsed.error.issues) {
    const path = issue.path.map(String).join('.')
    const isOwn = /^[a-z]+(-[a-z]+)+$/.test(issue.message)
    const isEmpty =
      (issue.code === 'too_small' && issue.minimum === 1) ||
      (issue.code === 'invalid_type' && (issue.input === undefined || issue.input === null)) ||
      (issue.code === 'invalid_value' && issue.input === '')
    const code = isOwn
      ? issue.message
      : isEmpty
        ? 'required'
        : issue.code === 'invalid_format'
          ? `not-a-${issue.format}`
          : issue.code
    wrong[fieldOfPath(path)] ??= words(path, code)
  }
  return wrong
}
