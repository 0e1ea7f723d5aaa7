import { useTranslation } from 'react-i18next'
import { LinkText } from './link-text'
import { Screen } from './screen'
import { Text } from './text'

export function NotFoundScreen() {
  const { t } = useTranslation()
  return (
    <Screen title={t('ui.notFound.title')} width="narrow">
      <Text>{t('ui.notFound.detail')}</Text>
      <LinkText href="/">{t('ui.notFound.home')}</LinkText>
    </Screen>
  )
}
