import { randomUUID } from 'node:crypto'
import { and, eq } from 'drizzle-orm'
import { books } from '@/db/schema/book'
import { rules } from '@/db/schema/limits'
import { asService } from '@/db/tenancy'
import { expectProblem } from '../helpers/expect-problem'
import {
  aContainer,
  aMachine,
  anOrganisation,
  aParty,
  aSite,
  drainBody,
  nextCode,
  signInAs,
  streamOf,
  type Member,
  type TestSite,
} from '../helpers/factories'
import { expectDone } from '../helpers/pickups'
import { anAskedWorld } from '../helpers/requests/asked-world'
import type { AskedRequest, AskedWorld } from '../helpers/requests/asked-request'
import { setUpRequests } from '../helpers/requests/set-up-requests'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let world: AskedWorld
let site: TestSite
let administrator: Member

beforeAll(async () => {
  product = await testApp()
  world = await anAskedWorld(product)
  site = world.site
  administrator = world.administrator
})
afterAll(() => product.close())

const kinds = [
  ['Site', '/sites', 'code', 'code-taken'],
  ['Stream', '/streams', 'code', 'code-taken'],
  ['Fluid', '/fluids', 'name', 'code-taken'],
  ['Machine', '/machines', 'code', 'code-taken'],
  ['ContainerRecord', '/container-records', 'code', 'code-taken'],
  ['Hauler', '/haulers', 'name', 'code-taken'],
  ['Facility', '/facilities', 'name', 'code-taken'],
  ['Person', '/people', 'email', 'email-taken'],
] as const

describe.each(kinds)('a record of the kind %s', (singular, path, unique, taken) => {
  async function aBody(): Promise<Record<string, unknown> & { id: string }> {
    const asked = (await setUpRequests[`create${singular}`]?.make(world)) as AskedRequest
    return asked.body as Record<string, unknown> & { id: string }
  }
  const withoutId = ({ id: _id, password: _password, ...rest }: Record<string, unknown>) => rest

  test('is read as it was made, with a version', async () => {
    const body = await aBody()
    const made = await administrator.post(path, body)
    expect(made.status).toBe(201)
    expect(made.body).toMatchObject({ ...withoutId(body), id: body.id, retiredAt: null })
    const read = await administrator.get(`${path}/${body.id}`)
    expect(read.headers.etag).toBe(`"${made.body.version}"`)
    expect(read.body).toEqual(made.body)
    const { rows } = (await administrator.get(path)).body as { rows: object[] }
    expect(rows).toContainEqual(made.body)
    expect(JSON.stringify(read.body)).not.toMatch(/password|organisationId|createdAt/i)
  })

  test('is answered again when it is sent again, and refused when it differs', async () => {
    const body = await aBody()
    const made = await administrator.post(path, body)
    const again = await administrator.post(path, body)
    expect(again.status).toBe(200)
    expect(again.body).toEqual(made.body)
    const other = { ...(await aBody()), id: body.id }
    expectProblem(await administrator.post(path, other), 409, 'id-reused')
  })

  test('has an id that no other organisation can take over', async () => {
    const body = await aBody()
    expectDone(await administrator.post(path, body))
    const stranger = (await anOrganisation(product)).administrator
    const theirs = await stranger.post(path, body)
    expect([400, 409]).toContain(theirs.status)
    if (theirs.status === 409 && unique !== 'email') expectProblem(theirs, 409, 'id-reused')
    expectProblem(await stranger.get(`${path}/${body.id}`), 404, 'not-found')
  })

  test('shares its name or code with no other, retired ones included', async () => {
    const body = await aBody()
    expectDone(await administrator.post(path, body))
    expectDone(await administrator.post(`${path}/${body.id}/retire`))
    const second = { ...(await aBody()), [unique]: body[unique] }
    expectProblem(await administrator.post(path, second), 409, taken)
  })

  test('is changed from the version that was read, and from no other', async () => {
    const { params, version, body } = (await setUpRequests[`change${singular}`]?.make(
      world,
    )) as Required<AskedRequest>
    const address = `${path}/${params.id}`
    const bare = await administrator.put(address, body as object, '')
    expectProblem(bare, 428, 'version-required')
    const changed = await administrator.put(address, body as object, version)
    expect(changed.status).toBe(200)
    expect(changed.body).toMatchObject({ ...(body as object), id: params.id })
    expect(changed.body.version).not.toBe(version)
    expect(changed.headers.etag).toBe(`"${changed.body.version}"`)
    const late = await administrator.put(address, body as object, version)
    expectProblem(late, 409, 'changed-under-you')
    expect((await administrator.get(address)).body).toEqual(changed.body)
  })

  test('is changed by one of two at the same moment', async () => {
    const { params, version, body } = (await setUpRequests[`change${singular}`]?.make(
      world,
    )) as Required<AskedRequest>
    const change = () => administrator.put(`${path}/${params.id}`, body as object, version)
    const replies = await Promise.all([change(), change()])
    expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
  })

  test('is retired and brought back, each as often as asked', async () => {
    const { params } = (await setUpRequests[`retire${singular}`]?.make(
      world,
    )) as Required<AskedRequest>
    const address = `${path}/${params.id}`
    for (const _ of [1, 2]) {
      const retired = await administrator.post(`${address}/retire`)
      expect(retired.body.retiredAt).toBe('2025-03-10T18:00:00.000Z')
    }
    for (const _ of [1, 2]) {
      expect((await administrator.post(`${address}/restore`)).body.retiredAt).toBeNull()
    }
  })

  test('leaves who did what in the trail, once, and no password', async () => {
    const body = await aBody()
    expectDone(await administrator.post(path, body))
    expectDone(await administrator.post(path, body))
    expectDone(await administrator.post(`${path}/${body.id}/retire`))
    const { rows } = (await administrator.get(`/audit?subjectId=${body.id}`)).body
    expect(rows.map(({ details }: { details: { what: string } }) => details.what).sort()).toEqual([
      'create',
      'retire',
    ])
    expect(rows[0].by).toEqual({ id: administrator.id, name: 'Ada Invented' })
    expect(JSON.stringify(rows)).not.toMatch(/password|argon2/)
  })
})

