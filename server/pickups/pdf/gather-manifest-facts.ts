import type { Transaction } from '@/db/client'
import {
  findOrganisation,
  findPickup,
  listPickupLines,
  listSignatures,
  type PartyRecord,
} from '@/db/queries/pickups'
import { withOffset } from '@/shared/calendar'
import { multiply, normalise } from '@/shared/quantities/decimals'
import { profileOf } from '@/shared/rules/profiles'
import type { ActContext } from '../../act-context'
import { problem } from '../../problem'
import { permitState } from '../missing-items'
import type { ManifestFacts } from './manifest-facts'

/** Reads what the paper says, as it stands in this transaction. @throws Problem not-found, pickup-incomplete */
export async function gatherManifestFacts(
  tx: Transaction,
  context: Pick<ActContext, 'clock' | 'publicUrl'>,
  id: string,
  kind: ManifestFacts['kind'],
  revision: number,
): Promise<ManifestFacts> {
  const found = await findPickup(tx, { id })
  const organisation = await findOrganisation(tx)
  if (found === undefined || organisation === undefined) throw problem('not-found')
  const { pickup, site, hauler, facility } = found
  if (hauler === null || facility === null || pickup.number === null || pickup.issuedAt === null) {
    throw problem('pickup-incomplete')
  }
  const permit = await permitState(tx, hauler.id, pickup.plannedOn)
  const profile = profileOf(site.profile)
  const local = (at: Date) => withOffset(at, site.timeZone)
  const lines = await listPickupLines(tx, [id])
  return {
    version: 1,
    kind,
    revision,
    number: pickup.number,
    orderNumber: pickup.orderNumber,
    note: pickup.note,
    paper: profile.paper,
    locale: profile.locale,
    profile: profile.id,
    publicUrl: context.publicUrl,
    organisation: { name: organisation.name, email: organisation.email, phone: organisation.phone },
    site: {
      code: site.code,
      name: site.name,
      address: site.address,
      phone: site.phone,
      identificationNumber: site.identificationNumber,
      timeZone: site.timeZone,
      volumeUnit: site.volumeUnit,
    },
    hauler: {
      ...partyFacts(hauler),
      permit: permit.state === 'current' ? { number: permit.number, endsOn: permit.endsOn } : null,
    },
    facility: partyFacts(facility),
    plannedOn: pickup.plannedOn,
    issuedAt: local(pickup.issuedAt),
    issuedBy: found.issuedByName ?? '',
    lines: lines.map(({ line, container, stream }) => {
      const isFluid = stream.kind === 'fluid'
      const density = isFluid ? stream.density : null
      return {
        position: line.position,
        containerCode: container.code,
        containerType: container.type,
        containerDescription: container.description,
        containerCount: line.containerCount,
        stream: stream.name,
        labelWords: stream.labelWords,
        wasteCode: stream.wasteCode,
        isFluid,
        value: line.shippedValue,
        unit: line.shippedUnit,
        litres: normalise(line.shippedLitres),
        kilograms: normalise(line.shippedKilograms),
        pieces: line.pieces,
        massKilograms: massOf(isFluid, line.shippedLitres, line.shippedKilograms, density),
        density: density === null ? null : normalise(density),
      }
    }),
    signatures: (await listSignatures(tx, id)).map((signature) => ({
      party: signature.party,
      name: signature.name,
      capacity: signature.capacity,
      strokes: signature.strokes,
      dispute: signature.dispute,
      signedAt: local(signature.signedAt),
      documentSha256: signature.documentSha256,
    })),
    voided:
      pickup.voidedAt === null
        ? null
        : { at: local(pickup.voidedAt), by: found.voidedByName ?? '', reason: pickup.voidReason },
    madeAt: context.clock().toISOString(),
  }
}

/** Weighed kilograms of a solid (none when it was only counted), litres x density of a fluid. */
export function massOf(
  isFluid: boolean,
  litres: string,
  kilograms: string,
  density: string | null,
): string | null {
  if (!isFluid) return normalise(kilograms) === '0' ? null : normalise(kilograms)
  return density === null ? null : multiply(litres, density)
}

function partyFacts(party: PartyRecord) {
  return {
    name: party.name,
    identificationNumber: party.identificationNumber,
    address: party.address,
    phone: party.phone,
    email: party.email,
    contactName: party.contactName,
  }
}
