import type { MassUnit, VolumeUnit } from '../quantities/units'

/** What a jurisdiction profile supplies to its sites. Words of the profile are in the catalogue: `profiles.<id>`. */
export type Profile = {
  id: 'us-federal-baseline' | 'england'
  volumeUnit: VolumeUnit
  massUnit: MassUnit
  locale: string
  paper: 'letter' | 'a4'
  /** Days after signing out when the facility's return is due: a company rule, no law read says it for used oil. */
  returnDueDays: number
  /** A received quantity that differs by more than this, in per cent, needs a cause. */
  differsPercent: string
  /** Volume units offered: an imperial gallon is never offered where the US gallon is the gallon. */
  volumeUnits: readonly VolumeUnit[]
}

const profiles: readonly Profile[] = [
  {
    id: 'us-federal-baseline',
    volumeUnit: 'gal_us',
    massUnit: 'lb_avdp',
    locale: 'en-US',
    paper: 'letter',
    returnDueDays: 30,
    differsPercent: '10',
    volumeUnits: ['gal_us', 'L', 'quart_us', 'pint_us', 'fl_oz_us', 'bbl_petroleum', 'mL'],
  },
  {
    id: 'england',
    volumeUnit: 'L',
    massUnit: 'kg',
    locale: 'en-GB',
    paper: 'a4',
    returnDueDays: 30,
    differsPercent: '10',
    volumeUnits: ['L', 'gal_imp', 'pint_imp', 'mL', 'm3'],
  },
]

export type ProfileId = Profile['id']

/** @throws RangeError when no profile has the id (a stored site always has one) */
export function profileOf(id: string): Profile {
  const found = profiles.find((profile) => profile.id === id)
  if (found === undefined) throw new RangeError(`There is no profile "${id}"`)
  return found
}