describe('a container', () => {
  const containerBody = (more: object = {}) => ({
    id: randomUUID(),
    siteId: site.id,
    code: nextCode('C'),
    type: 'drum',
    description: '',
    streamId: streamOf(site, 'mineral'),
    capacity: { value: '55', unit: 'gal_us' },
    fillPercent: '90',
    tareKilograms: null,
    place: '',
    ...more,
  })

  test.each([
    // NIST: 1 US gallon is 3.785411784 L, 1 imperial gallon 4.54609 L, 1 petroleum barrel 158.987294928 L.
    ['55', 'gal_us', '90', '208.19764812', '187.377883308'],
    ['45', 'gal_imp', '97.5', '204.57405', '199.45969875'],
    ['1', 'bbl_petroleum', '33.333', '158.987294928', '52.99523501835'],
    ['205', 'L', '100', '205', '205'],
  ])(
    'of %s %s filled to %s %% holds exactly so much',
    async (value, unit, fillPercent, ...exact) => {
      const body = containerBody({ capacity: { value, unit }, fillPercent })
      const made = expectDone(await administrator.post('/container-records', body))
      expect([made.capacityLitres, made.fillLineLitres.slice(0, 14)]).toEqual([
        exact[0],
        exact[1]?.slice(0, 14),
      ])
      expect(made.capacity).toEqual({ value, unit })
    },
  )

  test.each([
    ['0', 'fillPercent'],
    ['100.1', 'fillPercent'],
    ['-5', 'fillPercent'],
  ])('is not filled to %s %%', async (fillPercent, field) => {
    const reply = await administrator.post('/container-records', containerBody({ fillPercent }))
    expectProblem(reply, 400, 'fields-refused', field)
  })

  test('belongs to a site and a stream that are there and in use', async () => {
    const post = (more: object) => administrator.post('/container-records', containerBody(more))
    expectProblem(await post({ siteId: randomUUID() }), 400, 'fields-refused', 'siteId')
    expectProblem(await post({ streamId: randomUUID() }), 400, 'fields-refused', 'streamId')
    const foreign = await aSite(product)
    expectProblem(await post({ siteId: foreign.id }), 400, 'fields-refused', 'siteId')
    const retired = await aSite(product, { organisation: site.organisation })
    expectDone(await administrator.post(`/sites/${retired.id}/retire`))
    expectProblem(await post({ siteId: retired.id }), 400, 'fields-refused', 'siteId')
  })

  async function aFullDrum() {
    const container = await aContainer(site)
    const machine = await aMachine(site)
    expectDone(await world.technician.post('/drains', drainBody(site, { machine, container })))
    return container
  }

  test('with something in it is not retired', async () => {
    const { id } = await aFullDrum()
    expectProblem(await administrator.post(`/container-records/${id}/retire`), 409, 'still-in-use')
    expect((await administrator.get(`/container-records/${id}`)).body.retiredAt).toBeNull()
  })

  test('with something in it keeps its stream and its site, and may change its line', async () => {
    const { id, code } = await aFullDrum()
    const { version } = (await administrator.get(`/container-records/${id}`)).body
    const other = await aSite(product, { organisation: site.organisation })
    const put = ({ id: _id, ...body }: ReturnType<typeof containerBody>) =>
      administrator.put(`/container-records/${id}`, { ...body, code }, version)
    const asEster = await put(containerBody({ streamId: streamOf(site, 'ester') }))
    expectProblem(asEster, 409, 'still-in-use')
    expectProblem(await put(containerBody({ siteId: other.id })), 409, 'still-in-use')
    const lower = await put(containerBody({ fillPercent: '10' }))
    expect(lower.status).toBe(200)
  })

  test('that has held something is measured by the rules when it grows, shrinks and goes', async () => {
    const its = await aSite(product, { organisation: site.organisation })
    const officer = await signInAs(product, site.organisation, 'officer', [its.id])
    const rule = {
      id: randomUUID(),
      siteId: its.id,
      title: 'Own line of capacity',
      measure: 'container-capacity',
      scope: 'site',
      streams: { classes: [], streamIds: [] },
      threshold: { value: '300', unit: 'L' },
      comparison: 'gt',
      warnPercent: '100',
      minimumCapacity: null,
      consequence: '',
      citation: '',
    }
    expectDone(await officer.post('/rules', rule))
    const standing = async () => {
      const { rows } = (await officer.get(`/flags?siteId=${its.id}`)).body as {
        rows: { ruleId: string; endedAt: string | null; level: string }[]
      }
      return rows
        .filter(({ ruleId, endedAt }) => ruleId === rule.id && endedAt === null)
        .map(({ level }) => level)
    }
    const litres = (value: string) => ({ siteId: its.id, capacity: { value, unit: 'L' } })
    const { id, ...body } = containerBody(litres('200'))
    const address = `/container-records/${id}`
    let { version } = expectDone(await administrator.post('/container-records', { ...body, id }))
    const put = async (value: string) => {
      const change = { ...body, ...litres(value) }
      version = expectDone(await administrator.put(address, change, version)).version
    }
    const drain = drainBody(its, { machine: await aMachine(its), container: { id } })
    expectDone(await officer.post('/drains', drain))
    await put('299.99999')
    expect(await standing()).toEqual([])
    await put('300')
    expect(await standing()).toEqual(['warn'])
    await put('300.00001')
    expect(await standing()).toEqual(['limit'])
    await put('299.99999')
    expect(await standing()).toEqual([])
    await put('301')
    const reason = 'poured elsewhere'
    expectDone(await officer.post(`/drains/${drain.id}/strike`, { expectedRevision: 1, reason }))
    expect(await standing()).toEqual(['limit'])
    expectDone(await administrator.post(`${address}/retire`))
    expect(await standing()).toEqual([])
  })
})

