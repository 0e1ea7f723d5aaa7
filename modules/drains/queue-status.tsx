import { useTranslation } from 'react-i18next'
import type { QueuedRecord } from '../offline/queued-record'
import { Status } from '../ui/status'

/** Where a record stands on its way to the book, as word and shape. */
export function QueueStatus({ record }: { record: QueuedRecord }) {
  const { t } = useTranslation()
  if (record.state === 'accepted') {
    return (
      <Status
        kind="settled"
        label={t('drains.states.standingNumbered', { number: record.number ?? '' })}
      />
    )
  }
  if (record.state === 'question') {
    return (
      <Status kind="check" label={`${t('drains.states.needs-a-look')} · ${record.number ?? ''}`} />
    )
  }
  if (record.state === 'refused') return <Status kind="stop" label={t('drains.states.refused')} />
  return <Status kind="waiting" label={t(`drains.states.${record.state}`)} />
}
