import { randomUUID } from 'node:crypto'
import {
  aContainer,
  aMachine,
  aParty,
  aSite,
  knownPassword,
  nextCode,
  signInAs,
  streamOf,
  type Member,
} from '../factories'
import { expectDone } from '../pickups'
import type { AskedRequest, AskedWorld, MakeRequest, RequestTable } from './asked-request'

type Kind = {
  /** As in the contracts' names: listSite, readSite ... */
  singular: string
  path: string
  reach: 'site' | 'organisation'
  make: (world: AskedWorld) => Promise<{ id: string }>
  body: (world: AskedWorld) => Promise<object> | object
}

const kinds: Kind[] = [
  {
    singular: 'Site',
    path: '/sites',
    reach: 'organisation',
    make: ({ test, site }) => aSite(test, { organisation: site.organisation }),
    body: () => ({
      code: nextCode('S'),
      name: 'Invented Yard',
      address: '1 Invented Road',
      phone: '555-0101',
      identificationNumber: 'XX0000000000',
      timeZone: 'America/Denver',
      profile: 'us-federal-baseline',
      volumeUnit: 'gal_us',
      massUnit: 'lb_avdp',
    }),
  },
  {
    singular: 'Stream',
    path: '/streams',
    reach: 'organisation',
    make: ({ administrator }) => made(administrator, '/streams', aStreamBody()),
    body: aStreamBody,
  },
  {
    singular: 'Fluid',
    path: '/fluids',
    reach: 'organisation',
    make: (world) => made(world.administrator, '/fluids', aFluidBody(world)),
    body: aFluidBody,
  },
  {
    singular: 'Machine',
    path: '/machines',
    reach: 'site',
    make: ({ site }) => aMachine(site),
    body: async ({ site }) => ({
      siteId: site.id,
      code: nextCode('M'),
      make: 'Invented',
      model: 'Digger',
      kind: 'excavator',
      serial: '1',
      fluidId: (await aMachine(site)).fluidId,
      reservoir: { value: '40', unit: 'gal_us' },
      system: null,
    }),
  },
  {
    singular: 'ContainerRecord',
    path: '/container-records',
    reach: 'site',
    make: ({ site }) => aContainer(site),
    body: ({ site }) => ({
      siteId: site.id,
      code: nextCode('C'),
      type: 'drum',
      description: 'blue',
      streamId: streamOf(site, 'mineral'),
      capacity: { value: '55', unit: 'gal_us' },
      fillPercent: '90',
      tareKilograms: '20.5',
      place: 'shed',
    }),
  },
  ...(['Hauler', 'Facility'] as const).map((singular): Kind => ({
    singular,
    path: singular === 'Hauler' ? '/haulers' : '/facilities',
    reach: 'organisation',
    make: ({ site }) => aParty(site.organisation, singular === 'Hauler' ? 'hauler' : 'facility'),
    body: () => ({
      name: `Invented Party ${nextCode('P')}`,
      identificationNumber: 'XX0000000001',
      address: '2 Invented Road',
      email: 'gate@party.example.org',
      phone: '555-0102',
      contactName: 'Dee Invented',
    }),
  })),
  {
    singular: 'Person',
    path: '/people',
    reach: 'organisation',
    make: ({ test, site }) => signInAs(test, site.organisation, 'technician', [site.id]),
    body: ({ site }) => ({
      name: 'Pia Invented',
      email: `${randomUUID()}@works.example.org`,
      phone: '555-0103',
      role: 'technician',
      siteIds: [site.id],
    }),
  },
]

/** Set-up records, people, permits and the trail. */
export const setUpRequests: RequestTable = {
  ...Object.fromEntries(kinds.flatMap((kind) => sixOf(kind))),
  readSite: { reach: 'site', make: ({ site }) => ({ params: { id: site.id } }) },
  addPermit: {
    reach: 'organisation',
    make: ({ hauler }) => ({ params: { id: hauler.id }, body: aPermitBody() }),
  },
  retirePermit: {
    reach: 'organisation',
    make: async ({ administrator, hauler }) => {
      const permit = aPermitBody()
      expectDone(await administrator.post(`/parties/${hauler.id}/permits`, permit))
      return { params: { id: permit.id } }
    },
  },
  setPassword: {
    reach: 'organisation',
    make: async ({ test, site }) => ({
      params: { id: (await signInAs(test, site.organisation, 'technician')).id },
      body: { password: 'another invented word' },
    }),
  },
  readCatalogue: { reach: 'organisation', make: () => ({}) },
  listAudit: { reach: 'organisation', make: ({ site }) => ({ query: { subjectId: site.id } }) },
  readMe: { reach: 'own', make: () => ({}) },
  changeMyPassword: {
    reach: 'own',
    make: ({ nextPassword }) => ({ body: { current: knownPassword, next: nextPassword() } }),
  },
}

function sixOf({ singular, path, reach, make, body }: Kind): [string, RequestTable[string]][] {
  const one: MakeRequest = async (world) => ({ params: { id: (await make(world)).id } })
  const create: MakeRequest = async (world) => ({
    body: {
      ...(await body(world)),
      id: randomUUID(),
      ...(singular === 'Person' ? { password: knownPassword } : {}),
    },
  })
  const change: MakeRequest = async (world): Promise<AskedRequest> => {
    const { id } = await make(world)
    const { version } = expectDone(await world.administrator.get(`${path}/${id}`))
    return { params: { id }, version, body: await body(world) }
  }
  return [
    [`list${singular}`, { reach, make: () => ({}) }],
    [`read${singular}`, { reach, make: one }],
    [`create${singular}`, { reach, make: create }],
    [`change${singular}`, { reach, make: change }],
    [`retire${singular}`, { reach, make: one }],
    [`restore${singular}`, { reach, make: one }],
  ]
}

async function made(by: Member, path: string, body: object): Promise<{ id: string }> {
  const { id } = expectDone(await by.post(path, { ...body, id: randomUUID() }))
  return { id }
}

function aStreamBody() {
  return {
    code: nextCode('s').toLowerCase(),
    name: nextCode('Invented stream'),
    kind: 'fluid',
    labelWords: 'USED OIL',
    wasteCode: '13 01 10',
    ruleClasses: ['used_oil'],
    density: { kilogramsPerLitre: '0.875', basis: 'default' },
  }
}

function aFluidBody({ site }: AskedWorld) {
  return { name: nextCode('Invented fluid'), streamId: streamOf(site, 'mineral') }
}

function aPermitBody() {
  return {
    id: randomUUID(),
    number: nextCode('INV'),
    startsOn: '2025-01-01',
    endsOn: '2025-12-31',
    note: '',
  }
}
