import { useState } from 'react'
import { useRouter } from 'expo-router'
import { View } from 'react-native'
import { useTranslation } from 'react-i18next'
import { formatTyped } from '@/shared/quantities/format'
import { useOnline } from '../offline/use-online'
import { useQueue, useQueuedRecords } from '../offline/queue-provider'
import { isUnsent, type QueuedRecord } from '../offline/queued-record'
import { Button } from '../ui/button'
import { Card } from '../ui/card'
import { Dialog } from '../ui/dialog'
import { Heading } from '../ui/heading'
import { LinkText } from '../ui/link-text'
import { EmptyState } from '../ui/loading'
import { gap } from '../ui/measures'
import { Notice } from '../ui/notice'
import { Screen } from '../ui/screen'
import { Status } from '../ui/status'
import { Text } from '../ui/text'
import { fieldWords } from '../api/field-words'
import { QueueStatus } from './queue-status'
import { useDrainDraft } from './use-drain-draft'

const dayMs = 24 * 3_600_000

/** What is still on this phone: offline is a normal state, the work is safe, and it can be sent by hand. */
export function UnsentScreen() {
  const { t } = useTranslation()
  const queue = useQueue()
  const records = useQueuedRecords()
  const isOnline = useOnline()
  const [now] = useState(() => Date.now())
  const [isSending, setSending] = useState(false)
  const [removing, setRemoving] = useState<QueuedRecord>()
  const draft = useDrainDraft()
  const unsent = records.filter(isUnsent)
  const sent = records.filter((record) => !isUnsent(record)).reverse()
  const lastTried = unsent
    .flatMap(({ lastTriedAt }) => lastTriedAt ?? [])
    .sort()
    .at(-1)
  const isOld = unsent.some(({ savedAt }) => now - Date.parse(savedAt) > dayMs)

  async function sendNow() {
    setSending(true)
    await queue.flush({ all: true }).catch(() => undefined)
    setSending(false)
  }

  return (
    <Screen title={t('drains.unsent.title')} width="narrow">
      {unsent.length === 0 ? (
        <EmptyState
          title={t('drains.unsent.none')}
          action={<LinkText href="/drains">{t('drains.detail.toList')}</LinkText>}
        />
      ) : (
        <>
          <Text>{t('drains.unsent.intro')}</Text>
          <Text kind="hint">
            {lastTried === undefined
              ? t('drains.unsent.neverTried')
              : t('drains.unsent.lastTried', { time: shownTime(lastTried) })}
          </Text>
          {!isOnline && <Notice kind="waiting" title={t('drains.unsent.offline')} />}
          {isOld && <Notice kind="check" title={t('drains.unsent.old')} />}
          <Button
            kind="primary"
            isLarge
            isWide
            busy={isSending}
            label={isSending ? t('drains.unsent.sendingNow') : t('drains.unsent.sendNow')}
            onPress={() => void sendNow()}
          />
        </>
      )}
      {draft !== undefined && (
        <Card>
          <Text kind="strong">{t('drains.unsent.drafts')}</Text>
          <Status kind="waiting" label={t('drains.states.draft')} />
          <LinkText href="/drains/new">{t('drains.unsent.open')}</LinkText>
        </Card>
      )}
      {unsent.map((record) => (
        <UnsentCard key={record.id} record={record} onRemove={() => setRemoving(record)} />
      ))}
      {sent.length > 0 && <Heading level={2}>{t('drains.unsent.sent')}</Heading>}
      {sent.map((record) => (
        <Card key={record.id}>
          <Words record={record} />
          <QueueStatus record={record} />
          <LinkText href={`/drains/${record.number ?? record.id}`}>
            {t('drains.saved.open', { number: record.number ?? '' })}
          </LinkText>
        </Card>
      ))}
      {removing !== undefined && (
        <Dialog
          isOpen
          title={t('drains.unsent.removeTitle', {
            volume: volumeOf(removing),
            machine: removing.machineName,
          })}
          onClose={() => setRemoving(undefined)}
          actions={
            <>
              <Button
                kind="primary"
                label={t('drains.unsent.removeStay')}
                onPress={() => setRemoving(undefined)}
              />
              <Button
                kind="danger"
                label={t('drains.unsent.removeConfirm')}
                onPress={() => {
                  setRemoving(undefined)
                  void queue.remove(removing.id)
                }}
              />
            </>
          }
        >
          <Text>{t('drains.unsent.removeText')}</Text>
        </Dialog>
      )}
    </Screen>
  )
}

function UnsentCard({ record, onRemove }: { record: QueuedRecord; onRemove: () => void }) {
  const { t } = useTranslation()
  const router = useRouter()
  const { refusal } = record
  return (
    <Card>
      <Words record={record} />
      <QueueStatus record={record} />
      {refusal !== null && (
        <View role="group" style={{ gap: gap.tiny }}>
          <Text kind="strong">
            {t([`drains.problems.${refusal.code}.detail`, `problems.${refusal.code}.detail`], {
              ...refusal.facts,
              defaultValue: refusal.detail,
            })}
          </Text>
          {(refusal.fields ?? []).map((field) => (
            <Text key={field.path}>{fieldWords(t, 'drains', field)}</Text>
          ))}
        </View>
      )}
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: gap.large }}>
        {record.state !== 'sending' && (
          <Button
            kind={refusal === null ? 'secondary' : 'primary'}
            label={t('drains.unsent.fix')}
            hint={record.machineName}
            onPress={() => router.push({ pathname: '/drains/new', params: { record: record.id } })}
          />
        )}
        {record.state !== 'sending' && (
          <Button
            kind="danger"
            label={t('drains.unsent.remove')}
            hint={record.machineName}
            onPress={onRemove}
          />
        )}
      </View>
    </Card>
  )
}

function Words({ record }: { record: QueuedRecord }) {
  return (
    <>
      <Text kind="strong">{`${volumeOf(record)} · ${record.machineName}`}</Text>
      <Text kind="label">
        {`${record.containerCodes.join(', ')} · ${shownTime(record.savedAt)}`}
      </Text>
    </>
  )
}

function volumeOf({ body }: QueuedRecord): string {
  return formatTyped(body.volume.value, body.volume.unit)
}

/** The phone's own clock: this is about the phone, not about the site. */
function shownTime(instant: string): string {
  return new Intl.DateTimeFormat('en-GB', {
    weekday: 'short',
    day: 'numeric',
    month: 'short',
    hour: '2-digit',
    minute: '2-digit',
  }).format(new Date(instant))
}
