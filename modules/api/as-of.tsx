import { useTranslation } from 'react-i18next'
import { Text } from '../ui/text'

/** Says of when the data on screen is, where the server does not answer; silent otherwise. */
export function AsOf({ reply }: { reply: { asOf: string | undefined; isStale: boolean } }) {
  const { t } = useTranslation()
  if (!reply.isStale || reply.asOf === undefined) return null
  return (
    <Text kind="hint" role="status">
      {t('api.asOfNoSignal', { time: shownMoment(reply.asOf) })}
    </Text>
  )
}

/** The phone's own clock: this is about when this phone last had an answer. */
function shownMoment(instant: string): string {
  const at = new Date(instant)
  const isToday = at.toDateString() === new Date().toDateString()
  const time = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' }).format(at)
  if (isToday) return time
  const day = new Intl.DateTimeFormat('en-GB', {
    weekday: 'short',
    day: 'numeric',
    month: 'short',
  }).format(at)
  return `${day}, ${time}`
}
