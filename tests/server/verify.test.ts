import { createHash } from 'node:crypto'
import { eq } from 'drizzle-orm'
import request from 'supertest'
import { documents } from '@/db/schema/pickups'
import { asService } from '@/db/tenancy'
import { contentHash } from '@/server/content-hash'
import { drawManifest } from '@/server/pickups/pdf/draw-manifest'
import { manifestFacts } from '@/server/pickups/pdf/manifest-facts'
import type { Pickup } from '@/shared/contracts/pickups'
import { bookFindings } from '../helpers/book'
import { aSite, signInAs } from '../helpers/factories'
import { readPdf, wordsOf } from '../helpers/pdf/read-pdf'
import {
  aFilledDrum,
  aPickupYard,
  bytesOf,
  expectDone,
  issued,
  signBody,
  signed,
  type PickupYard,
} from '../helpers/pickups'
import { testApp, type TestApp } from '../helpers/test-app'

let product: TestApp
let yard: PickupYard
let pickup: Pickup

beforeAll(async () => {
  product = await testApp()
  yard = await aPickupYard(product)
})
beforeEach(async () => {
  product.clock.now = new Date('2025-03-10T18:00:00Z')
  pickup = await issued(yard, [await aFilledDrum(yard, { value: '10', unit: 'gal_us' })])
})
afterAll(() => product.close())

const newest = () => pickup.documents[0]?.id ?? ''
const stored = async (pickupId: string) =>
  asService(product.opened.db, (tx) =>
    tx.select().from(documents).where(eq(documents.pickupId, pickupId)).orderBy(documents.revision),
  )
const verify = (hash: string) => request(product.app).get(`/api/verify/${hash}`)
const ticketOf = async (id: string): Promise<string> =>
  expectDone(await yard.officer.post(`/documents/${id}/ticket`)).url

test('the file, the code in its picture and the code it prints all lead to it, without an account', async () => {
  const bytes = await bytesOf(yard, newest())
  const { pages } = await readPdf(bytes)
  const asked = [
    createHash('sha256').update(bytes).digest('hex'),
    pages[0]?.qr?.split('/').at(-1) ?? '',
    /verify\/([0-9a-f]{16})/.exec(wordsOf(pages[0]))?.[1] ?? '',
  ]
  for (const hash of asked) {
    const { status, body } = await verify(hash)
    expect(status).toBe(200)
    expect(body).toEqual({
      matches: true,
      number: pickup.number,
      kind: 'manifest',
      revision: 1,
      madeAt: '2025-03-10T18:00:00.000Z',
      isNewest: true,
      stage: 'ready',
      organisation: expect.stringContaining('Invented Works') as string,
    })
  }
})

test('an older paper still matches and says that it is not the newest', async () => {
  const old = pickup.documents[0]?.sha256 ?? ''
  pickup = await signed(yard, await signed(yard, pickup, 'generator'), 'driver')
  expect((await verify(old)).body).toMatchObject({
    matches: true,
    kind: 'manifest',
    isNewest: false,
    stage: 'signed-out',
  })
  const { version } = pickup
  pickup = expectDone(
    await yard.officer.post(`/pickups/${pickup.id}/void`, { version, reason: 'came back' }),
  )
  expect((await verify(pickup.documents[0]?.sha256 ?? '')).body).toMatchObject({
    kind: 'void-manifest',
    isNewest: true,
    stage: 'voided',
  })
})

test('a hash nobody knows matches nothing, and what is no hash is not found', async () => {
  const unknown = await verify('0'.repeat(64))
  expect([unknown.status, unknown.body.matches, unknown.body.number]).toEqual([200, false, null])
  expect((await verify('0'.repeat(16))).body.matches).toBe(false)
  for (const wrong of ['0'.repeat(15), '0'.repeat(63), 'G'.repeat(16), '%25', `${'0'.repeat(15)}_`])
    expect((await verify(wrong)).status).toBe(404)
})

test('made again from its stored facts, a paper is the same to the last byte', async () => {
  const strokes = [
    [
      [10, 10],
      [400, 300.5],
    ],
    [[700, 20]],
  ]
  const atTheGate = expectDone(
    await yard.officer.post(
      `/pickups/${pickup.id}/signatures`,
      signBody(pickup, 'generator', { strokes }),
    ),
  )
  await signed(yard, atTheGate, 'driver')
  const papers = await stored(pickup.id)
  expect(papers).toHaveLength(2)
  for (const paper of papers) {
    const facts = manifestFacts.parse(paper.facts)
    expect(contentHash(facts)).toBe(paper.factsSha256)
    const { bytes, pages } = await drawManifest(facts, paper.factsSha256)
    expect(Buffer.from(bytes).equals(paper.bytes)).toBe(true)
    expect(pages).toBe(paper.pages)
    expect(createHash('sha256').update(bytes).digest('hex')).toBe(paper.sha256)
  }
  expect(await bookFindings(product)).toEqual([])
})

test('a document is opened by a link that lasts two minutes, and shown, not downloaded', async () => {
  const url = await ticketOf(newest())
  product.clock.now = new Date('2025-03-10T18:01:59Z')
  const reply = await request(product.app).get(url)
  expect(reply.status).toBe(200)
  expect(reply.headers).toMatchObject({
    'content-type': 'application/pdf',
    'content-disposition': `inline; filename="${pickup.number}.pdf"`,
    'cache-control': 'no-store',
    'x-content-type-options': 'nosniff',
    'content-security-policy': expect.stringContaining("default-src 'none'") as string,
  })
  product.clock.now = new Date('2025-03-10T18:02:01Z')
  const late = await request(product.app).get(url)
  expect([late.status, late.body.code]).toEqual([403, 'ticket-expired'])
})

test('a ticket opens its own document only, and is no key to anything else', async () => {
  const other = await issued(yard, [await aFilledDrum(yard, { value: '10', unit: 'gal_us' })])
  const ticket = (await ticketOf(newest())).split('ticket=')[1] ?? ''
  const at = (id: string, word: string) =>
    request(product.app).get(`/api/documents/${id}/file?ticket=${word}`)
  expect((await at(other.documents[0]?.id ?? '', ticket)).status).toBe(403)
  expect((await at(newest(), `${ticket.slice(0, -2)}xx`)).status).toBe(403)
  expect((await at(newest(), 'nonsense')).status).toBe(403)
  const asBearer = await request(product.app)
    .get('/api/pickups')
    .set('Authorization', `Bearer ${ticket}`)
  expect(asBearer.status).toBe(401)
})

test('a link is given to those who see the site only', async () => {
  const path = `/documents/${newest()}/ticket`
  const { organisation } = yard.site
  const elsewhere = await aSite(product, { organisation })
  const other = await signInAs(product, organisation, 'officer', [elsewhere.id])
  const technician = await signInAs(product, organisation, 'technician', [yard.site.id])
  const stranger = (await aPickupYard(product)).officer
  expect((await request(product.app).post(`/api${path}`)).status).toBe(401)
  expect((await other.post(path)).status).toBe(404)
  expect((await stranger.post(path)).status).toBe(404)
  expect((await technician.post(path)).status).toBe(200)
})
