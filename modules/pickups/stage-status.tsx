import { useTranslation } from 'react-i18next'
import type { PickupStage } from '@/shared/pickup-stages'
import { Status, type StatusKind } from '../ui/status'

const kinds: Record<PickupStage, StatusKind> = {
  planned: 'note',
  ready: 'waiting',
  'at-the-gate': 'waiting',
  'signed-out': 'waiting',
  'return-due': 'check',
  differs: 'stop',
  settled: 'settled',
  voided: 'voided',
}

export function StageStatus({ stage }: { stage: PickupStage }) {
  const { t } = useTranslation()
  return <Status kind={kinds[stage]} label={t(`pickups.stages.${stage}`)} />
}
