import { createHash, randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { movements } from '@/db/schema/book'
import { documents, pickupLines, pickups } from '@/db/schema/pickups'
import { asService } from '@/db/tenancy'
import { hashOfMovement } from '@/server/book/canonical-movement'
import { checkBook } from '@/server/book/check-book'
import { contentHash } from '@/server/content-hash'
import { bookFindings } from '../helpers/book'
import { aContainer, aMachine, aSite, drainBody, type TestSite } from '../helpers/factories'
import { testApp, type TestApp } from '../helpers/test-app'

/**
 * Someone with the database's own rights, past every trigger, changes one thing: checkBook finds it and names it.
 */
let product: TestApp
let site: TestSite
const drains = { kept: randomUUID(), struck: randomUUID(), other: randomUUID() }
const numbers: Record<string, string> = {}
const documentId = randomUUID()
const pickupId = randomUUID()

beforeAll(async () => {
  product = await testApp()
  site = await aSite(product, { code: 'S1' })
  const { administrator } = site.organisation
  const its = { machine: await aMachine(site), container: await aContainer(site) }
  const second = await aContainer(site)
  for (const [name, id] of Object.entries(drains)) {
    const occurredAt = `2025-03-0${Object.keys(numbers).length + 1}T12:00:00Z`
    const reply = await administrator.post('/drains', drainBody(site, its, { id, occurredAt }))
    numbers[name] = reply.body.number
  }
  // Lines 1, 2, 3 are the drains, 4 mirrors the second, 5 is a transfer.
  const strike = { expectedRevision: 1, reason: 'Typed twice' }
  await administrator.post(`/drains/${drains.struck}/strike`, strike)
  await administrator.post('/transfers', {
    id: randomUUID(),
    siteId: site.id,
    fromContainerId: its.container.id,
    toContainerId: second.id,
    volume: { value: '4', unit: 'gal_us' },
    method: 'pump-meter',
    occurredAt: '2025-03-04T12:00:00Z',
  })
  await aSignedOutPickup(its.container.id)
})
afterEach(async () => expect(await bookFindings(product)).toEqual([]))
afterAll(() => product.close())

/** A voided pickup with its number and its document, as rows: what checkBook reads of one. */
async function aSignedOutPickup(containerId: string) {
  const bytes = new TextEncoder().encode('%PDF invented')
  const facts = { number: 'S1-25-001-X', lines: [{ litres: '1' }] }
  const organisationId = site.organisation.id
  const at = new Date('2025-03-05T12:00:00Z')
  await asService(product.opened.db, async (tx) => {
    await tx.insert(pickups).values({
      id: pickupId,
      organisationId,
      siteId: site.id,
      number: 'S1-25-001-X',
      stage: 'voided',
      plannedOn: '2025-03-05',
      version: 1,
      createdAt: at,
      createdBy: site.organisation.administrator.id,
      issuedAt: at,
      contentHash: '',
    })
    await tx.insert(pickupLines).values({
      id: randomUUID(),
      organisationId,
      pickupId,
      position: 1,
      containerId,
      streamId: site.organisation.streams['mineral'] ?? '',
      shippedValue: '1',
      shippedUnit: 'L',
      shippedLitres: '1',
      shippedKilograms: '0',
    })
    await tx.insert(documents).values({
      id: documentId,
      organisationId,
      siteId: site.id,
      pickupId,
      kind: 'void-manifest',
      revision: 1,
      facts,
      pages: 1,
      bytes,
      sha256: createHash('sha256').update(bytes).digest('hex'),
      factsSha256: contentHash(facts),
      madeAt: at,
    })
    await tx.execute(sql`insert into number_series (organisation_id, scope_id, kind, year, last)
      values (${organisationId}, ${site.id}, 'pickup', 2025, 1)`)
  })
}

class Undo extends Error {}

/** What checkBook finds after a change that no trigger saw; the change is undone. */
async function findingsAfter(change: (tx: Transaction) => Promise<unknown>): Promise<string[]> {
  let found: string[] = []
  await product.opened.db
    .transaction(async (tx) => {
      await tx.execute(sql`set local session_replication_role = replica`)
      await change(tx)
      const { findings } = await checkBook(tx)
      found = findings.map(({ code }) => code)
      throw new Undo()
    })
    .catch((error: unknown) => {
      if (!(error instanceof Undo)) throw error
    })
  return [...new Set(found)].sort()
}

const run = (statement: ReturnType<typeof sql>) => (tx: Transaction) => tx.execute(statement)
const ofLine = (lineNo: number) => sql`site_id = ${site.id} and line_no = ${lineNo}`

test('a sound book is counted: its lines and its accounts', async () => {
  const check = await asService(product.opened.db, checkBook)
  expect(check).toEqual({ movements: 5, accounts: 3, findings: [] })
})

describe('a line', () => {
  test.each([
    ['note', sql`note = 'nothing to see'`],
    ['typed value', sql`entered_value = '11'`],
    ['method', sql`method = 'dip-stick'`],
    ['day', sql`occurred_on = '2025-02-28'`],
    ['instant', sql`occurred_at = occurred_at + interval '1 ms'`],
    ['moment of recording', sql`recorded_at = recorded_at - interval '1 day'`],
    ['author', sql`recorded_by = ${randomUUID()}`],
    ['estimate', sql`is_estimate = not is_estimate`],
    ['spread', sql`spread_percent = null`],
  ])('with another %s is found by its hash alone', async (_, change) => {
    const findings = await findingsAfter(
      run(sql`update movements set ${change} where ${ofLine(5)}`),
    )
    expect(findings).toEqual(['line-changed'])
  })

  test('with other litres is found by hash, balance and drain', async () => {
    const findings = await findingsAfter(
      run(sql`update movements set litres = litres + 0.000000000000000001 where ${ofLine(1)}`),
    )
    expect(findings).toEqual(['balance-differs', 'drain-does-not-sum', 'line-changed'])
  })

  test('hashed anew by whoever changed it breaks the chain after it', async () => {
    const findings = await findingsAfter(async (tx) => {
      const [line] = await tx.select().from(movements).where(ofLine(3)).limit(1)
      if (line === undefined) throw new Error('there is no line 3')
      const changed = { ...line, note: 'nothing to see' }
      await tx
        .update(movements)
        .set({ note: changed.note, hash: hashOfMovement(changed) })
        .where(eq(movements.id, line.id))
    })
    expect(findings).toEqual(['chain-broken'])
  })

  test('taken out of the middle is missing', async () => {
    const findings = await findingsAfter(run(sql`delete from movements where ${ofLine(3)}`))
    expect(findings).toEqual([
      'balance-differs',
      'chain-broken',
      'drain-does-not-sum',
      'line-missing',
    ])
  })

  test('taken off the end is missed by the head', async () => {
    const findings = await findingsAfter(run(sql`delete from movements where ${ofLine(5)}`))
    expect(findings).toEqual(['balance-differs', 'head-differs'])
  })

  test('two that change places are not the lines they were', async () => {
    const findings = await findingsAfter(async (tx) => {
      await tx.execute(sql`update movements set line_no = 99 where ${ofLine(1)}`)
      await tx.execute(sql`update movements set line_no = 1 where ${ofLine(2)}`)
      await tx.execute(sql`update movements set line_no = 2 where ${ofLine(99)}`)
    })
    expect(findings).toEqual(['chain-broken', 'line-changed'])
  })

  test('that a reversal no longer mirrors', async () => {
    const findings = await findingsAfter(
      run(sql`update movements set litres = litres - 1 where ${ofLine(4)}`),
    )
    expect(findings).toContain('reversal-does-not-mirror')
  })

  test('moved to another stream is not conserved', async () => {
    const water = site.organisation.streams['water']
    const findings = await findingsAfter(
      run(sql`update movements set stream_id = ${water} where ${ofLine(5)}`),
    )
    expect(findings).toEqual(['balance-differs', 'line-changed'])
  })
})

describe('the head of a book', () => {
  test.each([
    ['behind', sql`update books set last_line_no = last_line_no - 1`],
    ['on another hash', sql`update books set last_hash = repeat('a', 64)`],
  ])('that stands %s', async (_, change) => {
    expect(await findingsAfter(run(change))).toEqual(['head-differs'])
  })

  test('removed, with its lines left in no book', async () => {
    expect(await findingsAfter(run(sql`delete from books`))).toEqual(['book-missing'])
  })
})

describe('a balance', () => {
  test('that is not what the lines say', async () => {
    const findings = await findingsAfter(
      run(sql`update balances set litres = litres + 0.000000000000000001
        where (account_id, stream_id) in (select account_id, stream_id from balances limit 1)`),
    )
    expect(findings).toEqual(['balance-differs', 'stream-does-not-conserve'])
  })

  test('removed', async () => {
    const findings = await findingsAfter(
      run(sql`delete from balances where litres > 0
        and account_id in (select to_account_id from movements where ${ofLine(5)})`),
    )
    expect(findings).toEqual(['balance-differs', 'stream-does-not-conserve'])
  })

  test('made of nothing', async () => {
    const findings = await findingsAfter(
      run(sql`insert into balances select account_id, ${site.organisation.streams['ester']},
        organisation_id, site_id, 0, 0, 1, 1 from balances limit 1`),
    )
    expect(findings).toEqual(['balance-differs', 'stream-does-not-conserve'])
  })
})

describe('a drain', () => {
  const ofDrain = sql`id = ${drains.kept}`

  test.each([
    ['other litres', sql`litres = litres + 1`, ['drain-differs', 'drain-does-not-sum']],
    ['another figure', sql`entered_value = '11'`, ['drain-differs']],
    ['the same figure written otherwise', sql`entered_value = '10.0'`, ['drain-differs']],
    ['another unit', sql`entered_unit = 'gal_imp'`, ['drain-differs']],
    ['another revision', sql`revision = 2`, ['drain-differs']],
    ['another state', sql`state = 'struck'`, ['drain-does-not-sum']],
  ])('with %s', async (_, change, expected) => {
    expect(await findingsAfter(run(sql`update drains set ${change} where ${ofDrain}`))).toEqual(
      expected,
    )
  })

  test('whose words were changed', async () => {
    const findings = await findingsAfter(
      run(sql`update drain_revisions set facts = jsonb_set(facts, '{volume,value}', '"9"')
        where drain_id = ${drains.kept}`),
    )
    expect(findings).toEqual(['drain-differs'])
  })

  test('taken out leaves a hole in the numbers', async () => {
    const findings = await findingsAfter(async (tx) => {
      await tx.execute(sql`delete from drain_revisions where drain_id = ${drains.struck}`)
      await tx.execute(sql`delete from marks where drain_id = ${drains.struck}`)
      await tx.execute(sql`delete from drains where id = ${drains.struck}`)
    })
    expect(findings).toEqual(['number-missing'])
  })
})

describe('a pickup', () => {
  test('whose number is gone', async () => {
    const findings = await findingsAfter(
      run(sql`update pickups set number = null, issued_at = null where id = ${pickupId}`),
    )
    expect(findings).toEqual(['number-missing'])
  })

  test('that says it shipped what no line moved', async () => {
    const findings = await findingsAfter(
      run(sql`update pickups set stage = 'settled' where id = ${pickupId}`),
    )
    expect(findings).toEqual(['signed-out-does-not-sum'])
  })

  test('of a site whose code looks like a year is counted in its own year', async () => {
    const findings = await findingsAfter(async (tx) => {
      await tx.execute(sql`update pickups set number = 'A-24-1-25-001-X' where id = ${pickupId}`)
      await tx.execute(sql`insert into number_series (organisation_id, scope_id, kind, year, last)
        values (${site.organisation.id}, ${site.id}, 'pickup', 2024, 0)`)
    })
    expect(findings).toEqual([])
  })
})

describe('a document', () => {
  test.each([
    ['bytes', sql`bytes = bytes || '\\x20'::bytea`, ['document-changed']],
    ['hash', sql`sha256 = repeat('0', 64)`, ['document-changed']],
    ['facts', sql`facts = jsonb_set(facts, '{lines,0,litres}', '"2"')`, ['document-facts-changed']],
  ])('with other %s', async (_, change, expected) => {
    expect(
      await findingsAfter(run(sql`update documents set ${change} where id = ${documentId}`)),
    ).toEqual(expected)
  })
})

test('a finding names the site and the line', async () => {
  let details: string[] = []
  await findingsAfter(async (tx) => {
    await tx.execute(sql`update movements set note = 'x' where ${ofLine(2)}`)
    details = (await checkBook(tx)).findings.map(({ code, detail }) => `${code}: ${detail}`)
  })
  expect(details).toEqual(['line-changed: S1 line 2'])
})
