import { instantFromLocal } from '@/shared/calendar'
import { aContainer, aMachine, drainBody, signInAs, type Member } from './factories'
import {
  aPickupYard,
  expectDone,
  received,
  signedOut,
  type PickupYard,
  type Place,
} from './pickups'
import type { TestApp } from './test-app'

const zone = 'America/Chicago'

export type SmallYear = { yard: PickupYard; auditor: Member; tote: Place; drum: Place }

/**
 * A site near Chicago from New Year's Eve 2024 to 10 March 2025, the product's present: drains on both sides of two
 * midnights, one amended, one struck out, a transfer, a pickup that came back short and was settled.
 */
export async function aSmallYear(product: TestApp): Promise<SmallYear> {
  const yard = await aPickupYard(product, { timeZone: zone })
  const { site, officer } = yard
  const at = (local: string) => instantFromLocal(local, zone).instant
  const pour = async (gallons: string, local: string, into: Place, more: object = {}) => {
    const machine = await aMachine(yard.site, { reservoir: null, system: null })
    const body = drainBody(
      yard.site,
      { machine, container: into },
      { volume: { value: gallons, unit: 'gal_us' }, occurredAt: at(local), ...more },
    )
    return { body, drain: expectDone(await yard.officer.post('/drains', body)) as { id: string } }
  }
  const auditor = await signInAs(product, site.organisation, 'auditor')
  const tote = await aContainer(site, { type: 'tote', capacity: { value: '275', unit: 'gal_us' } })
  const drum = await aContainer(site)
  const ester = await aContainer(site, { stream: 'ester' })
  const bins = {
    filters: await aContainer(site, { stream: 'filters', type: 'bin' }),
    absorbents: await aContainer(site, { stream: 'absorbents', type: 'bin' }),
  }
  // Half an hour before and after the site's New Year; both are 1 January in UTC.
  await pour('10', '2024-12-31T23:30', tote)
  await pour('20', '2025-01-01T00:30', tote, { method: 'estimate' })
  await pour('30.05', '2025-01-31T23:59', tote)
  // Typed 5, amended to 6: three lines, 6 gal.
  const slip = await pour('5', '2025-02-03T09:00', tote, {
    filters: [{ count: 2, size: 'small', state: 'drained', containerId: bins.filters.id }],
    absorbents: { mass: { value: '1.2', unit: 'kg' }, containerId: bins.absorbents.id },
  })
  const { id: _id, siteId: _siteId, ...facts } = slip.body
  expectDone(
    await officer.post(`/drains/${slip.drain.id}/amend`, {
      ...facts,
      volume: { value: '6', unit: 'gal_us' },
      expectedRevision: 1,
      reason: { code: 'mistyped' },
    }),
  )
  const double = await pour('7', '2025-02-04T09:00', tote)
  expectDone(
    await officer.post(`/drains/${double.drain.id}/strike`, {
      expectedRevision: 1,
      reason: 'Twice',
    }),
  )
  expectDone(
    await officer.post('/transfers', {
      id: drum.id,
      siteId: site.id,
      fromContainerId: tote.id,
      toContainerId: drum.id,
      volume: { value: '4', unit: 'gal_us' },
      method: 'pump-meter',
      occurredAt: at('2025-02-05T09:00'),
    }),
  )
  await pour('8', '2025-02-06T09:00', ester, { streamId: site.organisation.streams['ester'] })
  // 62.05 gal in the tote; all of it leaves, 60 gal arrive, the rest is explained.
  const out = await signedOut(yard, [tote])
  const back = await received(yard, out, { value: '60', unit: 'gal_us' })
  expectDone(
    await officer.post(`/pickups/${back.id}/settle`, {
      version: back.version,
      cause: 'gauge-difference',
      note: 'Foam',
    }),
  )
  return { yard, auditor, tote, drum }
}
