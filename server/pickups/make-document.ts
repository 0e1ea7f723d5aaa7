import { createHash } from 'node:crypto'
import type { Transaction } from '@/db/client'
import { findPickup, listDocuments } from '@/db/queries/pickups'
import { documents } from '@/db/schema/pickups'
import type { ActContext } from '../act-context'
import { contentHash } from '../content-hash'
import { gatherManifestFacts } from './pdf/gather-manifest-facts'
import type { ManifestFacts } from './pdf/manifest-facts'
import { problem } from '../problem'

/** Draws the next revision of a pickup's paper and keeps facts, bytes and both hashes. */
export async function makeDocument(
  tx: Transaction,
  context: ActContext,
  pickupId: string,
  kind: ManifestFacts['kind'],
): Promise<{ id: string; sha256: string }> {
  const found = await findPickup(tx, { id: pickupId })
  if (found === undefined) throw problem('not-found')
  const revision = (await listDocuments(tx, pickupId)).length + 1
  const facts = await gatherManifestFacts(tx, context, pickupId, kind, revision)
  const factsSha256 = contentHash(facts)
  const { drawManifest } = await import('./pdf/draw-manifest')
  const { bytes, pages } = await drawManifest(facts, factsSha256)
  const sha256 = createHash('sha256').update(bytes).digest('hex')
  const id = context.newId()
  await tx.insert(documents).values({
    id,
    organisationId: found.pickup.organisationId,
    siteId: found.site.id,
    pickupId,
    kind,
    revision,
    facts,
    pages,
    bytes,
    sha256,
    factsSha256,
    madeAt: context.clock(),
  })
  return { id, sha256 }
}
