import { useTranslation } from 'react-i18next'
import { useSession } from '../session/use-session'
import { Card } from '../ui/card'
import { LinkText } from '../ui/link-text'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'
import { kindNames, kindOf } from './kinds'

/** What the company works with; each kind is a list of its own. */
export function SetupScreen() {
  const { t } = useTranslation()
  const { can } = useSession()
  const shown = kindNames.filter((name) => can(kindOf(name)?.read ?? 'read-set-up'))
  return (
    <Screen title={t('setup.title')} width="narrow">
      <Text>{t('setup.intro')}</Text>
      {shown.map((name) => (
        <Card key={name}>
          <LinkText href={`/setup/${name}`}>{t(`setup.kinds.${name}`)}</LinkText>
          <Text kind="hint">{t(`setup.about.${name}`)}</Text>
        </Card>
      ))}
      <Card>
        <LinkText href="/books/limits/rules">{t('setup.kinds.rules')}</LinkText>
        <Text kind="hint">{t('setup.about.rules')}</Text>
      </Card>
    </Screen>
  )
}
