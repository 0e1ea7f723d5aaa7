import { z } from 'zod'

const party = z.object({
  name: z.string(),
  identificationNumber: z.string(),
  address: z.string(),
  phone: z.string(),
  email: z.string(),
  contactName: z.string(),
})

/**
 * Everything a manifest's PDF is drawn from. It is stored beside the bytes, so that the same paper can be made again;
 * the shape therefore only grows.
 */
export const manifestFacts = z.object({
  version: z.literal(1),
  kind: z.enum(['manifest', 'signed-manifest', 'void-manifest']),
  revision: z.number(),
  number: z.string(),
  orderNumber: z.string(),
  note: z.string(),
  paper: z.enum(['letter', 'a4']),
  locale: z.string(),
  profile: z.string(),
  publicUrl: z.string(),
  organisation: z.object({ name: z.string(), email: z.string(), phone: z.string() }),
  site: z.object({
    code: z.string(),
    name: z.string(),
    address: z.string(),
    phone: z.string(),
    identificationNumber: z.string(),
    timeZone: z.string(),
    volumeUnit: z.string(),
  }),
  hauler: party.extend({ permit: z.object({ number: z.string(), endsOn: z.string() }).nullable() }),
  facility: party,
  plannedOn: z.string(),
  issuedAt: z.string(),
  issuedBy: z.string(),
  lines: z.array(
    z.object({
      position: z.number(),
      containerCode: z.string(),
      containerType: z.string(),
      containerDescription: z.string(),
      containerCount: z.number(),
      stream: z.string(),
      labelWords: z.string(),
      wasteCode: z.string(),
      isFluid: z.boolean(),
      value: z.string(),
      unit: z.string(),
      litres: z.string(),
      kilograms: z.string(),
      pieces: z.number(),
      massKilograms: z.string().nullable(),
      density: z.string().nullable(),
    }),
  ),
  signatures: z.array(
    z.object({
      party: z.enum(['generator', 'driver']),
      name: z.string(),
      capacity: z.string(),
      strokes: z.array(z.array(z.tuple([z.number(), z.number()]))).nullable(),
      dispute: z.string(),
      signedAt: z.string(),
      documentSha256: z.string(),
    }),
  ),
  voided: z.object({ at: z.string(), by: z.string(), reason: z.string() }).nullable(),
  madeAt: z.string(),
})
export type ManifestFacts = z.infer<typeof manifestFacts>
