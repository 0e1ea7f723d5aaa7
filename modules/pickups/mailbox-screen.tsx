import { useTranslation } from 'react-i18next'
import { listMailbox } from '@/shared/contracts/pickups'
import { CouldNotLoad } from '../api/could-not-load'
import { openDocument } from '../api/download'
import { usePages } from '../api/use-pages'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Heading } from '../ui/heading'
import { EmptyState, Loading } from '../ui/loading'
import { Screen } from '../ui/screen'
import { Text } from '../ui/text'

const nothing = { query: {} }

/** Mail that stays here because no mail server is set. */
export function MailboxScreen() {
  const { t } = useTranslation()
  const reply = usePages(listMailbox, nothing)
  const { rows } = reply
  return (
    <Screen title={t('pickups.mailbox.title')} width="narrow">
      <Text>{t('pickups.mailbox.text')}</Text>
      {rows === undefined &&
        (reply.error === undefined ? <Loading /> : <CouldNotLoad reply={reply} />)}
      {rows?.length === 0 && <EmptyState title={t('pickups.mailbox.empty')} />}
      {rows?.map((mail) => (
        <Card key={mail.id}>
          <Heading level={2}>{mail.subject}</Heading>
          <Text kind="hint">
            {t('pickups.mailbox.to', { name: mail.toName, address: mail.toAddress })}
          </Text>
          <Text>{mail.body}</Text>
          {mail.documentId !== null && (
            <Button
              icon="page"
              label={t('pickups.mailbox.attachment', { name: mail.attachmentName ?? '' })}
              onPress={() => void openDocument(mail.documentId ?? '')}
            />
          )}
        </Card>
      ))}
      {reply.hasMore && (
        <Button
          label={t('pickups.more')}
          busy={reply.isLoadingMore}
          onPress={() => void reply.loadMore()}
        />
      )}
    </Screen>
  )
}
