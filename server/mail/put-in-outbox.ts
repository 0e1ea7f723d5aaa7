import type { Transaction } from '@/db/client'
import { outbox } from '@/db/schema/trail'
import type { ActContext } from '../act-context'

/** Writes a message that will be sent after the transaction, or not at all when it fails. */
export async function putInOutbox(
  tx: Transaction,
  context: Pick<ActContext, 'newId' | 'clock' | 'person'>,
  message: {
    toAddress: string
    toName: string
    subject: string
    body: string
    documentId: string
    attachmentName: string
  },
): Promise<void> {
  await tx.insert(outbox).values({
    ...message,
    id: context.newId(),
    organisationId: context.person.organisationId,
    createdAt: context.clock(),
    state: 'waiting',
    nextAttemptAt: context.clock(),
  })
}
