import { sql } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { organisations, people } from '@/db/schema/organisations'
import { streams } from '@/db/schema/sites'
import { defaultStreams } from '@/shared/default-streams'
import { problem } from '../problem'

export async function hasOrganisation(tx: Transaction): Promise<boolean> {
  const found = await tx.select({ id: organisations.id }).from(organisations).limit(1)
  return found.length > 0
}

/**
 * Makes the organisation and its first administrator, only while there is none: a lock lets one of two win.
 * @throws Problem already-set-up
 */
export async function setUpFirstOrganisation(
  tx: Transaction,
  tools: { clock: () => Date; newId: () => string },
  given: {
    organisationName: string
    phone: string
    name: string
    email: string
    passwordHash: string
  },
) {
  // One arbitrary number, the same in every process: whoever comes second waits, then finds the organisation.
  await tx.execute(sql`select pg_advisory_xact_lock(20250309)`)
  if (await hasOrganisation(tx)) throw problem('already-set-up')
  return makeOrganisation(tx, tools, {
    ...given,
    organisationId: tools.newId(),
    personId: tools.newId(),
    isDemo: false,
  })
}

/** The organisation, its administrator and the streams it starts with; no site yet. */
export async function makeOrganisation(
  tx: Transaction,
  tools: { clock: () => Date; newId: () => string },
  given: {
    organisationId: string
    personId: string
    organisationName: string
    phone: string
    name: string
    email: string
    passwordHash: string
    isDemo: boolean
  },
) {
  const now = tools.clock()
  await tx.insert(organisations).values({
    id: given.organisationId,
    name: given.organisationName,
    email: given.email,
    phone: given.phone,
    isDemo: given.isDemo,
    createdAt: now,
  })
  await tx.insert(people).values({
    id: given.personId,
    organisationId: given.organisationId,
    name: given.name,
    email: given.email,
    role: 'administrator',
    passwordHash: given.passwordHash,
    version: tools.newId(),
    createdAt: now,
  })
  await tx.insert(streams).values(
    defaultStreams.map((stream) => ({
      id: tools.newId(),
      organisationId: given.organisationId,
      code: stream.code,
      name: stream.name,
      kind: stream.kind,
      labelWords: stream.labelWords,
      wasteCode: stream.wasteCode,
      ruleClasses: [...stream.ruleClasses],
      density: stream.density?.kilogramsPerLitre ?? null,
      densityBasis: stream.density?.basis ?? null,
      version: tools.newId(),
      createdAt: now,
    })),
  )
  return { id: given.personId, organisationId: given.organisationId }
}
