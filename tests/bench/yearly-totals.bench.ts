import { readTotals } from '@/shared/contracts/books'
import { aContainer, aMachine, aSite, drainBody, signInAs } from '../helpers/factories'
import { medianOf, report } from './report'
import { replay, timed } from './statements'
import { benchedApp } from './workshop'

const lines = 100_000

/** A year's totals over HTTP on a book of 100,000 lines, against the same statements run by themselves. */
async function main(): Promise<void> {
  const { test, client, statements, url, close } = await benchedApp()
  const site = await aSite(test)
  const officer = await signInAs(test, site.organisation, 'officer', [site.id])
  const machine = await aMachine(site)
  const container = await aContainer(site, { type: 'tank' })
  test.clock.now = new Date('2025-12-31T18:00:00Z')
  await officer.post('/drains', drainBody(site, { machine, container })).expect(201)
  // Copies of that one line over the year, past the triggers: their chain is not what is measured here.
  await client.exec(`
    set session_replication_role = replica;
    insert into movements
    select (jsonb_populate_record(m, jsonb_build_object(
      'id', gen_random_uuid(), 'line_no', n, 'occurred_on', date '2025-01-01' + (n % 365),
      'litres', 1 + (n % 977) * 0.37))).*
    from movements m, generate_series(2, ${lines}) n where m.line_no = 1;
    set session_replication_role = origin;
    analyze movements;`)
  const ask = async () => {
    const response = await fetch(`${url}${readTotals.path}?year=2025&siteId=${site.id}`, {
      headers: { Authorization: officer.bearer() },
    })
    const { groups } = readTotals.reply.parse(await response.json())
    if (groups[0]?.total.in.lineCount !== lines) throw new Error('not every line was summed')
  }
  statements.take()
  await ask()
  const asked = statements.take()
  const floor = medianOf(await timed(10, () => replay(client, asked)))
  const median = medianOf(await timed(10, ask))
  report({ name: 'yearly totals of 100,000 lines', unit: 'ms', median, floor, aim: 'ratio near 1' })
  await close()
}

void main()
