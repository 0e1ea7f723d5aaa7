import { and, eq, isNull } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { lockBook } from '@/db/queries/book'
import { containers, holds } from '@/db/schema/sites'
import { demand, type ActContext } from '../act-context'
import { writeAudit } from '../audit/write-audit'
import { problem } from '../problem'

/**
 * Holds a container: nothing in, nothing out. The same hold asked for again is held already. Takes its turn in the
 * site's book, so that no transfer slips past it.
 * @throws Problem not-found, already-held, id-reused
 */
export async function holdContainer(
  tx: Transaction,
  context: ActContext,
  containerId: string,
  body: { id: string; reason: string; halogensPpm: string | null },
): Promise<void> {
  const container = await getContainer(tx, containerId)
  demand(context, 'hold-container', { siteId: container.siteId })
  await lockBook(tx, container.siteId)
  const [before] = await tx.select().from(holds).where(eq(holds.id, body.id)).limit(1)
  if (before !== undefined) {
    const isSame =
      before.containerId === containerId &&
      before.heldBy === context.person.id &&
      before.reason === body.reason &&
      before.halogensPpm === body.halogensPpm
    if (!isSame) throw problem('id-reused')
    return
  }
  await tx.insert(holds).values({
    ...body,
    organisationId: context.person.organisationId,
    siteId: container.siteId,
    containerId,
    heldBy: context.person.id,
    heldAt: context.clock(),
  })
  await writeAudit(tx, context, {
    act: 'hold-container',
    subjectKind: 'container',
    subjectId: containerId,
    siteId: container.siteId,
    details: { reason: body.reason, halogensPpm: body.halogensPpm },
  })
}

/** Releases it, with the result that allows it. @throws Problem not-found, not-held */
export async function releaseContainer(
  tx: Transaction,
  context: ActContext,
  containerId: string,
  note: string,
): Promise<void> {
  const container = await getContainer(tx, containerId)
  demand(context, 'release-container', { siteId: container.siteId })
  await lockBook(tx, container.siteId)
  const released = await tx
    .update(holds)
    .set({ releasedBy: context.person.id, releasedAt: context.clock(), releaseNote: note })
    .where(and(eq(holds.containerId, containerId), isNull(holds.releasedAt)))
    .returning({ id: holds.id })
  if (released.length === 0) throw problem('not-held')
  await writeAudit(tx, context, {
    act: 'release-container',
    subjectKind: 'container',
    subjectId: containerId,
    siteId: container.siteId,
    details: { note },
  })
}

async function getContainer(tx: Transaction, id: string) {
  const [found] = await tx.select().from(containers).where(eq(containers.id, id)).limit(1)
  if (found === undefined) throw problem('not-found')
  return found
}
