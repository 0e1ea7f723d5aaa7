import { and, asc, eq, gt, isNull, ne, sql } from 'drizzle-orm'
import type { Role } from '@/shared/policies'
import type { Transaction } from '../client'
import { organisations, people, personSites, sessions } from '../schema/organisations'

const siteIds = sql<string[]>`array(
  select ${personSites.siteId}::text from ${personSites} where ${personSites.personId} = ${people.id} order by 1
)`

/** The person of a living session, with the sites they work at; undefined when either has ended. */
export async function findActingPerson(
  tx: Transaction,
  claims: { personId: string; sessionId: string },
) {
  const [found] = await tx
    .select({
      id: people.id,
      name: people.name,
      email: people.email,
      role: people.role,
      organisationId: people.organisationId,
      siteIds,
    })
    .from(people)
    .innerJoin(sessions, and(eq(sessions.id, claims.sessionId), eq(sessions.personId, people.id)))
    .where(and(eq(people.id, claims.personId), isNull(people.retiredAt), isNull(sessions.endedAt)))
    .limit(1)
  return found
}

/** By e-mail, whatever its case, over all organisations: only sign-in asks so. */
export async function findPersonByEmail(tx: Transaction, email: string) {
  const [found] = await tx
    .select()
    .from(people)
    .where(and(sql`lower(${people.email}) = lower(${email})`, isNull(people.retiredAt)))
    .limit(1)
  return found
}

/** Person, organisation and sites for the reply to a sign-in. */
export async function findSignedInPerson(tx: Transaction, personId: string) {
  const [found] = await tx
    .select({
      id: people.id,
      name: people.name,
      email: people.email,
      role: people.role,
      siteIds,
      organisation: {
        id: organisations.id,
        name: organisations.name,
        isDemo: organisations.isDemo,
      },
    })
    .from(people)
    .innerJoin(organisations, eq(organisations.id, people.organisationId))
    .where(and(eq(people.id, personId), isNull(people.retiredAt)))
    .limit(1)
  return found
}

/** A session that has neither ended nor run out; whoever rotates it takes turns. */
export async function lockLivingSession(tx: Transaction, id: string, now: Date) {
  const [found] = await tx
    .select()
    .from(sessions)
    .where(and(eq(sessions.id, id), isNull(sessions.endedAt), gt(sessions.expiresAt, now)))
    .limit(1)
    .for('update')
  return found
}

/** Ends the sessions of a person, except one when it is named. */
export async function endSessions(tx: Transaction, personId: string, now: Date, except?: string) {
  await tx
    .update(sessions)
    .set({ endedAt: now })
    .where(
      and(
        eq(sessions.personId, personId),
        isNull(sessions.endedAt),
        except === undefined ? undefined : ne(sessions.id, except),
      ),
    )
}

export async function listPeople(tx: Transaction) {
  return tx
    .select({
      id: people.id,
      name: people.name,
      email: people.email,
      phone: people.phone,
      role: people.role,
      version: people.version,
      retiredAt: people.retiredAt,
      siteIds,
    })
    .from(people)
    .orderBy(people.name, people.id)
}

/** How many administrators remain without one of them. Locks them all in one order: two who go at once take turns. */
export async function countAdministrators(tx: Transaction, except: string): Promise<number> {
  const found = await tx
    .select({ id: people.id })
    .from(people)
    .where(and(eq(people.role, 'administrator' satisfies Role), isNull(people.retiredAt)))
    .orderBy(asc(people.id))
    .for('update')
  return found.filter(({ id }) => id !== except).length
}