describe('a site', () => {
  test('opens its book at line 0 and gets the rules of its profile', async () => {
    const made = await aSite(product, { organisation: site.organisation, profile: 'england' })
    const { book, pack } = await asService(product.opened.db, async (tx) => ({
      book: await tx.select().from(books).where(eq(books.siteId, made.id)),
      pack: await tx
        .select()
        .from(rules)
        .where(and(eq(rules.siteId, made.id), eq(rules.origin, 'pack'))),
    }))
    expect(book).toMatchObject([{ lastLineNo: 0, lastHash: '0'.repeat(64) }])
    expect(pack.length).toBeGreaterThan(0)
  })

  const siteBody = (more: object = {}) => ({
    code: nextCode('S'),
    name: 'Invented Yard',
    address: '',
    phone: '',
    identificationNumber: '',
    timeZone: 'America/Denver',
    profile: 'us-federal-baseline',
    volumeUnit: 'gal_us',
    massUnit: 'lb_avdp',
    ...more,
  })

  test('names a time zone of the world', async () => {
    for (const timeZone of ['Mars/Olympus', 'local', '+99:00']) {
      const reply = await administrator.post('/sites', {
        ...siteBody({ timeZone }),
        id: randomUUID(),
      })
      expectProblem(reply, 400, 'fields-refused', 'timeZone')
    }
  })

  test('keeps its time zone once its book has a line', async () => {
    const made = await aSite(product, { organisation: site.organisation })
    const put = async (timeZone: string) => {
      const { version } = (await administrator.get(`/sites/${made.id}`)).body
      return administrator.put(
        `/sites/${made.id}`,
        siteBody({ code: made.code, timeZone }),
        version,
      )
    }
    expect((await put('America/Denver')).status).toBe(200)
    const its = { machine: await aMachine(made), container: await aContainer(made) }
    expectDone(await administrator.post('/drains', drainBody(made, its)))
    expectProblem(await put('America/New_York'), 409, 'still-in-use')
    expect((await put('America/Denver')).status).toBe(200)
  })

  test('with a container in use is not retired', async () => {
    const made = await aSite(product, { organisation: site.organisation })
    const { id } = await aContainer(made)
    const refused = await administrator.post(`/sites/${made.id}/retire`)
    expectProblem(refused, 409, 'still-in-use')
    expectDone(await administrator.post(`/container-records/${id}/retire`))
    expect((await administrator.post(`/sites/${made.id}/retire`)).status).toBe(200)
  })
})

