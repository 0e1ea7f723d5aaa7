import type { Transaction } from '@/db/client'
import { books } from '@/db/schema/book'
import type { ActContext } from '../act-context'
import { firstHash } from './canonical-movement'

/** Opens the book of a new site at line 0. */
export async function openBook(
  tx: Transaction,
  context: Pick<ActContext, 'person'>,
  siteId: string,
): Promise<void> {
  await tx.insert(books).values({
    siteId,
    organisationId: context.person.organisationId,
    lastLineNo: 0,
    lastHash: firstHash,
  })
}
