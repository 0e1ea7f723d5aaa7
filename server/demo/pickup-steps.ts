import type { Transaction } from '@/db/client'
import { findPickup, listDocuments, listPickupLines } from '@/db/queries/pickups'
import type { ReceivePickupBody } from '@/shared/contracts/pickups'
import { issuePickup } from '../pickups/issue-pickup'
import { planPickup } from '../pickups/plan-pickup'
import { receivePickup } from '../pickups/receive-pickup'
import { settlePickup } from '../pickups/settle-pickup'
import { signPickup } from '../pickups/sign-pickup'
import { voidPickup } from '../pickups/void-pickup'
import { haulerCalled, pickupPartiesOf } from './company'
import { demoId } from './demo-id'
import type { DemoStep } from './replay'
import { signatureStrokes } from './signature-strokes'

type Line = Awaited<ReturnType<typeof listPickupLines>>[number]
type Received = Omit<ReceivePickupBody['lines'][number], 'lineId'>

/** A pickup of a site, step by step; left out, a quantity is what the book holds when it is planned. */
export function pickupOf(site: string, key: string) {
  const id = demoId(`pickup ${key}`)
  const { officer, hauler, facility } = pickupPartiesOf(site)
  const step = (what: string, at: Date, act: DemoStep['act']): DemoStep => ({
    name: `${what} ${key}`,
    at,
    by: officer,
    act,
  })
  return {
    plan: (at: Date, plannedOn: string, lines: { container: string; litres?: string }[]) =>
      step('plan', at, (tx, context) =>
        planPickup(tx, context, {
          id,
          siteId: demoId(site),
          haulerId: demoId(hauler),
          facilityId: demoId(facility),
          plannedOn,
          orderNumber: '',
          note: '',
          lines: lines.map(({ container, litres }) => ({
            id: demoId(`line ${container} of ${key}`),
            containerId: demoId(container),
            ...(litres === undefined ? {} : { quantity: { value: litres, unit: 'L' as const } }),
            pieces: 0,
            containerCount: 1,
          })),
        }),
      ),
    issue: (at: Date) =>
      step('issue', at, async (tx, context) =>
        issuePickup(tx, context, id, await versionOf(tx, id)),
      ),
    sign: (at: Date) => [
      step('sign', at, signatureOf(id, 'generator', officer, 'EHS officer')),
      step(
        'sign out',
        new Date(at.getTime() + 4 * 60_000),
        signatureOf(id, 'driver', haulerCalled(hauler).contactName, hauler),
      ),
    ],
    receive: (at: Date, receivedOn: string, ticket: string, of: (line: Line) => Received) =>
      step('receive', at, async (tx, context) =>
        receivePickup(tx, context, id, {
          version: await versionOf(tx, id),
          receivedOn,
          ticket,
          note: '',
          lines: (await listPickupLines(tx, [id])).map((line) => ({
            lineId: line.line.id,
            ...of(line),
          })),
        }),
      ),
    settle: (at: Date, cause = 'within-rule', note = '') =>
      step('settle', at, async (tx, context) =>
        settlePickup(tx, context, id, { version: await versionOf(tx, id), cause, note }),
      ),
    void: (at: Date, reason: string) =>
      step('void', at, async (tx, context) =>
        voidPickup(tx, context, id, { version: await versionOf(tx, id), reason }),
      ),
  }
}

function signatureOf(
  id: string,
  party: 'generator' | 'driver',
  name: string,
  capacity: string,
): DemoStep['act'] {
  return async (tx, context) => {
    const [document] = await listDocuments(tx, id)
    return signPickup(tx, context, id, {
      id: demoId(`signature of ${party} ${id}`),
      party,
      name,
      capacity,
      strokes: signatureStrokes(name),
      documentSha256: document?.sha256 ?? '',
      dispute: '',
      version: await versionOf(tx, id),
    })
  }
}

async function versionOf(tx: Transaction, id: string): Promise<number> {
  return (await findPickup(tx, { id }))?.pickup.version ?? 0
}