describe('what is named by something in use is not retired', () => {
  test('a stream by a container, or by a fluid', async () => {
    const organisation = await anOrganisation(product)
    const its = await aSite(product, { organisation })
    const retire = (code: string) =>
      organisation.administrator.post(`/streams/${organisation.streams[code]}/retire`)
    await aContainer(its, { stream: 'ester' })
    await aMachine(its, { stream: 'water' })
    expectProblem(await retire('ester'), 409, 'still-in-use')
    expectProblem(await retire('water'), 409, 'still-in-use')
    expect((await retire('filters')).status).toBe(200)
  })

  test('a fluid by a machine', async () => {
    const machine = await aMachine(site)
    const retire = () => administrator.post(`/fluids/${machine.fluidId}/retire`)
    expectProblem(await retire(), 409, 'still-in-use')
    expectDone(await administrator.post(`/machines/${machine.id}/retire`))
    expect((await retire()).status).toBe(200)
  })

  test('a stream with lines stays fluid', async () => {
    const path = `/streams/${streamOf(site, 'mineral')}`
    const container = await aContainer(site)
    const its = { machine: await aMachine(site), container }
    expectDone(await world.technician.post('/drains', drainBody(site, its)))
    const {
      version,
      id: _id,
      retiredAt: _retiredAt,
      ...body
    } = (await administrator.get(path)).body
    const reply = await administrator.put(path, { ...body, kind: 'solid' }, version)
    expectProblem(reply, 409, 'still-in-use')
  })
})

describe('permits', () => {
  const aPermit = (more: object = {}) => ({
    id: randomUUID(),
    number: nextCode('INV'),
    startsOn: '2025-01-01',
    endsOn: '2025-12-31',
    note: '',
    ...more,
  })

  test('of a hauler are added, answered again, listed newest first and taken out of use', async () => {
    const hauler = await aParty(site.organisation, 'hauler')
    const path = `/parties/${hauler.id}/permits`
    const [old, current] = [aPermit({ endsOn: '2025-02-01' }), aPermit()]
    for (const permit of [old, current]) {
      expect((await administrator.post(path, permit)).status).toBe(201)
    }
    expect((await administrator.post(path, current)).status).toBe(200)
    const other = await administrator.post(path, { ...current, number: 'INV-OTHER' })
    expectProblem(other, 409, 'id-reused')
    const { permits } = (await administrator.get(`/haulers/${hauler.id}`)).body
    expect(permits.map(({ id }: { id: string }) => id)).toEqual([current.id, old.id])
    for (const _ of [1, 2]) {
      const { body } = await administrator.post(`/permits/${old.id}/retire`)
      expect(body.permits[1].retiredAt).toBe('2025-03-10T18:00:00.000Z')
    }
    const trail = (await administrator.get(`/audit?subjectId=${hauler.id}`)).body
    const did = trail.rows.map(({ details }: { details: { what: string } }) => details.what)
    expect(did.sort()).toEqual(['create', 'permit', 'permit', 'retire-permit'])
  })

  test('do not end before they start', async () => {
    const { id } = await aParty(site.organisation, 'facility')
    const backwards = aPermit({ startsOn: '2025-03-02', endsOn: '2025-03-01' })
    const reply = await administrator.post(`/parties/${id}/permits`, backwards)
    const { fields } = expectProblem(reply, 400, 'fields-refused', 'endsOn')
    expect(fields?.[0]?.code).toBe('ends-before-start')
    const oneDay = aPermit({ startsOn: '2025-03-02', endsOn: '2025-03-02' })
    expect((await administrator.post(`/parties/${id}/permits`, oneDay)).status).toBe(201)
  })

  test('are of one party: a hauler is no facility', async () => {
    const { id } = await aParty(site.organisation, 'hauler')
    expectProblem(await administrator.get(`/facilities/${id}`), 404, 'not-found')
    expectProblem(await administrator.post(`/facilities/${id}/retire`), 404, 'not-found')
  })
})

