import { randomUUID } from 'node:crypto'
import { bookFindings } from '../helpers/book'
import {
  aContainer,
  aMachine,
  aSite,
  drainBody,
  signInAs,
  streamOf,
  type Member,
  type TestSite,
} from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let site: TestSite
let technician: Member
let officer: Member

beforeAll(async () => {
  product = await testApp({ now: '2025-03-10T18:00:00Z' })
  site = await aSite(product)
  technician = await signInAs(product, site.organisation, 'technician', [site.id])
  officer = await signInAs(product, site.organisation, 'officer', [site.id])
})
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

type Mark = { id: string; code: string; details: Record<string, string>; reviewedAt: string | null }
type Facts = Record<string, unknown>

/** What was asked before a drain, and what it was marked with when it was saved all the same. */
async function pour(
  facts: Facts = {},
  its: Parameters<typeof drainBody>[1] | undefined = undefined,
) {
  const of = its ?? { machine: await aMachine(site), container: await aContainer(site) }
  const body = drainBody(site, of, facts)
  const asked = await technician.post('/drains/questions', body)
  const saved = await technician.post('/drains', body)
  expect([asked.status, saved.status]).toEqual([200, 201])
  const questions: { code: string; facts: Record<string, string> }[] = asked.body.questions
  const marks: Mark[] = saved.body.marks
  // Asked is what is marked, figure by figure.
  expect(marks.map(({ code, details }) => ({ code, facts: details })).sort(byCode)).toEqual(
    [...questions].sort(byCode),
  )
  expect(saved.body.needsLook).toBe(questions.length > 0)
  return { ...of, body, questions, marks }
}

const byCode = (a: { code: string }, b: { code: string }) => (a.code < b.code ? -1 : 1)
const gallons = (value: string) => ({ volume: { value, unit: 'gal_us' } })
const codesOf = (asked: { code: string }[]) => asked.map(({ code }) => code)

test('an ordinary drain raises nothing', async () => {
  expect((await pour(gallons('38'))).questions).toEqual([])
})

test('over the fill line: by how much, and what room there was', async () => {
  const its = {
    machine: await aMachine(site, { reservoir: null, system: null }),
    container: await aContainer(site),
  }
  await pour({ ...gallons('40'), occurredAt: '2025-03-09T12:00:00Z' }, its)
  // 55 gal at 90 % are 49.5; 9.5 gal fit to the last digit, the next do not.
  expect(
    (await pour({ ...gallons('9.5'), occurredAt: '2025-03-09T15:00:00Z' }, its)).marks,
  ).toEqual([])
  const { marks } = await pour(gallons('0.5'), its)
  expect(marks).toMatchObject([
    {
      code: 'over-fill-line',
      containerId: its.container.id,
      details: { container: its.container.code, overLitres: '1.892705892', roomLitres: '0' },
    },
  ])
})

test('two legs into one container count together', async () => {
  const container = await aContainer(site)
  const machine = await aMachine(site, { reservoir: null, system: null })
  const legs = [
    { containerId: container.id, volume: { value: '30', unit: 'gal_us' } },
    { containerId: container.id },
  ]
  const { questions } = await pour({ ...gallons('60'), legs }, { machine, container })
  expect(codesOf(questions)).toEqual(['over-fill-line'])
  expect(questions[0]?.facts.overLitres).toBe('39.746823732')
})

test('into a container of another stream', async () => {
  const container = await aContainer(site, { stream: 'ester' })
  const { marks } = await pour({}, { machine: await aMachine(site), container })
  expect(marks).toMatchObject([
    {
      code: 'wrong-stream',
      details: {
        container: container.code,
        containerStream: 'Used ester fluid',
        drainStream: 'Used mineral hydraulic fluid',
      },
    },
  ])
})

test('into a held and into a retired container', async () => {
  const [held, retired] = [await aContainer(site), await aContainer(site)]
  await technician.post(`/containers/${held.id}/hold`, {
    id: randomUUID(),
    reason: 'Smells of solvent',
  })
  await site.organisation.administrator.post(`/container-records/${retired.id}/retire`)
  const legs = [
    { containerId: held.id, volume: { value: '4', unit: 'gal_us' } },
    { containerId: retired.id },
  ]
  const { marks } = await pour({ legs }, { machine: await aMachine(site), container: held })
  expect(marks.sort(byCode)).toMatchObject([
    { code: 'container-held', details: { reason: 'Smells of solvent' } },
    { code: 'container-retired', details: { container: retired.code } },
  ])
})

test('more than the machine holds', async () => {
  const tote = await aContainer(site, { type: 'tote', capacity: { value: '275', unit: 'gal_us' } })
  const machine = await aMachine(site, {
    reservoir: { value: '20', unit: 'gal_us' },
    system: { value: '48', unit: 'gal_us' },
  })
  const its = { machine, container: tote }
  const early = { occurredAt: '2025-03-08T12:00:00Z' }
  expect((await pour({ ...gallons('50.4'), ...early }, its)).questions).toEqual([])
  const { questions } = await pour(gallons('185'), its)
  expect(codesOf(questions)).toEqual(['more-than-machine-holds'])
  expect(questions[0]?.facts).toMatchObject({ machine: machine.code, holdsLitres: '181.699765632' })
})

