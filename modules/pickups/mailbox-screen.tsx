import { useTranslation } from 'react-i18next'
import { listMailbox } from '@/shared/contracts/pickups'
import { CouldNotLoad } from '../api/could-not-load'
import { useContract } from '../api/use-contract'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'

/** Mail that stays here because no mail server is set. */
export function MailboxScreen() {
  const { t } = useTranslation()
  const reply = useContract(listMailbox, { query: {} })
  return (
    <Screen title={t('pickups.mailbox')}>
      {reply.data === undefined && (reply.error ? <CouldNotLoad reply={reply} /> : <Loading />)}
      {reply.data?.rows.length === 0 && <EmptyState title={t('pickups.noMail')} />}
      {reply.data?.rows.map((mail) => (
        <Card key={mail.id}>
          <Heading level={2}>{mail.subject}</Heading>
          <Text kind="hint">{mail.toAddress}</Text>
          <Text>{mail.body}</Text>
        </Card>
      ))}
    </Screen>
  )
}
