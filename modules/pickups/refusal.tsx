import { useTranslation } from 'react-i18next'
import type { ShownProblem } from '../api/show-problem'
import { FactList } from '../ui/fact-list'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'

/** Why an act was refused. An ended permit is explained, with whom to call and who else could come. */
export function Refusal({ problem }: { problem: ShownProblem | undefined }) {
  const { t } = useTranslation()
  if (problem === undefined) return null
  const { facts } = problem
  return (
    <Notice kind="stop" title={problem.title}>
      <Text>{problem.detail}</Text>
      {problem.code === 'permit-expired' && (
        <FactList
          facts={[
            { name: t('pickups.permit.number'), value: facts['number'] ?? '–' },
            { name: t('pickups.permit.endedOn'), value: facts['endedOn'] ?? '–' },
            {
              name: t('pickups.permit.call'),
              value: `${facts['party'] ?? ''} ${facts['phone'] ?? ''}`,
            },
            {
              name: t('pickups.permit.others'),
              value: facts['others'] || t('pickups.permit.noOthers'),
            },
          ]}
        />
      )}
    </Notice>
  )
}