test('litres typed as gallons, and gallons typed as litres', async () => {
  const tote = await aContainer(site, { type: 'tote', capacity: { value: '275', unit: 'gal_us' } })
  const machine = await aMachine(site, { reservoir: { value: '20', unit: 'gal_us' }, system: null })
  const asGallons = await pour(
    { ...gallons('72'), occurredAt: '2025-03-08T12:00:00Z' },
    { machine, container: tote },
  )
  expect(codesOf(asGallons.questions)).toContain('looks-like-litres')
  const meant = asGallons.questions.find(({ code }) => code === 'looks-like-litres')?.facts
  expect(meant?.meantLitres).toBe('72')
  const asLitres = await pour({ volume: { value: '19', unit: 'L' } }, { machine, container: tote })
  expect(codesOf(asLitres.questions)).toEqual(['looks-like-gallons'])
  expect(asLitres.questions[0]?.facts.meantLitres).toBe('71.922823896')
})

test('looks like one that a colleague saved, and not when it was struck out', async () => {
  const its = { machine: await aMachine(site), container: await aContainer(site) }
  const colleague = await signInAs(product, site.organisation, 'technician', [site.id])
  const theirs = drainBody(site, its, gallons('10'))
  const saved = await colleague.post('/drains', theirs)
  const { questions } = await pour({ ...gallons('10.1'), occurredAt: '2025-03-10T16:59:00Z' }, its)
  expect(questions).toMatchObject([
    {
      code: 'looks-like-saved',
      facts: { number: saved.body.number, by: saved.body.recordedBy.name, otherId: theirs.id },
    },
  ])
  const far = { occurredAt: '2025-03-10T12:50:00Z' }
  expect((await pour({ ...gallons('10'), ...far }, its)).questions).toEqual([])
  await colleague.post(`/drains/${theirs.id}/strike`, { expectedRevision: 1, reason: 'Twice' })
  const same = await pour({ ...gallons('9.99'), occurredAt: '2025-03-10T14:59:00Z' }, its)
  expect(same.questions.map(({ facts }) => facts.otherId)).not.toContain(theirs.id)
})

test('asking saves nothing, and asking about a drain that is saved finds it as before', async () => {
  const its = { machine: await aMachine(site), container: await aContainer(site) }
  const body = drainBody(site, its, gallons('30'))
  const before = await technician.post('/drains/questions', body)
  expect((await technician.get(`/drains/${body.id}`)).status).toBe(404)
  await technician.post('/drains', body)
  // Counted twice it would be over the line.
  const after = await technician.post('/drains/questions', body)
  expect([before.body, after.body]).toEqual([{ questions: [] }, { questions: [] }])
})

test('the answer given stands with the mark', async () => {
  const its = {
    machine: await aMachine(site),
    container: await aContainer(site, { stream: 'water' }),
  }
  const answers = [{ code: 'wrong-stream', answer: 'Already poured it here' }]
  const saved = await technician.post('/drains', drainBody(site, its, { answers }))
  expect(saved.body.marks[0].details.answer).toBe('Already poured it here')
})

describe('after an amendment', () => {
  const overfilled = async (answers: object[] = []) => {
    const its = {
      machine: await aMachine(site, { reservoir: null, system: null }),
      container: await aContainer(site),
    }
    const body = drainBody(site, its, { ...gallons('52'), answers })
    const { marks } = (await technician.post('/drains', body)).body
    return { body, mark: marks[0] as Mark }
  }
  const amend = async ({ id, siteId: _, ...facts }: ReturnType<typeof drainBody>, more: Facts) =>
    (
      await technician.post(`/drains/${id}/amend`, {
        ...facts,
        answers: [],
        expectedRevision: 1,
        reason: { code: 'mistyped', text: '' },
        ...more,
      })
    ).body.marks as Mark[]

  test('a mark that no longer holds is closed, with a note', async () => {
    const { body, mark } = await overfilled()
    expect(await amend(body, gallons('25'))).toMatchObject([
      { id: mark.id, reviewNote: 'Amended to revision 2' },
    ])
  })

  test('a mark that still holds stays the one it was, with what was said', async () => {
    const { body, mark } = await overfilled([{ code: 'over-fill-line', answer: 'Already poured' }])
    expect(await amend(body, { note: 'Gauge was read twice' })).toEqual([mark])
  })

  test('a mark that was looked at is not raised again for the same facts', async () => {
    const { body, mark } = await overfilled()
    await officer.post(`/marks/${mark.id}/review`, { note: 'Pumped out by hand' })
    const marks = await amend(body, { note: 'more' })
    expect(marks).toMatchObject([{ id: mark.id, reviewNote: 'Pumped out by hand' }])
  })

  test('other figures are another mark, and the first answer goes with it', async () => {
    const { body, mark } = await overfilled([{ code: 'over-fill-line', answer: 'Already poured' }])
    const marks = await amend(body, gallons('53'))
    expect(marks).toHaveLength(2)
    const [open] = marks.filter(({ reviewedAt }) => reviewedAt === null)
    expect(open?.id).not.toBe(mark.id)
    expect(open?.details).toMatchObject({ overLitres: '13.248941244', answer: 'Already poured' })
  })

  test('striking out closes what is open', async () => {
    const { body } = await overfilled()
    const reply = await technician.post(`/drains/${body.id}/strike`, {
      expectedRevision: 1,
      reason: 'Did not happen',
    })
    expect(reply.body.needsLook).toBe(false)
    expect(reply.body.marks).toMatchObject([{ reviewNote: 'Struck out' }])
  })
})

