import { z } from 'zod'
import { instantFromLocal } from '@/shared/calendar'
import { containerTypes, profileIds } from '@/shared/contracts/set-up'
import { measuringMethods } from '@/shared/quantities/methods'
import { roles } from '@/shared/policies'
import companyData from './quillbrook.json'
import yearData from './quillbrook-2025.json'
import { demoId } from './demo-id'

const unit = z.enum(['gal_us', 'L'])
const day = z.iso.date()
const party = z.strictObject({
  name: z.string(),
  identificationNumber: z.string(),
  address: z.string(),
  email: z.string(),
  phone: z.string(),
  contactName: z.string(),
})
const company = z
  .strictObject({
    name: z.string(),
    email: z.string(),
    phone: z.string(),
    people: z.array(
      z.strictObject({
        name: z.string(),
        email: z.string(),
        phone: z.string(),
        role: z.enum(roles),
        sites: z.array(z.string()),
        does: z.string(),
      }),
    ),
    sites: z.array(
      z.strictObject({
        code: z.string(),
        name: z.string(),
        address: z.string(),
        phone: z.string(),
        identificationNumber: z.string(),
        timeZone: z.string(),
        profile: z.enum(profileIds),
        volumeUnit: unit,
        massUnit: z.enum(['lb_avdp', 'kg']),
        /** How a year's drains fall on its months, as shares. */
        drainsByMonth: z.array(z.number()).length(12),
      }),
    ),
    machines: z.array(
      z.strictObject({
        code: z.string(),
        site: z.string(),
        make: z.string(),
        model: z.string(),
        kind: z.string(),
        stream: z.string(),
        fluid: z.string(),
        reservoirLitres: z.string(),
        systemLitres: z.string(),
      }),
    ),
    containers: z.array(
      z.strictObject({
        code: z.string(),
        site: z.string(),
        type: z.enum(containerTypes),
        description: z.string(),
        stream: z.string(),
        capacity: z.string(),
        unit,
        fillPercent: z.string(),
        place: z.string(),
      }),
    ),
    haulers: z.array(
      party.extend({ permits: z.array(z.strictObject({ startsOn: day, endsOn: day })) }),
    ),
    facilities: z.array(party),
  })
  .parse(companyData)

/** The invented company whose year the demo shows. */
export const quillbrook = company

/** Its fixed year: what was typed is the truth; of a split drain the last leg takes the exact remainder. */
export const year2025 = z
  .strictObject({
    drains: z.array(
      z.strictObject({
        id: z.string(),
        on: day,
        machine: z.string(),
        by: z.string(),
        value: z.string(),
        unit,
        method: z.enum(measuringMethods),
        legs: z.array(z.strictObject({ container: z.string(), ml: z.number().int() })).min(1),
        filters: z.number().int(),
        absorbentKg: z.string(),
      }),
    ),
    pickups: z.array(
      z.strictObject({
        id: z.string(),
        site: z.string(),
        on: day,
        hauler: z.string(),
        facility: z.string(),
        lines: z.array(
          z.strictObject({
            container: z.string(),
            shippedMl: z.number().int(),
            receivedMl: z.number().int().nullable(),
          }),
        ),
      }),
    ),
  })
  .parse(yearData)

export type DemoDrain = (typeof year2025.drains)[number]

export const organisationId = demoId('organisation')

function named<T>(what: string, rows: readonly T[], name: string, of: (row: T) => string): T {
  const found = rows.find((row) => of(row) === name)
  if (found === undefined) throw new Error(`the demo company has no ${what} ${name}`)
  return found
}

export const siteCalled = (code: string) => named('site', company.sites, code, (row) => row.code)
export const machineCalled = (code: string) =>
  named('machine', company.machines, code, (row) => row.code)
export const containerCalled = (code: string) =>
  named('container', company.containers, code, (row) => row.code)
export const haulerCalled = (name: string) =>
  named('hauler', company.haulers, name, (row) => row.name)
export const personCalled = (name: string) =>
  named('person', company.people, name, (row) => row.name)

/** Officer, hauler and facility that a site's pickups go through. */
export function pickupPartiesOf(site: string) {
  return site === 'S3'
    ? {
        officer: 'Jonah Brask',
        hauler: 'Oxlip Waste Carriers',
        facility: 'Dunmarrow Recovery Works',
      }
    : {
        officer: 'Odile Fenwright',
        hauler: 'Sallowmere Tankers',
        facility: 'Cinderholt Re-refinery',
      }
}

/** The instant of a wall-clock time at a site of the company. */
export function atSite(site: string, on: string, time: string): Date {
  return new Date(instantFromLocal(`${on}T${time}`, siteCalled(site).timeZone).instant)
}
