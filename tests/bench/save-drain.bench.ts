import { randomUUID } from 'node:crypto'
import { presentDrain } from '@/server/drains/present-drain'
import { recordDrain } from '@/server/drains/record-drain'
import { recordDrainBody } from '@/shared/contracts/drains'
import { aContainer, aMachine, aSite, drainBody, signInAs } from '../helpers/factories'
import { medianOf, report } from './report'
import { replay, timed } from './statements'
import { benchedApp } from './workshop'

/**
 * Saving a drain over HTTP, against the very statements of such a save run by themselves in one transaction on the
 * same database. The floor rolls back, so that the same lines can be written again.
 */
async function main(): Promise<void> {
  const { test, client, statements, url, close } = await benchedApp()
  const site = await aSite(test)
  const technician = await signInAs(test, site.organisation, 'technician', [site.id])
  const machine = await aMachine(site)
  const container = await aContainer(site, {
    type: 'tank',
    capacity: { value: '90000', unit: 'gal_us' },
  })
  let minutes = 0
  const save = async () => {
    // Apart by hours, so that none looks like one already saved.
    minutes += 180
    test.clock.now = new Date(Date.UTC(2025, 0, 1) + minutes * 60_000)
    const body = {
      ...drainBody(site, { machine, container }),
      id: randomUUID(),
      occurredAt: test.clock.now.toISOString(),
    }
    const response = await fetch(`${url}/drains`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json', Authorization: technician.bearer() },
      body: JSON.stringify(body),
    })
    if (response.status !== 201) throw new Error(await response.text())
    await response.arrayBuffer()
  }
  for (let round = 0; round < 100; round += 1) await save()

  // One save without its commit: what it asked fits the book as it stands now.
  statements.take()
  const unsaved = new Error('not to be kept')
  await technician
    .acts(async (tx, context) => {
      const given = recordDrainBody.parse({
        ...drainBody(site, { machine, container }),
        occurredAt: test.clock.now.toISOString(),
      })
      await recordDrain(tx, context, given)
      await presentDrain(tx, given.id)
      throw unsaved
    })
    .catch((error: unknown) => {
      if (error !== unsaved) throw error
    })
  const asked = statements.take()
  const floor = medianOf(await timed(100, () => replay(client, asked)))
  const median = medianOf(await timed(100, save))
  report({
    name: `saving a drain (${asked.length} statements)`,
    unit: 'ms',
    median,
    floor,
    aim: 'ratio at most 2',
  })
  await close()
}

void main()
