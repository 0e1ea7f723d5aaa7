import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { asService } from '@/db/tenancy'
import { outbox } from '@/db/schema/trail'
import type { Pickup } from '@/shared/contracts/pickups'
import { isPickupNumber } from '@/shared/document-numbers'
import { aContainer, signInAs } from '../helpers/factories'
import {
  aFilledDrum,
  aHauler,
  aPickupYard,
  bytesOf,
  expectDone,
  issued,
  planned,
  type PickupYard,
} from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let yard: PickupYard

beforeAll(async () => {
  product = await testApp()
  yard = await aPickupYard(product)
})
afterAll(() => product.close())

const tenGallons = { value: '10', unit: 'gal_us' }
const aPlan = async (more: object = {}, at = yard) =>
  planned(at, [await aFilledDrum(at, tenGallons)], more)
const issue = (pickup: Pickup, at = yard) =>
  at.officer.post(`/pickups/${pickup.id}/issue`, { version: pickup.version })

test('an issue gives the number, the PDF and the mail to both parties', async () => {
  const plan = await aPlan()
  // The trail is told in the order of its instants.
  product.clock.now = new Date(product.clock.now.getTime() + 60_000)
  const pickup: Pickup = expectDone(await issue(plan))
  expect(pickup).toMatchObject({ stage: 'ready', version: 2, issuedBy: { id: yard.officer.id } })
  expect(pickup.number).toMatch(new RegExp(`^P-${yard.site.code}-25-001-[0-9A-Z]$`))
  expect(isPickupNumber(pickup.number ?? '')).toBe(true)
  expect(pickup.documents).toMatchObject([{ kind: 'manifest', revision: 1, pages: 1 }])
  const bytes = await bytesOf(yard, pickup.documents[0]?.id ?? '')
  expect(bytes.subarray(0, 5).toString()).toBe('%PDF-')
  expect(bytes.length).toBe(pickup.documents[0]?.byteCount)
  const mail = await asService(product.opened.db, (tx) =>
    tx.select().from(outbox).where(eq(outbox.organisationId, yard.site.organisation.id)),
  )
  expect(mail.map(({ toName }) => toName).sort()).toEqual(
    [yard.facility.name, yard.hauler.name].sort(),
  )
  for (const message of mail) {
    expect(message).toMatchObject({
      state: 'waiting',
      documentId: pickup.documents[0]?.id,
      attachmentName: `${pickup.number}.pdf`,
    })
    expect(message.subject).toContain(pickup.number)
  }
  const byNumber = await yard.officer.get(`/pickups/${pickup.number}`)
  expect(byNumber.body.id).toBe(pickup.id)
  expect(pickup.history.map(({ act }) => act)).toEqual(['plan-pickup', 'issue-pickup'])
})

test('a hauler whose permit has ended on the day is refused with what there is to know', async () => {
  const { organisation } = yard.site
  const late = await aHauler(organisation, {
    number: 'INV-0007',
    startsOn: '2024-07-01',
    endsOn: '2025-06-30',
  })
  const after = await issue(await aPlan({ haulerId: late.id, plannedOn: '2025-07-01' }))
  expect([after.status, after.body.code]).toEqual([409, 'permit-expired'])
  expect(after.body.facts).toMatchObject({
    party: late.name,
    number: 'INV-0007',
    endedOn: '2025-06-30',
    plannedOn: '2025-07-01',
    others: yard.hauler.name,
  })
  expect(after.body.detail).toContain('2025-06-30')
  const onTheLastDay = await issue(await aPlan({ haulerId: late.id, plannedOn: '2025-06-30' }))
  expect(onTheLastDay.status).toBe(200)
})

test('a renewed permit counts from the day it begins', async () => {
  const renewed = await aHauler(yard.site.organisation, {
    number: 'INV-0009',
    startsOn: '2025-07-08',
    endsOn: '2026-07-07',
  })
  const tooEarly = await issue(await aPlan({ haulerId: renewed.id, plannedOn: '2025-07-07' }))
  expect(tooEarly.body).toMatchObject({
    code: 'pickup-incomplete',
    facts: { missing: 'permit-missing' },
  })
  const inTime = await issue(await aPlan({ haulerId: renewed.id, plannedOn: '2025-07-08' }))
  expect(inTime.status).toBe(200)
})

