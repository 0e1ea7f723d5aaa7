import { useMemo, useState } from 'react'
import { useTranslation } from 'react-i18next'
import { changeRule, createRule, ownRuleBody, type Rule } from '@/shared/contracts/limits'
import type { Site } from '@/shared/contracts/set-up'
import { massUnits, volumeUnits } from '@/shared/quantities/units'
import {
  ruleMeasures,
  ruleScopes,
  type RuleMeasure,
  type RuleUnit,
} from '@/shared/rules/definition'
import { call } from '../api/call'
import { fieldWords } from '../api/field-words'
import { newId } from '../api/new-id'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useRefreshWhatChanged } from '../api/use-refresh-what-changed'
import { useCatalogue } from '../session/use-catalogue'
import { Button } from '../ui/button'
import { Row } from '../ui/card'
import { Checkbox, ChoiceChips } from '../ui/choice'
import { Dialog } from '../ui/dialog'
import { ErrorSummary } from '../ui/error-summary'
import { Field, Select } from '../ui/field'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import { whatRulesChange } from './rule-refresh'

type Values = {
  title: string
  measure: RuleMeasure
  scope: (typeof ruleScopes)[number]
  streamIds: string[]
  value: string
  unit: RuleUnit
  comparison: 'gt' | 'gte'
  warnPercent: string
  consequence: string
  citation: string
  reason: string
}

const unitsOf: Record<RuleMeasure, readonly RuleUnit[]> = {
  'contents-volume': volumeUnits,
  'container-capacity': volumeUnits,
  'contents-mass': massUnits,
  'generated-mass-per-calendar-month': massUnits,
  'days-since-first-fill': ['days'],
}