describe('looking at marks', () => {
  async function aMark(of: TestSite = site) {
    const its = {
      machine: await aMachine(of),
      container: await aContainer(of, { stream: 'ester' }),
    }
    const { administrator } = of.organisation
    const reply = await administrator.post('/drains', drainBody(of, its))
    return { mark: reply.body.marks[0] as Mark, drainId: reply.body.id as string }
  }

  test('an officer closes one with a note, once', async () => {
    const { mark, drainId } = await aMark()
    const reply = await officer.post(`/marks/${mark.id}/review`, {
      note: 'Drum emptied and washed',
    })
    expect(reply.body).toMatchObject({
      id: mark.id,
      drainId,
      reviewNote: 'Drum emptied and washed',
      reviewedAt: '2025-03-10T18:00:00.000Z',
    })
    expect((await officer.get(`/drains/${drainId}`)).body.needsLook).toBe(false)
    const again = await officer.post(`/marks/${mark.id}/review`, { note: 'Again' })
    expect([again.status, again.body.code]).toEqual([409, 'already-reviewed'])
  })

  test('a technician sees marks and does not close them', async () => {
    const { mark } = await aMark()
    const reply = await technician.post(`/marks/${mark.id}/review`, { note: 'Fine' })
    expect([reply.status, reply.body.code]).toEqual([403, 'not-allowed'])
  })

  test('an officer of another site, or another organisation, does not find it', async () => {
    const { mark } = await aMark()
    const elsewhere = await aSite(product, { organisation: site.organisation })
    const colleague = await signInAs(product, site.organisation, 'officer', [elsewhere.id])
    const stranger = (await aSite(product)).organisation.administrator
    for (const by of [colleague, stranger]) {
      const reply = await by.post(`/marks/${mark.id}/review`, { note: 'Fine' })
      expect([reply.status, reply.body.code]).toEqual([404, 'not-found'])
    }
  })

  test('the note is asked for', async () => {
    const { mark } = await aMark()
    const reply = await officer.post(`/marks/${mark.id}/review`, { note: ' ' })
    expect(reply.body).toMatchObject({ code: 'fields-refused', fields: [{ path: 'note' }] })
  })

  test('pages hold every mark of the sites one may see, once, newest first', async () => {
    const own = await aSite(product)
    const raised: string[] = []
    for (let count = 0; count < 5; count += 1) {
      // Pairs at one instant: the page cut between them must lose neither.
      product.clock.now = new Date(Date.UTC(2025, 2, 10, 18, Math.floor(count / 2)))
      raised.push((await aMark(own)).mark.id)
    }
    const reader = await signInAs(product, own.organisation, 'technician', [own.id])
    const found: string[] = []
    let next: string | null = ''
    while (next !== null) {
      const cursor: string = next === '' ? '' : `&cursor=${next}`
      const { body } = await reader.get(`/marks?limit=2${cursor}`)
      found.push(...body.rows.map(({ id }: { id: string }) => id))
      next = body.next
    }
    expect([...found].sort()).toEqual([...raised].sort())
    expect(found.at(-1)).toBe(raised.filter((id) => raised.slice(0, 2).includes(id)).sort()[0])
    const colleague = await signInAs(product, own.organisation, 'technician', [])
    expect((await colleague.get('/marks')).body.rows).toEqual([])
    product.clock.now = new Date('2025-03-10T18:00:00Z')
  })

  test.each(['nonsense', Buffer.from('{"at":"x","id":"y"}').toString('base64url')])(
    'a cursor that is none is refused: %s',
    async (cursor) => {
      const reply = await technician.get(`/marks?cursor=${cursor}`)
      expect(reply.body).toMatchObject({
        code: 'fields-refused',
        fields: [{ path: 'query.cursor' }],
      })
    },
  )
})

test('a stream of the drain is not confused with the fluid of the machine', async () => {
  const its = {
    machine: await aMachine(site),
    container: await aContainer(site, { stream: 'water' }),
  }
  const { questions } = await pour({ streamId: streamOf(site, 'water') }, its)
  expect(questions).toEqual([])
})
