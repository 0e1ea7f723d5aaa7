import { useState } from 'react'
import { useTranslation } from 'react-i18next'
import { formatDay, localDay, localTime } from '@/shared/calendar'
import { readFlag, reviewFlag, type Flag } from '@/shared/contracts/limits'
import { formatFigure } from '@/shared/quantities/format'
import { call } from '../api/call'
import { CouldNotLoad } from '../api/could-not-load'
import { useShowProblem, type ShownProblem } from '../api/show-problem'
import { useContract } from '../api/use-contract'
import { useRefreshWhatChanged } from '../api/use-refresh-what-changed'
import { useSession } from '../session/use-session'
import { useSite } from '../session/site-provider'
import { Button } from '../ui/button'
import { Card, Row } from '../ui/card'
import { FactList } from '../ui/fact-list'
import { TextArea } from '../ui/field'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { Loading } from '../ui/loading'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Table } from '../ui/table'
import { Text } from '../ui/text'
import { FlagStatus, measuredWords, reviewWords } from './flag-words'

/** One flag with the working behind it, and its review. */
export function FlagScreen({ id }: { id: string }) {
  const { t } = useTranslation()
  const { can } = useSession()
  const reply = useContract(readFlag, { params: { id } })
  const { data } = reply
  return (
    <Screen
      title={data?.rule.title ?? t('limits.one')}
      before={<LinkText href="/books/limits">{t('limits.all')}</LinkText>}
    >
      {data === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {data !== undefined && (
        <>
          <Row>
            <FlagStatus flag={data} />
          </Row>
          <FlagFacts flag={data} />
          <Working flag={data} />
          {data.state === 'open' && can('review-flag', { siteId: data.siteId }) && (
            <ReviewCard flag={data} />
          )}
          <Text kind="hint">{t('limits.caution')}</Text>
          <Text kind="hint">{t('limits.defer')}</Text>
        </>
      )}
    </Screen>
  )
}

function FlagFacts({ flag }: { flag: Flag }) {
  const { t } = useTranslation()
  const { sites } = useSite()
  const site = sites.find(({ id }) => id === flag.siteId)
  const at = (instant: string) => {
    const zone = site?.timeZone ?? 'UTC'
    return `${formatDay(localDay(instant, zone))}, ${localTime(instant, zone)}`
  }
  return (
    <Card>
      <FactList
        facts={[
          { name: t('limits.facts.site'), value: site?.name ?? flag.siteCode },
          { name: t('limits.facts.measured'), value: measuredWords(t, flag.finding) },
          {
            name: t('limits.facts.review'),
            value: reviewWords(t, flag.rule.citation),
          },
          { name: t('limits.facts.consequence'), value: flag.rule.consequence || '–' },
          { name: t('limits.facts.raised'), value: at(flag.raisedAt) },
          ...(flag.endedAt === null
            ? []
            : [{ name: t('limits.facts.ended'), value: at(flag.endedAt) }]),
          {
            name: t('limits.facts.version'),
            value: `${flag.ruleVersion}, ${t(`limits.confidence.${flag.rule.confidence}`)}`,
          },
          ...(flag.rule.caution === ''
            ? []
            : [{ name: t('limits.facts.caution'), value: flag.rule.caution }]),
          ...(flag.review === null
            ? []
            : [
                {
                  name: t('limits.facts.reviewed'),
                  value: `${at(flag.review.at)}, ${flag.review.by.name}: ${flag.review.note}`,
                },
              ]),
        ]}
      />
    </Card>
  )
}

/** Every line that counted, and every one that did not with its reason. */
function Working({ flag }: { flag: Flag }) {
  const { t } = useTranslation()
  const { finding, rule } = flag
  const decimals = finding.unit === 'days' ? 0 : 2
  return (
    <>
      <Table
        caption={t('limits.working.caption', { unit: t(`units.${finding.unit}`, { count: 2 }) })}
        columns={[
          { key: 'what', label: t('limits.working.what') },
          { key: 'figure', label: t('limits.working.figure'), isFigure: true },
          { key: 'note', label: t('limits.working.note') },
        ]}
        rows={[
          ...finding.working.map((line, index) => ({
            key: `${line.label} ${index}`,
            cells: [
              line.label,
              formatFigure(line.value, decimals),
              line.density === '' ? '' : t('limits.working.density', { density: line.density }),
            ],
          })),
          {
            key: 'sum',
            isTotal: true,
            cells: [t('limits.working.sum'), formatFigure(finding.measured, decimals), ''],
          },
          ...finding.excluded.map((line, index) => ({
            key: `not ${line.label} ${index}`,
            cells: [line.label, '–', t(`limits.excluded.${line.reason}`)],
          })),
        ]}
      />
      {rule.leavesOut.length > 0 && (
        <Card>
          <Heading level={3}>{t('limits.working.leavesOut')}</Heading>
          <ul style={{ margin: 0, paddingLeft: 20 }}>
            {rule.leavesOut.map((words) => (
              <li key={words}>
                <Text>{words}</Text>
              </li>
            ))}
          </ul>
        </Card>
      )}
    </>
  )
}

function ReviewCard({ flag }: { flag: Flag }) {
  const { t } = useTranslation()
  const showProblem = useShowProblem('limits')
  const refreshWhatChanged = useRefreshWhatChanged()
  const [note, setNote] = useState('')
  const [isBusy, setBusy] = useState(false)
  const [problem, setProblem] = useState<ShownProblem>()
  const review = async () => {
    setBusy(true)
    setProblem(undefined)
    try {
      await call(reviewFlag, { params: { id: flag.id }, body: { note } })
    } catch (error) {
      setProblem(showProblem(error))
    }
    await refreshWhatChanged(['readFlag', 'listFlags', 'readYard'])
    setBusy(false)
  }
  return (
    <Card role="region" label={t('limits.reviewing.title')}>
      <Heading level={2}>{t('limits.reviewing.title')}</Heading>
      <TextArea
        label={t('limits.reviewing.note')}
        maxLength={1000}
        value={note}
        onChange={setNote}
      />
      {problem !== undefined && (
        <Notice kind="stop" title={problem.title}>
          {problem.detail}
        </Notice>
      )}
      <Button
        kind="primary"
        label={t('limits.reviewing.act')}
        busy={isBusy}
        disabled={note.trim() === ''}
        onPress={() => void review()}
      />
    </Card>
  )
}