/** Writes or changes a company's own rule. */
export function OwnRuleForm({
  site,
  rule,
  onClose,
}: {
  site: Site
  rule: Rule | undefined
  onClose: () => void
}) {
  const { t } = useTranslation()
  const showProblem = useShowProblem('limits')
  const refreshWhatChanged = useRefreshWhatChanged()
  const { catalogue } = useCatalogue()
  const [id] = useState(newId)
  const [values, setValues] = useState<Values>(() => valuesOf(rule, site))
  const [errors, setErrors] = useState<Record<string, string>>({})
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const summary = useMemo(
    () =>
      Object.entries(errors).map(([path, message]) => {
        const field = path.split('.')[0] ?? path
        const label = t(field === 'reason' ? 'limits.rules.reason' : `limits.form.${field}`)
        return {
          fieldId: `rule-${field}`,
          message: t('limits.form.errorOf', { label, message }),
        }
      }),
    [errors, t],
  )
  const change = (more: Partial<Values>) => setValues((old) => ({ ...old, ...more }))
  const units = unitsOf[values.measure]

  const save = async () => {
    const parsed = ownRuleBody.safeParse(bodyOf(values, rule))
    const wrong: Record<string, string> = {}
    if (!parsed.success) {
      for (const issue of parsed.error.issues) {
        const path = issue.path.join('.')
        const isOwn = /^[a-z]+(-[a-z]+)+$/.test(issue.message)
        wrong[path] = fieldWords(t, 'limits', { path, code: isOwn ? issue.message : 'required' })
      }
    }
    if (rule !== undefined && values.reason.trim() === '')
      wrong['reason'] = t('api.fields.required')
    setErrors(wrong)
    if (!parsed.success || Object.keys(wrong).length > 0) return
    setBusy(true)
    setProblem(undefined)
    try {
      if (rule === undefined)
        await call(createRule, { body: { ...parsed.data, id, siteId: site.id } })
      else {
        await call(changeRule, {
          params: { id: rule.id },
          body: { ...parsed.data, version: rule.version, reason: values.reason },
        })
      }
      await refreshWhatChanged(whatRulesChange)
      onClose()
    } catch (error) {
      const refused: Record<string, string> = {}
      setProblem(
        showProblem(error, { setError: (name, { message }) => (refused[name] = message ?? '') }),
      )
      setErrors(refused)
      setBusy(false)
    }
  }

  return (
    <Dialog
      isOpen
      title={t(rule === undefined ? 'limits.rules.write' : 'limits.rules.changeTitle')}
      onClose={onClose}
      actions={
        <>
          <Button label={t('limits.rules.cancel')} onPress={onClose} />
          <Button
            kind="primary"
            label={t('limits.rules.save')}
            busy={isBusy}
            onPress={() => void save()}
          />
        </>
      }
    >
      <ErrorSummary errors={summary} />
      <Field
        label={t('limits.form.title')}
        maxLength={160}
        value={values.title}
        onChange={(title) => change({ title })}
        error={errors['title']}
        id="rule-title"
      />
      <Select
        label={t('limits.form.measure')}
        value={values.measure}
        onChange={(chosen) => {
          const measure = ruleMeasures.find((one) => one === chosen) ?? 'contents-volume'
          change({
            measure,
            unit: unitsOf[measure].includes(values.unit)
              ? values.unit
              : (unitsOf[measure][0] ?? 'L'),
          })
        }}
        options={ruleMeasures.map((one) => ({ value: one, label: t(`limits.measures.${one}`) }))}
      />
      {(values.measure === 'contents-volume' ||
        values.measure === 'container-capacity' ||
        values.measure === 'contents-mass') && (
        <ChoiceChips
          label={t('limits.form.scope')}
          value={values.scope}
          onChange={(scope) => change({ scope: ruleScopes.find((one) => one === scope) ?? 'site' })}
          options={ruleScopes.map((one) => ({ value: one, label: t(`limits.scopes.${one}`) }))}
        />
      )}
      <Text kind="label">{t('limits.form.streams')}</Text>
      {(catalogue?.streams ?? []).map((stream) => (
        <Checkbox
          key={stream.id}
          label={stream.name}
          checked={values.streamIds.includes(stream.id)}
          onChange={(isChecked) =>
            change({
              streamIds: isChecked
                ? [...values.streamIds, stream.id]
                : values.streamIds.filter((one) => one !== stream.id),
            })
          }
        />
      ))}
      <ChoiceChips
        label={t('limits.form.comparison')}
        value={values.comparison}
        onChange={(comparison) => change({ comparison: comparison === 'gte' ? 'gte' : 'gt' })}
        options={[
          { value: 'gt', label: t('limits.comparisons.gt') },
          { value: 'gte', label: t('limits.comparisons.gte') },
        ]}
      />
      <Row align="flex-start">
        <Field
          label={t('limits.form.threshold')}
          inputMode="decimal"
          characters={10}
          value={values.value}
          onChange={(value) => change({ value })}
          error={errors['threshold.value'] ?? errors['threshold.unit']}
          id="rule-threshold"
        />
        <Select
          label={t('limits.form.unit')}
          value={values.unit}
          onChange={(unit) => change({ unit: units.find((one) => one === unit) ?? values.unit })}
          options={units.map((unit) => ({ value: unit, label: t(`units.${unit}`, { count: 2 }) }))}
        />
      </Row>
      <Field
        label={t('limits.form.warnPercent')}
        inputMode="numeric"
        characters={4}
        suffix="%"
        value={values.warnPercent}
        onChange={(warnPercent) => change({ warnPercent })}
        error={errors['warnPercent']}
        id="rule-warnPercent"
      />
      <Field
        label={t('limits.form.citation')}
        hint={t('limits.form.citationHint')}
        maxLength={160}
        value={values.citation}
        onChange={(citation) => change({ citation })}
        error={errors['citation']}
        id="rule-citation"
      />
      <Field
        label={t('limits.form.consequence')}
        maxLength={300}
        value={values.consequence}
        onChange={(consequence) => change({ consequence })}
        error={errors['consequence']}
        id="rule-consequence"
      />
      {rule !== undefined && (
        <Field
          label={t('limits.rules.reason')}
          maxLength={300}
          value={values.reason}
          onChange={(reason) => change({ reason })}
          error={errors['reason']}
          id="rule-reason"
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

function valuesOf(rule: Rule | undefined, site: Site): Values {
  const before = rule?.definition
  return {
    title: before?.title ?? '',
    measure: before?.measure ?? 'contents-volume',
    scope: before?.scope ?? 'site',
    streamIds: before?.streams.streamIds ?? [],
    value: before?.threshold.value ?? '',
    unit: before?.threshold.unit ?? site.volumeUnit,
    comparison: before?.comparison ?? 'gt',
    warnPercent: before?.warnPercent ?? '80',
    consequence: before?.consequence ?? '',
    citation: before?.citation ?? '',
    reason: '',
  }
}

/** What this form does not show of a rule stays as it was. */
function bodyOf(values: Values, rule: Rule | undefined) {
  return {
    title: values.title,
    measure: values.measure,
    scope: values.scope,
    streams: { classes: rule?.definition.streams.classes ?? [], streamIds: values.streamIds },
    threshold: { value: values.value.trim(), unit: values.unit },
    comparison: values.comparison,
    warnPercent: values.warnPercent.trim(),
    minimumCapacity: rule?.definition.minimumCapacity ?? null,
    consequence: values.consequence,
    citation: values.citation,
  }
}
