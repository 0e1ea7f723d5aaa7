import { useTranslation } from 'react-i18next'
import { Button } from '../ui/button'
import { Notice } from '../ui/notice'
import { Text } from '../ui/text'
import { OfflineError, ProblemError } from './problem-error'

type Props = { reply: { error: Error | undefined; refresh: () => Promise<void> } }

/** In place of data that could not be read: what happened, and another try. */
export function CouldNotLoad({ reply }: Props) {
  const { t } = useTranslation()
  const { error } = reply
  if (error === undefined) return null
  const again = (
    <Button label={t('api.tryAgain')} onPress={() => void reply.refresh().catch(() => undefined)} />
  )
  if (error instanceof ProblemError) {
    const { code, title, detail, facts } = error.document
    return (
      <Notice kind="check" title={t(`problems.${code}.title`, { ...facts, defaultValue: title })}>
        <Text>{t(`problems.${code}.detail`, { ...facts, defaultValue: detail })}</Text>
        {code === 'internal' || code === 'too-many-requests' ? again : null}
      </Notice>
    )
  }
  if (!(error instanceof OfflineError)) throw error
  return (
    <Notice kind="waiting" title={t('api.offline.title')}>
      <Text>{t('api.cannotShow')}</Text>
      {again}
    </Notice>
  )
}
