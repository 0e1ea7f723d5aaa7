import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { listContainers } from '@/shared/contracts/containers'
import type { Drain } from '@/shared/contracts/drains'
import { useContract } from '../api/use-contract'
import { useCatalogue } from '../session/use-catalogue'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { gap } from '../ui/measures'
import { Text } from '../ui/text'
import { momentAt } from './drain-facts-card'
import { codesOf, factsInWords } from './revision-facts'

/** Every revision, newest first: what was is struck through and kept, what came instead beside it. */
export function DrainHistory({ drain }: { drain: Drain }) {
  const { t } = useTranslation()
  const { catalogue } = useCatalogue()
  const containers = useContract(listContainers, { query: { siteId: drain.siteId } })
  const names = {
    catalogue,
    containerCode: codesOf(drain, containers.data?.rows ?? []),
    timeZone: drain.timeZone,
  }
  const revisions = [...drain.revisions].sort((a, b) => b.revision - a.revision)
  return (
    <Card role="region" label={t('drains.detail.history')}>
      <Heading level={2}>{t('drains.detail.history')}</Heading>
      {revisions.map((revision) => {
        const before = drain.revisions.find((other) => other.revision === revision.revision - 1)
        const was = before === undefined ? [] : factsInWords(t, before.facts, names)
        const changes = factsInWords(t, revision.facts, names).filter(
          ({ value }, position) => was[position] !== undefined && was[position]?.value !== value,
        )
        const reason = [
          revision.act === 'amended' && revision.reasonCode !== null
            ? t([`drains.amend.reasons.${revision.reasonCode}`, 'drains.amend.reasons.other'])
            : '',
          revision.reasonText,
        ]
          .filter(Boolean)
          .join(': ')
        return (
          <View key={revision.revision} style={{ gap: gap.tiny }}>
            <Text kind="strong">
              {t(`drains.detail.historyOf.${revision.act}`, {
                name: revision.by.name,
                time: momentAt(revision.at, drain.timeZone),
              })}
            </Text>
            {reason !== '' && <Text>{t('drains.detail.reason', { reason })}</Text>}
            {changes.map(({ name, value }) => (
              <View
                key={name}
                style={{ flexDirection: 'row', flexWrap: 'wrap', columnGap: gap.small }}
              >
                <Text kind="label">{name}</Text>
                <del>
                  <Text struck>{was.find((old) => old.name === name)?.value}</Text>
                </del>
                <ins style={{ textDecoration: 'none' }}>
                  <Text>{value}</Text>
                </ins>
              </View>
            ))}
          </View>
        )
      })}
    </Card>
  )
}
