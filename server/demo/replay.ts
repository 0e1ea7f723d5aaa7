import type { Transaction } from '@/db/client'
import { asMember } from '@/db/tenancy'
import type { ActContext, ActingPerson } from '../act-context'
import { organisationId, personCalled } from './company'
import { demoId } from './demo-id'

/** One thing somebody did at some moment, through the act that people use for it. */
export type DemoStep = {
  /** Unlike any other step's: ids made inside come from it. */
  name: string
  at: Date
  by: string
  act: (tx: Transaction, context: ActContext) => Promise<unknown>
}

/**
 * Does steps in the order of their moments, each as its person, with its moment as the present. Each is a transaction
 * inside the given one, so that a refused act leaves nothing behind.
 */
export async function replay(
  tx: Transaction,
  tools: Pick<ActContext, 'log' | 'publicUrl'>,
  steps: readonly DemoStep[],
): Promise<void> {
  const inOrder = [...steps].sort((a, b) => a.at.getTime() - b.at.getTime())
  for (const step of inOrder) {
    const person = actingPerson(step.by)
    let made = 0
    const context: ActContext = {
      ...tools,
      person,
      clock: () => step.at,
      newId: () => demoId(`${step.name} makes ${(made += 1)}`),
    }
    await asMember(tx, { organisationId, personId: person.id }, (inner) => step.act(inner, context))
  }
}

function actingPerson(name: string): ActingPerson {
  const { email, role, sites } = personCalled(name)
  return {
    id: demoId(name),
    name,
    email,
    role,
    siteIds: sites.map(demoId),
    organisationId,
  }
}
