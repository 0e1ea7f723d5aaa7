import { useTranslation } from 'react-i18next'
import { listFlags } from '@/shared/contracts/limits'
import { formatFigure } from '@/shared/quantities/format'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Text } from '../ui/text'

/** Quantity flags with the figures they rest on. */
export function LimitsScreen() {
  const { t } = useTranslation()
  const reply = useContract(listFlags, { query: {} })
  return (
    <Screen title={t('limits.title')}>
      <Text>{t('limits.caution')}</Text>
      {reply.data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {reply.data?.rows.length === 0 && <EmptyState title={t('limits.empty')} />}
      {reply.data?.rows.map((flag) => (
        <Card key={flag.id}>
          <Heading level={2}>{flag.rule.title}</Heading>
          <Status
            kind={flag.state === 'reviewed' ? 'settled' : 'check'}
            label={t(`limits.states.${flag.state}`)}
          />
          <Text>
            {t('limits.measured', {
              site: flag.siteCode,
              measured: formatFigure(flag.finding.measured, 1),
              threshold: formatFigure(flag.finding.threshold, 0),
              unit: t(`units.${flag.finding.unit}`, { count: 2 }),
            })}
          </Text>
          <Text kind="hint">{t('limits.review', { citation: flag.rule.citation })}</Text>
        </Card>
      ))}
    </Screen>
  )
}
