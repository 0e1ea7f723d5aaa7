import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { listRules, retireRule, switchRule, type Rule } from '@/shared/contracts/limits'
import { call } from '../api/call'
import { CouldNotLoad } from '../api/could-not-load'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useContract } from '../api/use-contract'
import { useRefreshWhatChanged } from '../api/use-refresh-what-changed'
import { useSession } from '../session/use-session'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { Dialog } from '../ui/dialog'
import { Field } from '../ui/field'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { measuredWords, reviewWords } from './flag-words'
import { OwnRuleForm } from './own-rule-form'
import { whatRulesChange } from './rule-refresh'

/** The site's rules with what each measures now; switched with a reason; own ones written and changed. */
export function RulesScreen() {
  const { t } = useTranslation()
  const { site } = useSite()
  const { can } = useSession()
  const reply = useContract(listRules, site === undefined ? null : { query: { siteId: site.id } })
  const [editing, setEditing] = useState<Rule | 'new'>()
  const mayChange = site !== undefined && can('change-rules', { siteId: site.id })
  const rows = reply.data?.rows.filter(({ retiredAt }) => retiredAt === null)
  return (
    <Screen
      title={t('limits.rules.titleOf', { site: site?.name ?? '' })}
      before={<LinkText href="/books/limits">{t('limits.all')}</LinkText>}
      actions={
        mayChange && (
          <Button
            icon="plus"
            kind="primary"
            label={t('limits.rules.write')}
            onPress={() => setEditing('new')}
          />
        )
      }
    >
      <Text>{t('limits.caution')}</Text>
      {rows === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {rows?.map((rule) => (
        <RuleCard key={rule.id} rule={rule} mayChange={mayChange} onEdit={() => setEditing(rule)} />
      ))}
      {editing !== undefined && site !== undefined && (
        <OwnRuleForm
          site={site}
          rule={editing === 'new' ? undefined : editing}
          onClose={() => setEditing(undefined)}
        />
      )}
    </Screen>
  )
}

function RuleCard({
  rule,
  mayChange,
  onEdit,
}: {
  rule: Rule
  mayChange: boolean
  onEdit: () => void
}) {
  const { t } = useTranslation()
  const [asking, setAsking] = useState<'switch' | 'retire'>()
  const { definition } = rule
  return (
    <Card role="group" label={definition.title}>
      <Row>
        <Heading level={2}>{definition.title}</Heading>
        <Status
          kind={rule.enabled ? 'settled' : 'voided'}
          label={t(rule.enabled ? 'limits.rules.on' : 'limits.rules.off')}
        />
        {rule.origin === 'own' && <Status kind="note" label={t('limits.rules.own')} />}
        {definition.confidence === 'memory' && (
          <Status kind="check" label={t('limits.confidence.memory')} />
        )}
      </Row>
      {rule.findings.slice(0, 6).map((finding) => (
        <Text key={finding.periodKey}>
          {[finding.subject, measuredWords(t, finding)].filter(Boolean).join(': ')}
        </Text>
      ))}
      <Text kind="hint">{reviewWords(t, definition.citation)}</Text>
      {definition.caution !== '' && <Text kind="hint">{definition.caution}</Text>}
      {mayChange && (
        <Row>
          <Button
            label={t(rule.enabled ? 'limits.rules.switchOff' : 'limits.rules.switchOn')}
            hint={definition.title}
            onPress={() => setAsking('switch')}
          />
          {rule.origin === 'own' && (
            <>
              <Button label={t('limits.rules.change')} hint={definition.title} onPress={onEdit} />
              <Button
                kind="danger"
                label={t('limits.rules.retire')}
                hint={definition.title}
                onPress={() => setAsking('retire')}
              />
            </>
          )}
        </Row>
      )}
      {asking !== undefined && (
        <RuleDialog rule={rule} what={asking} onClose={() => setAsking(undefined)} />
      )}
    </Card>
  )
}

function RuleDialog({
  rule,
  what,
  onClose,
}: {
  rule: Rule
  what: 'switch' | 'retire'
  onClose: () => void
}) {
  const { t } = useTranslation()
  const showProblem = useShowProblem('limits')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [reason, setReason] = useState('')
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const act = t(
    what === 'retire'
      ? 'limits.rules.retire'
      : rule.enabled
        ? 'limits.rules.switchOff'
        : 'limits.rules.switchOn',
  )
  const save = async () => {
    setBusy(true)
    setProblem(undefined)
    try {
      const params = { id: rule.id }
      if (what === 'retire') await call(retireRule, { params })
      else
        await call(switchRule, {
          params,
          body: { enabled: !rule.enabled, reason, version: rule.version },
        })
      await refreshWhatChanged(whatRulesChange)
      onClose()
    } catch (error) {
      setProblem(showProblem(error))
      setBusy(false)
    }
  }
  return (
    <Dialog
      isOpen
      title={`${act}: ${rule.definition.title}`}
      onClose={onClose}
      actions={
        <>
          <Button label={t('limits.rules.cancel')} onPress={onClose} />
          <Button
            kind={what === 'retire' ? 'danger' : 'primary'}
            label={act}
            busy={isBusy}
            disabled={what === 'switch' && reason.trim() === ''}
            onPress={() => void save()}
          />
        </>
      }
    >
      {what === 'switch' ? (
        <Field
          label={t('limits.rules.reason')}
          maxLength={300}
          value={reason}
          onChange={setReason}
        />
      ) : (
        <Text>{t('limits.rules.retireText')}</Text>
      )}
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
    </Dialog>
  )
}
