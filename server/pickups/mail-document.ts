import { eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { findOrganisation, findPickup } from '@/db/queries/pickups'
import { documents } from '@/db/schema/pickups'
import { formatDay } from '@/shared/calendar'
import { profileOf } from '@/shared/rules/profiles'
import type { ActContext } from '../act-context'
import { putInOutbox } from '../mail/put-in-outbox'
import { say } from '../words'

/** Puts the paper into the outbox for hauler and facility, in the act's own transaction. */
export async function mailDocument(
  tx: Transaction,
  context: ActContext,
  pickupId: string,
  documentId: string,
  occasion: 'issued' | 'signed' | 'voided',
): Promise<void> {
  const found = await findPickup(tx, { id: pickupId })
  const organisation = await findOrganisation(tx)
  const [document] = await tx
    .select({ factsSha256: documents.factsSha256 })
    .from(documents)
    .where(eq(documents.id, documentId))
  if (found?.pickup.number == null || organisation === undefined || document === undefined) return
  const { pickup, site, hauler, facility } = found
  for (const party of [hauler, facility]) {
    if (party === null) continue
    const words = {
      name: party.contactName || party.name,
      number: pickup.number ?? '',
      day: formatDay(pickup.plannedOn, profileOf(site.profile).locale),
      site: site.name,
      organisation: organisation.name,
      hauler: hauler?.name ?? '',
      facility: facility?.name ?? '',
      email: organisation.email,
      phone: site.phone || organisation.phone,
      link: `${context.publicUrl}/verify/${document.factsSha256}`,
    }
    await putInOutbox(tx, context, {
      toAddress: party.email,
      toName: party.name,
      subject: say(`mail.${occasion}.subject`, words),
      body: say(`mail.${occasion}.body`, words),
      documentId,
      attachmentName: `${pickup.number}.pdf`,
    })
  }
}
