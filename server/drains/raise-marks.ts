import { and, eq, inArray, isNull, sql } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { accounts, balances } from '@/db/schema/book'
import { marks } from '@/db/schema/drains'
import { containers } from '@/db/schema/sites'
import type { DrainQuestion } from '@/shared/drain-questions'
import { normalise } from '@/shared/quantities/decimals'
import type { ActContext } from '../act-context'

type Raised = { code: string; containerId: string | null; details: Record<string, string> }

type Answers = readonly { code: string; answer: string }[]

/** Marks a drain with what it raised and what was answered; a question about a container marks that as well. */
export async function raiseDrainMarks(
  tx: Transaction,
  context: ActContext,
  drain: { id: string; siteId: string },
  questions: readonly DrainQuestion[],
  answers: Answers,
): Promise<void> {
  const raised = questions.map((question) => raisedBy(question, answers))
  await insertMarks(tx, context, drain.siteId, drain.id, raised)
}

/** Marks a container with what a transfer into it raised. */
export async function raiseContainerMarks(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  questions: readonly DrainQuestion[],
): Promise<void> {
  const raised = questions.map((question) => raisedBy(question, []))
  await insertMarks(tx, context, siteId, null, raised)
}

/**
 * What a later revision of a drain raises: a mark with the same facts stays as it is, whether it is open or was
 * looked at; an open one that no longer holds is closed with a note; what is new is raised.
 */
export async function renewDrainMarks(
  tx: Transaction,
  context: ActContext,
  drain: { id: string; siteId: string },
  questions: readonly DrainQuestion[],
  answers: Answers,
  note: string,
): Promise<void> {
  const before = await tx.select().from(marks).where(eq(marks.drainId, drain.id))
  const raised = questions.map((question) => {
    const sameQuestion = before.filter((mark) => keyOf(mark) === keyOf(question))
    const said = sameQuestion.flatMap(({ details }) => details.answer ?? []).at(-1)
    const earlier = said === undefined ? [] : [{ code: question.code, answer: said }]
    return {
      ...raisedBy(question, [...answers, ...earlier]),
      isKnown: sameQuestion.some(({ details }) => factsKey(details) === factsKey(question.facts)),
    }
  })
  const holds = new Set(
    questions.map((question) => `${keyOf(question)} ${factsKey(question.facts)}`),
  )
  const gone = before.filter(
    (mark) => mark.reviewedAt === null && !holds.has(`${keyOf(mark)} ${factsKey(mark.details)}`),
  )
  await closeMarks(
    tx,
    context,
    gone.map(({ id }) => id),
    note,
  )
  await insertMarks(
    tx,
    context,
    drain.siteId,
    drain.id,
    raised.filter(({ isKnown }) => !isKnown),
  )
}

function raisedBy({ code, containerId, facts }: DrainQuestion, answers: Answers): Raised {
  const answer = answers.find((given) => given.code === code)?.answer
  return { code, containerId, details: answer === undefined ? facts : { ...facts, answer } }
}

/** What is asked about; the figures of it are in the facts. */
function keyOf({ code, containerId }: { code: string; containerId: string | null }): string {
  return `${code} ${containerId ?? ''}`
}

function factsKey({ answer: _, ...facts }: Record<string, string>): string {
  return JSON.stringify(Object.entries(facts).sort(([a], [b]) => (a < b ? -1 : 1)))
}

/**
 * Marks containers that the book says hold less than nothing: an entry is missing or wrong. One open mark a
 * container is enough; when the container is above zero again, its mark is closed with a note.
 */
export async function markBelowZero(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  containerIds: readonly string[],
): Promise<void> {
  const ids = [...new Set(containerIds)]
  if (ids.length === 0) return
  const found = await tx
    .select({
      id: containers.id,
      code: containers.code,
      litres: sql<string>`min(${balances.litres})::text`,
      isBelow: sql<boolean>`bool_or(${balances.litres} < 0 or ${balances.kilograms} < 0 or ${balances.pieces} < 0)`,
      markId: sql<
        string | null
      >`(select ${marks.id} from ${marks} where ${marks.containerId} = ${containers.id}
        and ${marks.code} = 'balance-below-zero' and ${marks.reviewedAt} is null limit 1)`,
    })
    .from(containers)
    .innerJoin(accounts, eq(accounts.containerId, containers.id))
    .innerJoin(balances, eq(balances.accountId, accounts.id))
    .where(inArray(containers.id, ids))
    .groupBy(containers.id, containers.code)
  const below = found.filter(({ isBelow, markId }) => isBelow && markId === null)
  await insertMarks(
    tx,
    context,
    siteId,
    null,
    below.map(({ id, code, litres }) => ({
      code: 'balance-below-zero',
      containerId: id,
      details: { container: code, bookLitres: normalise(litres) },
    })),
  )
  const mended = found.flatMap(({ isBelow, markId }) =>
    !isBelow && markId !== null ? [markId] : [],
  )
  await closeMarks(tx, context, mended, 'The book is above zero again')
}

/** Closes all open marks of a drain: it was struck out. */
export async function closeDrainMarks(
  tx: Transaction,
  context: ActContext,
  drainId: string,
  note: string,
): Promise<void> {
  const open = await tx
    .select({ id: marks.id })
    .from(marks)
    .where(and(eq(marks.drainId, drainId), isNull(marks.reviewedAt)))
  await closeMarks(
    tx,
    context,
    open.map(({ id }) => id),
    note,
  )
}

async function closeMarks(
  tx: Transaction,
  context: ActContext,
  ids: string[],
  note: string,
): Promise<void> {
  if (ids.length === 0) return
  await tx
    .update(marks)
    .set({ reviewedAt: context.clock(), reviewedBy: context.person.id, reviewNote: note })
    .where(inArray(marks.id, ids))
}

async function insertMarks(
  tx: Transaction,
  context: ActContext,
  siteId: string,
  drainId: string | null,
  raised: readonly Raised[],
): Promise<void> {
  if (raised.length === 0) return
  await tx.insert(marks).values(
    raised.map(({ code, containerId, details }) => ({
      id: context.newId(),
      organisationId: context.person.organisationId,
      siteId,
      drainId,
      containerId,
      code,
      details,
      raisedAt: context.clock(),
    })),
  )
}