describe('who sees what', () => {
  test('a technician sees the machines and containers of the own sites, an auditor all', async () => {
    const organisation = await anOrganisation(product)
    const [ours, theirs] = [
      await aSite(product, { organisation }),
      await aSite(product, { organisation }),
    ]
    const technician = await signInAs(product, organisation, 'technician', [ours.id])
    const auditor = await signInAs(product, organisation, 'auditor')
    const [mine, other] = [await aMachine(ours), await aMachine(theirs)]
    const [drum, otherDrum] = [await aContainer(ours), await aContainer(theirs)]
    const idsOf = async (who: Member, path: string, list = 'rows') => {
      const { body } = await who.get(path)
      return (body[list] as { id: string }[]).map(({ id }) => id).sort()
    }
    expect(await idsOf(technician, '/sites')).toEqual([ours.id])
    expect(await idsOf(technician, '/machines')).toEqual([mine.id])
    expect(await idsOf(technician, '/container-records')).toEqual([drum.id])
    expect(await idsOf(technician, '/catalogue', 'machines')).toEqual([mine.id])
    expect(await idsOf(technician, '/catalogue', 'sites')).toEqual([ours.id])
    expectProblem(await technician.get(`/machines/${other.id}`), 404, 'not-found')
    expect(await idsOf(auditor, '/sites')).toEqual([ours.id, theirs.id].sort())
    expect(await idsOf(auditor, '/machines')).toEqual([mine.id, other.id].sort())
    expect(await idsOf(auditor, '/container-records')).toEqual([drum.id, otherDrum.id].sort())
  })

  test('forms choose from what is in use; sites stay named', async () => {
    const organisation = await anOrganisation(product)
    const { administrator: ada } = organisation
    const [open, closed] = [
      await aSite(product, { organisation }),
      await aSite(product, { organisation }),
    ]
    const [kept, gone] = [await aMachine(open), await aMachine(open)]
    const hauler = await aParty(organisation, 'hauler')
    expectDone(await ada.post(`/sites/${closed.id}/retire`))
    expectDone(await ada.post(`/machines/${gone.id}/retire`))
    expectDone(await ada.post(`/haulers/${hauler.id}/retire`))
    const { body } = await ada.get('/catalogue')
    expect(body.machines.map(({ id }: { id: string }) => id)).toEqual([kept.id])
    expect(body.haulers).toEqual([])
    expect(body.sites).toHaveLength(2)
  })

  test('an officer reads the trail of the own sites, and of what belongs to none', async () => {
    const organisation = await anOrganisation(product)
    const [ours, theirs] = [
      await aSite(product, { organisation }),
      await aSite(product, { organisation }),
    ]
    const officer = await signInAs(product, organisation, 'officer', [ours.id])
    const [drum, otherDrum] = [await aContainer(ours), await aContainer(theirs)]
    const hauler = await aParty(organisation, 'hauler')
    const { rows } = (await officer.get('/audit?limit=200')).body as {
      rows: { subjectId: string }[]
    }
    const seen = rows.map(({ subjectId }) => subjectId)
    expect(seen).toContain(drum.id)
    expect(seen).toContain(hauler.id)
    expect(seen).not.toContain(otherDrum.id)
  })

  test('the trail comes in pages, newest first, each entry once', async () => {
    const organisation = await anOrganisation(product)
    const its = await aSite(product, { organisation })
    for (let minute = 1; minute <= 5; minute += 1) {
      // Two in the same instant: the page must not lose one of them.
      product.clock.now = new Date(Date.UTC(2025, 2, 10, 18, Math.ceil(minute / 2)))
      await aContainer(its)
    }
    const all = (await organisation.administrator.get('/audit?limit=200')).body.rows
    const paged: unknown[] = []
    let next: string | null = ''
    while (next !== null) {
      const at: string = next === '' ? '' : `&cursor=${next}`
      const { body } = await organisation.administrator.get(`/audit?limit=2${at}`)
      expect(body.rows.length).toBeLessThanOrEqual(2)
      paged.push(...body.rows)
      next = body.next as string | null
    }
    expect(paged).toEqual(all)
    const times = all.map(({ at }: { at: string }) => at)
    expect(times).toEqual([...times].sort().reverse())
    product.clock.now = new Date('2025-03-10T18:00:00Z')
  })
})
