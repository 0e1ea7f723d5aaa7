import { randomUUID } from 'node:crypto'
import { aContainer, aMachine, drainBody, streamOf } from '../factories'
import {
  aFilledDrum,
  expectDone,
  issued,
  planBody,
  planned,
  received,
  receiveBody,
  signBody,
  signedOut,
} from '../pickups'
import type { AskedWorld, RequestTable } from './asked-request'

async function aDrainBody({ site }: AskedWorld, more: Record<string, unknown> = {}) {
  const machine = await aMachine(site)
  return drainBody(site, { machine, container: await aContainer(site) }, more)
}

async function aDrain(world: AskedWorld): Promise<string> {
  const body = await aDrainBody(world)
  expectDone(await world.technician.post('/drains', body))
  return body.id
}

async function aDrum(world: AskedWorld) {
  return aFilledDrum(world, { value: '50', unit: 'L' })
}

async function aMark(world: AskedWorld): Promise<string> {
  const { site } = world
  const ester = await aContainer(site, { stream: 'ester' })
  const body = drainBody(site, { machine: await aMachine(site), container: ester })
  const { marks } = expectDone(await world.technician.post('/drains', body))
  return marks[0].id
}

function anOwnRule(siteId: string, more: object = {}) {
  return {
    id: randomUUID(),
    siteId,
    title: 'Own line of used oil',
    measure: 'contents-volume',
    scope: 'site',
    streams: { classes: ['used_oil'], streamIds: [] },
    threshold: { value: '5000', unit: 'L' },
    comparison: 'gt',
    warnPercent: '90',
    minimumCapacity: null,
    consequence: 'Call a hauler',
    citation: 'Yard rule 4',
    ...more,
  }
}

/** A rule of the company's own, as it was written and answered. */
async function aRule(world: AskedWorld, more: object = {}) {
  const body = anOwnRule(world.site.id, more)
  const { version } = expectDone(await world.officer.post('/rules', body))
  return { body, version: version as number }
}

async function aFlag(world: AskedWorld): Promise<string> {
  await aDrum(world)
  const { body } = await aRule(world, { threshold: { value: '1', unit: 'L' } })
  const { rows } = expectDone(await world.officer.get(`/flags?siteId=${world.site.id}`))
  return rows.find(({ ruleId }: { ruleId: string }) => ruleId === body.id).id
}

const ofSite = ({ site }: AskedWorld) => ({ query: { siteId: site.id } })
const ofYear = ({ site }: AskedWorld) => ({ query: { siteId: site.id, year: '2025' } })

