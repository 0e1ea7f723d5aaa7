import { asc, eq } from 'drizzle-orm'
import { organisations } from '@/db/schema/organisations'
import { outbox } from '@/db/schema/trail'
import { asService } from '@/db/tenancy'
import { sendOutbox, type SendMail } from '@/server/mail/send-outbox'
import { smtpSender } from '@/server/mail/smtp'
import type { Pickup } from '@/shared/contracts/pickups'
import { signInAs } from '../helpers/factories'
import { aFilledDrum, aPickupYard, issued, type PickupYard } from '../helpers/pickups'
import { listenForMail } from '../helpers/mail-server'
import { testApp, type TestApp } from '../helpers/test-app'

type Sent = Parameters<SendMail>[0]

let product: TestApp
let yard: PickupYard
let pickup: Pickup

beforeAll(async () => {
  product = await testApp()
})
beforeEach(async () => {
  product.clock.now = new Date('2025-03-10T18:00:00Z')
  yard = await aPickupYard(product)
  pickup = await issued(yard, [await aFilledDrum(yard, { value: '10', unit: 'gal_us' })])
})
// What one test leaves waiting is not the next one's.
afterEach(() => sendOutbox(tools(), null))
afterAll(() => product.close())

const tools = () => ({
  db: product.opened.db,
  clock: product.services.clock,
  log: product.services.log,
})
const messages = () =>
  asService(product.opened.db, (tx) =>
    tx
      .select()
      .from(outbox)
      .where(eq(outbox.organisationId, yard.site.organisation.id))
      .orderBy(asc(outbox.toName)),
  )
const later = (minutes: number) =>
  (product.clock.now = new Date(product.clock.now.getTime() + minutes * 60_000))

test('both parties get the manifest, once', async () => {
  const sent: Sent[] = []
  const send: SendMail = async (message) => void sent.push(message)
  expect(await sendOutbox(tools(), send)).toBe(2)
  expect(await sendOutbox(tools(), send)).toBe(0)
  expect(sent.map(({ to }) => to.name).sort()).toEqual(
    [yard.facility.name, yard.hauler.name].sort(),
  )
  for (const { subject, text, attachment } of sent) {
    expect(subject).toContain(pickup.number)
    expect(text).toContain('not a government form')
    expect(text).toMatch(/https:\/\/ebbmark\.example\.org\/verify\/[0-9a-f]{64}\n/)
    expect(attachment?.filename).toBe(`${pickup.number}.pdf`)
    expect(attachment?.content).toHaveLength(pickup.documents[0]?.byteCount ?? 0)
  }
  expect((await messages()).map(({ state, attempts }) => [state, attempts])).toEqual([
    ['sent', 1],
    ['sent', 1],
  ])
})

test('nobody waits for the mail server: the product is used while a message is on its way', async () => {
  const stages: string[] = []
  await sendOutbox(tools(), async () => {
    stages.push((await yard.officer.get(`/pickups/${pickup.id}`)).body.stage)
  })
  expect(stages).toEqual(['ready', 'ready'])
})

test('two processes that look at once send each message once', async () => {
  const sent: string[] = []
  const send: SendMail = async ({ to }) => void sent.push(to.name)
  await Promise.all([sendOutbox(tools(), send), sendOutbox(tools(), send)])
  expect(sent.sort()).toEqual([yard.facility.name, yard.hauler.name].sort())
})

test('a refused message is tried later and later, and given up after eight times', async () => {
  let tries = 0
  const refuse: SendMail = async () => {
    tries += 1
    throw new Error('550 no such mailbox')
  }
  await sendOutbox(tools(), refuse)
  await sendOutbox(tools(), refuse)
  expect(tries).toBe(2)
  expect((await messages())[0]).toMatchObject({
    state: 'waiting',
    attempts: 1,
    lastError: '550 no such mailbox',
    nextAttemptAt: new Date('2025-03-10T18:04:00Z'),
  })
  later(3)
  await sendOutbox(tools(), refuse)
  expect(tries).toBe(2)
  later(1)
  await sendOutbox(tools(), refuse)
  expect(tries).toBe(4)
  for (let round = 0; round < 10; round += 1) {
    later(24 * 60)
    await sendOutbox(tools(), refuse)
  }
  expect(tries).toBe(16)
  expect((await messages()).map(({ state, attempts }) => [state, attempts])).toEqual([
    ['failed', 8],
    ['failed', 8],
  ])
})

test('a message whose sender died is due again after a while', async () => {
  const died: SendMail = () => new Promise(() => undefined)
  void sendOutbox(tools(), died)
  const sent: string[] = []
  const send: SendMail = async ({ to }) => void sent.push(to.name)
  while ((await messages()).every(({ attempts }) => attempts === 0)) continue
  await sendOutbox(tools(), send)
  expect(sent).toHaveLength(1)
  later(15)
  await sendOutbox(tools(), send)
  expect(sent.sort()).toEqual([yard.facility.name, yard.hauler.name].sort())
})

test('a stop is heeded between messages', async () => {
  let tries = 0
  const send: SendMail = async () => void (tries += 1)
  await sendOutbox(tools(), send, () => tries > 0)
  expect(tries).toBe(1)
})

test('a real mail server gets the message as it is, with the PDF attached', async () => {
  const server = await listenForMail()
  await sendOutbox(tools(), smtpSender(server.url, 'Ebbmark <register@works.example.org>'))
  await server.close()
  expect(server.received).toHaveLength(2)
  const hauler = server.received.find(({ to }) => to.includes('@hauler.'))
  expect(hauler?.text).toContain('From: Ebbmark <register@works.example.org>')
  expect(hauler?.text).toContain(`Subject: Manifest ${pickup.number}`)
  expect(hauler?.text).toMatch(/Content-Type: application\/pdf/)
  const encoded = hauler?.text.split('base64\r\n').at(-1)?.split('\r\n--')[0] ?? ''
  const attached = Buffer.from(encoded.slice(encoded.indexOf('\r\n\r\n')), 'base64')
  expect(attached).toHaveLength(pickup.documents[0]?.byteCount ?? 0)
})

test('a mail server that is not there leaves the message waiting, with the reason', async () => {
  const server = await listenForMail()
  await server.close()
  await sendOutbox(tools(), smtpSender(server.url, 'register@works.example.org'))
  const [message] = await messages()
  expect(message).toMatchObject({ state: 'waiting', attempts: 1 })
  expect(message?.lastError).toMatch(/ECONNREFUSED/)
})

test('without a mail server the demo shows its mail, and nobody else has a mailbox', async () => {
  const { organisation } = yard.site
  await sendOutbox(tools(), null)
  expect((await yard.officer.get('/mailbox')).status).toBe(404)
  await asService(product.opened.db, (tx) =>
    tx.update(organisations).set({ isDemo: true }).where(eq(organisations.id, organisation.id)),
  )
  const first = (await yard.officer.get('/mailbox?limit=1')).body
  expect(first.rows).toMatchObject([
    { state: 'kept', documentId: pickup.documents[0]?.id, attachmentName: `${pickup.number}.pdf` },
  ])
  const rest = (await yard.officer.get(`/mailbox?cursor=${first.next}`)).body
  expect([rest.rows.length, rest.next]).toEqual([1, null])
  const technician = await signInAs(product, organisation, 'technician', [yard.site.id])
  expect((await technician.get('/mailbox')).status).toBe(403)
  const stranger = await aPickupYard(product)
  expect((await stranger.officer.get('/mailbox')).status).toBe(404)
})
