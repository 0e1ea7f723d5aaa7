import type { Transaction } from '@/db/client'
import type { ActContext } from '../act-context'
import { addPermit } from '../set-up/add-permit'
import { createRecord } from '../set-up/set-up-act'
import {
  containerKind,
  fluidKind,
  machineKind,
  partyKind,
  personKind,
  siteKind,
} from '../set-up/set-up-kinds'
import { haulerCalled, quillbrook } from './company'
import { demoId } from './demo-id'
import type { DemoStep } from './replay'
import { streamIdOf } from './stream-id-of'

export const administrator = 'Kit Arrowell'

/** Everything a company sets up before its first drain, by its administrator, one record a minute. */
export function companySteps(password: string): DemoStep[] {
  const acts: [string, DemoStep['act']][] = [
    ...quillbrook.sites.map(({ drainsByMonth: _, ...site }) =>
      made(site.code, (tx, context) =>
        createRecord(tx, context, siteKind, { ...site, id: demoId(site.code) }),
      ),
    ),
    ...[...new Set(quillbrook.machines.map(({ fluid }) => fluid))].map((name) =>
      made(name, async (tx, context) =>
        createRecord(tx, context, fluidKind, {
          id: demoId(`fluid ${name}`),
          name,
          streamId: await streamIdOf(
            tx,
            quillbrook.machines.find(({ fluid }) => fluid === name)?.stream ?? '',
          ),
        }),
      ),
    ),
    ...quillbrook.machines.map((machine) =>
      made(machine.code, (tx, context) =>
        createRecord(tx, context, machineKind, {
          id: demoId(machine.code),
          siteId: demoId(machine.site),
          code: machine.code,
          make: machine.make,
          model: machine.model,
          kind: machine.kind,
          serial: '',
          fluidId: demoId(`fluid ${machine.fluid}`),
          reservoir: { value: machine.reservoirLitres, unit: 'L' },
          system: { value: machine.systemLitres, unit: 'L' },
        }),
      ),
    ),
    ...quillbrook.containers.map(({ code, site, stream, capacity, unit, ...container }) =>
      made(code, async (tx, context) =>
        createRecord(tx, context, containerKind, {
          ...container,
          id: demoId(code),
          code,
          siteId: demoId(site),
          streamId: await streamIdOf(tx, stream),
          capacity: { value: capacity, unit },
          tareKilograms: null,
        }),
      ),
    ),
    ...quillbrook.haulers.map(({ permits: _, ...hauler }) =>
      made(hauler.name, (tx, context) =>
        createRecord(tx, context, partyKind('hauler'), { ...hauler, id: demoId(hauler.name) }),
      ),
    ),
    ...quillbrook.facilities.map((facility) =>
      made(facility.name, (tx, context) =>
        createRecord(tx, context, partyKind('facility'), {
          ...facility,
          id: demoId(facility.name),
        }),
      ),
    ),
    ...quillbrook.people
      .filter(({ name }) => name !== administrator)
      .map(({ does: _, sites, ...person }) =>
        made(person.name, (tx, context) =>
          createRecord(tx, context, personKind, {
            ...person,
            id: demoId(person.name),
            siteIds: sites.map(demoId),
            password,
          }),
        ),
      ),
  ]
  const first = Date.parse('2024-12-16T15:00:00Z')
  return [
    ...acts.map(([name, act], index) => ({
      name,
      at: new Date(first + index * 60_000),
      by: administrator,
      act,
    })),
    ...permitSteps(new Date(first + acts.length * 60_000)),
  ]
}

function made(
  what: string,
  act: (tx: Transaction, context: ActContext) => Promise<unknown>,
): [string, DemoStep['act']] {
  return [`set up ${what}`, act]
}

/** Permits known at the start, and each later one on the morning it begins. */
function permitSteps(start: Date): DemoStep[] {
  return quillbrook.haulers.flatMap(({ name, permits }) =>
    permits.map(({ startsOn, endsOn }) => {
      const begins = new Date(`${startsOn}T13:40:00Z`)
      return permitStep(name, startsOn, endsOn, begins < start ? start : begins)
    }),
  )
}

export function permitStep(hauler: string, startsOn: string, endsOn: string, at: Date): DemoStep {
  const { identificationNumber } = haulerCalled(hauler)
  return {
    name: `permit ${hauler} ${startsOn}`,
    at,
    by: administrator,
    act: (tx, context) =>
      addPermit(tx, context, demoId(hauler), {
        id: demoId(`permit ${hauler} ${startsOn}`),
        number: `${identificationNumber}/${startsOn.slice(2, 4)}`,
        startsOn,
        endsOn,
        note: '',
      }),
  }
}