/** Drains, containers, pickups, books and limits. */
export const workRequests: RequestTable = {
  askAboutDrain: { reach: 'site', make: async (world) => ({ body: await aDrainBody(world) }) },
  recordDrain: {
    reach: 'site',
    make: async (world) => {
      const bin = await aContainer(world.site, { stream: 'filters', type: 'bin' })
      const rags = await aContainer(world.site, { stream: 'absorbents', type: 'bin' })
      return {
        body: await aDrainBody(world, {
          spreadPercent: '2.5',
          filters: [{ count: 2, size: 'small', state: 'drained', containerId: bin.id }],
          absorbents: { mass: { value: '1.5', unit: 'kg' }, containerId: rags.id },
          breatherCaps: 1,
          refill: { volume: { value: '10', unit: 'gal_us' } },
          note: 'in two parts',
          answers: [{ code: 'unusual', answer: 'as it is' }],
        }),
      }
    },
  },
  amendDrain: {
    reach: 'site',
    make: async (world) => {
      const id = await aDrain(world)
      const { id: _id, siteId: _siteId, ...facts } = await aDrainBody(world)
      return {
        params: { id },
        body: {
          ...facts,
          expectedRevision: 1,
          reason: { code: 'mistyped', text: 'one more digit' },
          answers: [],
        },
      }
    },
  },
  strikeDrain: {
    reach: 'site',
    make: async (world) => ({
      params: { id: await aDrain(world) },
      body: { expectedRevision: 1, reason: 'stands twice' },
    }),
  },
  readDrain: { reach: 'site', make: async (world) => ({ params: { id: await aDrain(world) } }) },
  listDrains: {
    reach: 'site',
    make: ({ site }) => ({
      query: { siteId: site.id, from: '2025-01-01', to: '2025-12-31', search: 'D-25', limit: '5' },
    }),
  },
  listMarks: { reach: 'site', make: ofSite },
  reviewMark: {
    reach: 'site',
    make: async (world) => ({ params: { id: await aMark(world) }, body: { note: 'looked at' } }),
  },
  listContainers: { reach: 'site', make: ofSite },
  readContainer: {
    reach: 'site',
    make: async ({ site }) => ({
      params: { id: (await aContainer(site)).id },
      query: { lines: '10' },
    }),
  },
  holdContainer: {
    reach: 'site',
    make: async ({ site }) => ({
      params: { id: (await aContainer(site)).id },
      body: { id: randomUUID(), reason: 'smells of solvent', halogensPpm: '1200' },
    }),
  },
  releaseContainer: {
    reach: 'site',
    make: async ({ site, technician }) => {
      const { id } = await aContainer(site)
      const hold = { id: randomUUID(), reason: 'smells of solvent' }
      expectDone(await technician.post(`/containers/${id}/hold`, hold))
      return { params: { id }, body: { note: 'the laboratory found none' } }
    },
  },
  recordTransfer: {
    reach: 'site',
    make: async (world) => ({
      body: {
        id: randomUUID(),
        siteId: world.site.id,
        fromContainerId: (await aDrum(world)).id,
        toContainerId: (await aContainer(world.site)).id,
        volume: { value: '5', unit: 'L' },
        method: 'marked-pail',
        occurredAt: '2025-03-10T16:00:00Z',
        note: 'made room',
      },
    }),
  },
  readYard: { reach: 'site', make: ofSite },
  listPickups: { reach: 'site', make: ofSite },
  planPickup: {
    reach: 'site',
    make: async (world) => {
      const { id } = await aDrum(world)
      const quantity = { value: '20', unit: 'L' }
      const lines = [{ id: randomUUID(), containerId: id, quantity, pieces: 0, containerCount: 1 }]
      return { body: planBody(world, [], { lines, orderNumber: 'O-1', note: 'at the gate' }) }
    },
  },
  changePickup: {
    reach: 'site',
    make: async (world) => {
      const { id, version } = await planned(world, [await aDrum(world)])
      const { id: _id, siteId: _siteId, ...plan } = planBody(world, [await aDrum(world)])
      return { params: { id }, body: { ...plan, version } }
    },
  },
  issuePickup: {
    reach: 'site',
    make: async (world) => {
      const { id, version } = await planned(world, [await aDrum(world)])
      return { params: { id }, body: { version } }
    },
  },
  readPickup: {
    reach: 'site',
    make: async (world) => ({ params: { id: (await planned(world, [await aDrum(world)])).id } }),
  },
  signPickup: {
    reach: 'site',
    make: async (world) => {
      const pickup = await issued(world, [await aDrum(world)])
      const strokes = [[[10, 10], [200, 300]]] // prettier-ignore
      const body = signBody(pickup, 'generator', { strokes, capacity: 'officer', dispute: '' })
      return { params: { id: pickup.id }, body }
    },
  },
  receivePickup: {
    reach: 'site',
    make: async (world) => {
      const pickup = await signedOut(world, [await aDrum(world)])
      const body = receiveBody(pickup, [{ value: '50', unit: 'L' }], { note: 'as said' })
      return { params: { id: pickup.id }, body }
    },
  },
  settlePickup: {
    reach: 'site',
    make: async (world) => {
      const out = await signedOut(world, [await aDrum(world)])
      const { id, version } = await received(world, out, { value: '50', unit: 'L' })
      return { params: { id }, body: { version, cause: 'within-rule', note: 'agreed' } }
    },
  },
  voidPickup: {
    reach: 'site',
    make: async (world) => {
      const { id, version } = await planned(world, [await aDrum(world)])
      return { params: { id }, body: { version, reason: 'the hauler did not come' } }
    },
  },
  ticketDocument: {
    reach: 'site',
    make: async (world) => {
      const { documents } = await issued(world, [await aDrum(world)])
      return { params: { id: documents[0]?.id ?? '' } }
    },
  },
  listMailbox: { reach: 'organisation', make: () => ({ query: { limit: '5' } }) },
  readTotals: { reach: 'site', make: ofYear },
  exportTotals: { reach: 'site', make: ofYear },
  exportLines: { reach: 'site', make: ofYear },
  listYears: { reach: 'site', make: ofSite },
  listBookLines: {
    reach: 'site',
    make: ({ site }) => ({
      query: {
        siteId: site.id,
        year: '2025',
        month: '2025-03',
        side: 'in',
        groupId: streamOf(site, 'mineral'),
      },
    }),
  },
  readBookCheck: { reach: 'organisation', make: () => ({}) },
  listRules: { reach: 'site', make: ofSite },
  createRule: { reach: 'site', make: ({ site }) => ({ body: anOwnRule(site.id) }) },
  changeRule: {
    reach: 'site',
    make: async (world) => {
      const { body, version } = await aRule(world)
      const { id, siteId: _siteId, ...definition } = body
      return { params: { id }, body: { ...definition, version, reason: 'a new tank' } }
    },
  },
  switchRule: {
    reach: 'site',
    make: async (world) => {
      const { body, version } = await aRule(world)
      return { params: { id: body.id }, body: { enabled: false, reason: 'not here', version } }
    },
  },
  retireRule: {
    reach: 'site',
    make: async (world) => ({ params: { id: (await aRule(world)).body.id } }),
  },
  listFlags: { reach: 'site', make: ofSite },
  readFlag: { reach: 'site', make: async (world) => ({ params: { id: await aFlag(world) } }) },
  reviewFlag: {
    reach: 'site',
    make: async (world) => ({ params: { id: await aFlag(world) }, body: { note: 'looked at' } }),
  },
}
