import { useRouter, type Href } from 'expo-router'
import { useMemo, useState } from 'react'
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
import { readAgain, looksTheSame } from './read-again'
import { optionsOf, RecordField } from './record-field'

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
  // What the boxes were filled from: a save changes this version and no later one, even when the screen behind is
  // fetched again meanwhile.
  const [read, setRead] = useState(record)
  const [clashes, setClashes] = useState<{ name: string; now: string | string[] }[]>()
  const summary = useMemo(
    () =>
      Object.entries(errors).map(([name, message]) => ({
        fieldId: `field-${name}`,
        message: t('setup.errorOf', { label: t(`setup.labels.${name}`), message }),
      })),
    [errors, t],
  )
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
    setClashes(undefined)
    if (Object.keys(wrong).length > 0) return
    setBusy(true)
    try {
      if (isNew) await call(contract, { body })
      else {
        const isAsRead = read === undefined || looksTheSame(kind, read, record)
        const { version } = isAsRead ? record : read
        await call(contract, { params: { id: record.id }, body, ifMatch: version })
      }
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

  const readOnceMore = async () => {
    if (record === undefined || read === undefined) return
    setBusy(true)
    try {
      const now = (await call(kind.contracts.read, { params: { id: record.id } })) as SetUpRecord
      const again = readAgain(kind, read, now, values)
      setValues(again.values)
      setClashes(again.clashes)
      setRead(now)
      setProblem(undefined)
      await refreshWhatChanged(kind.refreshes)
    } catch (error) {
      setProblem(showProblem(error))
    }
    setBusy(false)
  }

  return (
    <Stack>
      <ErrorSummary errors={summary} />
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          <Text>{problem.detail}</Text>
          {problem.code === 'changed-under-you' && (
            <Button
              label={t('setup.readAgain')}
              busy={isBusy}
              onPress={() => void readOnceMore()}
            />
          )}
        </Notice>
      )}
      {clashes !== undefined && (
        <Notice kind="check" title={t('setup.readAgainDone')}>
          {clashes.map((clash) => (
            <Text key={clash.name}>
              {t('setup.clash', {
                label: t(`setup.labels.${clash.name}`),
                now: wordsOf(t, kind, clash, catalogue),
              })}
            </Text>
          ))}
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

/** What stands in a field now, as the field itself would say it. */
function wordsOf(
  t: ReturnType<typeof useTranslation>['t'],
  kind: Kind,
  clash: { name: string; now: string | string[] },
  catalogue: Catalogue,
): string {
  const choices = kind.fields.find(({ name }) => name === clash.name)?.choices
  const options = choices === undefined ? [] : optionsOf(t, choices, catalogue)
  const parts = [clash.now]
    .flat()
    .map((part) => options.find(({ value }) => value === part)?.label ?? part)
  return parts.filter((part) => part !== '').join(', ') || '–'
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
