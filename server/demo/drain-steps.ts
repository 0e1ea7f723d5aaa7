import type { Transaction } from '@/db/client'
import type { DrainFacts } from '@/shared/contracts/drains'
import type { MeasuringMethod } from '@/shared/quantities/methods'
import { recordDrain } from '../drains/record-drain'
import { machineCalled } from './company'
import { demoId } from './demo-id'
import type { DemoStep } from './replay'
import { streamIdOf } from './stream-id-of'

type Volume = { value: string; unit: 'gal_us' | 'L' | 'mL' }

export type DrainTold = {
  /** A machine of the list, or words for one that is not. */
  machine: string | { site: string; description: string; stream: string }
  poured: Date
  volume: Volume
  method: MeasuringMethod
  legs: { container: string; volume?: Volume }[]
  filters?: number
  absorbentKg?: string
  note?: string
}

/** A drain, recorded some minutes after it was poured unless told otherwise. */
export function drainStep(
  told: DrainTold & {
    name: string
    by: string
    recorded?: Date
    answers?: { code: string; answer: string }[]
  },
): DemoStep {
  const { name, by, poured, answers = [] } = told
  return {
    name,
    at: told.recorded ?? new Date(poured.getTime() + 4 * 60_000),
    by,
    act: async (tx, context) =>
      recordDrain(tx, context, {
        id: demoId(name),
        siteId: demoId(siteOf(told)),
        ...(await drainFactsOf(tx, told)),
        answers,
      }),
  }
}

function siteOf({ machine }: DrainTold): string {
  return typeof machine === 'string' ? machineCalled(machine).site : machine.site
}

/** A drain as the form would send it. */
export async function drainFactsOf(tx: Transaction, told: DrainTold): Promise<DrainFacts> {
  const { machine, filters = 0, absorbentKg = '0' } = told
  const listed = typeof machine === 'string' ? machineCalled(machine) : undefined
  return {
    machine:
      typeof machine === 'string'
        ? { kind: 'listed', machineId: demoId(machine) }
        : { kind: 'unlisted', description: machine.description },
    streamId: await streamIdOf(
      tx,
      typeof machine === 'string' ? machineCalled(machine).stream : machine.stream,
    ),
    occurredAt: told.poured.toISOString(),
    volume: told.volume,
    method: told.method,
    legs: told.legs.map(({ container, volume }) => ({ containerId: demoId(container), volume })),
    filters:
      filters === 0 ? [] : [{ count: filters, size: filterSizeOf(listed), state: 'drained' }],
    absorbents: absorbentKg === '0' ? undefined : { mass: { value: absorbentKg, unit: 'kg' } },
    breatherCaps: 0,
    note: told.note ?? '',
  }
}

function filterSizeOf(machine: { reservoirLitres: string } | undefined) {
  const litres = Number(machine?.reservoirLitres ?? 60)
  return litres > 150 ? 'large' : litres < 40 ? 'small' : 'medium'
}
