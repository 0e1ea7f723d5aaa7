import { and, asc, eq, lte } from 'drizzle-orm'
import type { Logger } from 'pino'
import type { Database } from '@/db/client'
import { asService } from '@/db/tenancy'
import { documents } from '@/db/schema/pickups'
import { outbox } from '@/db/schema/trail'

/** Sends one message; throws when it could not be handed over. */
export type SendMail = (message: {
  to: { name: string; address: string }
  subject: string
  text: string
  attachment: { filename: string; content: Uint8Array } | null
}) => Promise<void>

const mostAttempts = 8

/**
 * Sends what is due, one message a transaction. The row is locked while it is sent, and other processes pass over
 * it. A refused message is tried again later and later, eight times over about a day. Without `send` (no mail server
 * is set) messages stay in the local mailbox.
 * @returns how many messages were looked at
 */
export async function sendOutbox(
  tools: { db: Database; clock: () => Date; log: Logger },
  send: SendMail | null,
): Promise<number> {
  let looked = 0
  while (await sendOne(tools, send)) looked += 1
  return looked
}

async function sendOne(
  { db, clock, log }: { db: Database; clock: () => Date; log: Logger },
  send: SendMail | null,
): Promise<boolean> {
  return asService(db, async (tx) => {
    const now = clock()
    const [message] = await tx
      .select()
      .from(outbox)
      .where(and(eq(outbox.state, 'waiting'), lte(outbox.nextAttemptAt, now)))
      .orderBy(asc(outbox.createdAt))
      .limit(1)
      .for('update', { skipLocked: true })
    if (message === undefined) return false
    const mine = eq(outbox.id, message.id)
    if (send === null) {
      await tx.update(outbox).set({ state: 'kept' }).where(mine)
      return true
    }
    const attempts = message.attempts + 1
    try {
      const [document] =
        message.documentId === null
          ? []
          : await tx
              .select({ bytes: documents.bytes })
              .from(documents)
              .where(eq(documents.id, message.documentId))
      await send({
        to: { name: message.toName, address: message.toAddress },
        subject: message.subject,
        text: message.body,
        attachment:
          document === undefined
            ? null
            : { filename: message.attachmentName ?? 'document.pdf', content: document.bytes },
      })
      await tx
        .update(outbox)
        .set({ state: 'sent', sentAt: now, attempts, lastError: '' })
        .where(mine)
    } catch (error) {
      const lastError = (error instanceof Error ? error.message : String(error)).slice(0, 500)
      log.warn({ message: message.id, attempts }, 'mail was not taken')
      await tx
        .update(outbox)
        .set({
          attempts,
          lastError,
          state: attempts >= mostAttempts ? 'failed' : 'waiting',
          nextAttemptAt: new Date(now.getTime() + 60_000 * 4 ** Math.min(attempts, 5)),
        })
        .where(mine)
    }
    return true
  })
}