test('an incomplete plan is refused, names what is missing and takes no number', async () => {
  const own = await aPickupYard(product)
  const bare = await planned(own, [await aContainer(own.site)], { facilityId: null })
  const reply = await issue(bare, own)
  expect([reply.status, reply.body.code]).toEqual([409, 'pickup-incomplete'])
  expect(reply.body.facts.missing).toBe('no-facility, nothing-in-container')
  const whole: Pickup = expectDone(await issue(await aPlan({}, own), own))
  expect(whole.number).toContain('-25-001-')
})

test('an issued pickup is neither issued again nor changed', async () => {
  const pickup = await issued(yard, [await aFilledDrum(yard, tenGallons)])
  const again = await issue(pickup)
  expect([again.status, again.body.code]).toEqual([409, 'wrong-stage'])
  const change = await yard.officer.put(
    `/pickups/${pickup.id}`,
    {
      plannedOn: '2025-03-12',
      version: pickup.version,
      lines: [{ id: randomUUID(), containerId: pickup.lines[0]?.containerId }],
    },
    '',
  )
  expect([change.status, change.body.code]).toEqual([409, 'wrong-stage'])
})

test('a version that is not the newest is refused', async () => {
  const pickup = await aPlan()
  const reply = await yard.officer.post(`/pickups/${pickup.id}/issue`, { version: 7 })
  expect([reply.status, reply.body.code]).toEqual([409, 'changed-under-you'])
})

test('two officers who issue one pickup: one does, and there is one number and one paper', async () => {
  const second = await signInAs(product, yard.site.organisation, 'officer', [yard.site.id])
  const pickup = await aPlan()
  const replies = await Promise.all(
    [yard.officer, second].map((officer) =>
      officer.post(`/pickups/${pickup.id}/issue`, { version: pickup.version }),
    ),
  )
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
  const after = (await yard.officer.get(`/pickups/${pickup.id}`)).body
  expect(after.documents).toHaveLength(1)
})

test('one container goes on one open manifest, also when two are issued at once', async () => {
  const drum = await aFilledDrum(yard, tenGallons)
  const plans = [await planned(yard, [drum]), await planned(yard, [drum])]
  const replies = await Promise.all(plans.map((plan) => issue(plan)))
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409])
  const refused = replies.find(({ status }) => status === 409)
  const winner = replies.find(({ status }) => status === 200)
  expect(refused?.body.facts.missing).toBe('container-elsewhere')
  const loser = plans.find(({ id }) => id !== winner?.body.id)
  const { missing } = (await yard.officer.get(`/pickups/${loser?.id}`)).body
  expect(missing).toEqual([
    { code: 'container-elsewhere', facts: { container: drum.code, pickup: winner?.body.number } },
  ])
})

test('ten issued at once, two of them refused, leave numbers without a gap', async () => {
  const own = await aPickupYard(product)
  const plans: Pickup[] = []
  for (let index = 0; index < 10; index += 1) {
    plans.push(
      index % 5 === 0 ? await planned(own, [await aContainer(own.site)]) : await aPlan({}, own),
    )
  }
  const replies = await Promise.all(plans.map((plan) => issue(plan, own)))
  const numbers = replies.flatMap(({ body }) => body.number ?? []).sort()
  expect(numbers.map((number: string) => number.split('-').at(-2))).toEqual([
    '001',
    '002',
    '003',
    '004',
    '005',
    '006',
    '007',
    '008',
  ])
})

test('numbers begin again with the year of the pickup', async () => {
  const own = await aPickupYard(product)
  const nextYear = {
    ...own,
    hauler: await aHauler(own.site.organisation, {
      number: 'INV-2',
      startsOn: '2025-01-01',
      endsOn: '2026-12-31',
    }),
  }
  const numbers = []
  for (const plannedOn of ['2025-12-31', '2026-01-01', '2025-12-30']) {
    const pickup = await issued(nextYear, [await aFilledDrum(nextYear, tenGallons)], { plannedOn })
    numbers.push(pickup.number?.split('-').slice(-3, -1).join('-'))
  }
  expect(numbers).toEqual(['25-001', '26-001', '25-002'])
})
