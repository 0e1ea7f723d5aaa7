import { measuringMethods, type MeasuringMethod } from '@/shared/quantities/methods'
import { volumeUnits, type VolumeUnit } from '@/shared/quantities/units'
import type { Site } from '@/shared/contracts/set-up'

/** What this phone remembers of how a person logs drains: unit per site, method, keyboard. Never a volume. */
export function preferredUnit(site: Pick<Site, 'id' | 'volumeUnit' | 'profile'>): VolumeUnit {
  const last = localStorage.getItem(`ebbmark.unit.${site.id}`)
  const isOffered = unitsOffered(site).some((unit) => unit === last)
  return isOffered && isVolumeUnit(last) ? last : site.volumeUnit
}

export function rememberUnit(siteId: string, unit: VolumeUnit): void {
  localStorage.setItem(`ebbmark.unit.${siteId}`, unit)
}

/** The units behind the unit button; the imperial gallon is never offered on a US site. */
export function unitsOffered(site: Pick<Site, 'volumeUnit' | 'profile'>): VolumeUnit[] {
  const gallon: VolumeUnit = site.profile === 'england' ? 'gal_imp' : 'gal_us'
  return [...new Set<VolumeUnit>([site.volumeUnit, gallon, 'L'])]
}

export function preferredMethod(personId: string): MeasuringMethod {
  const last = localStorage.getItem(`ebbmark.method.${personId}`)
  return measuringMethods.find((method) => method === last) ?? 'pump-meter'
}

export function rememberMethod(personId: string, method: MeasuringMethod): void {
  localStorage.setItem(`ebbmark.method.${personId}`, method)
}

export function prefersPhoneKeys(): boolean {
  return localStorage.getItem('ebbmark.phone-keys') === 'yes'
}

export function rememberPhoneKeys(isOn: boolean): void {
  localStorage.setItem('ebbmark.phone-keys', isOn ? 'yes' : 'no')
}

function isVolumeUnit(text: string | null): text is VolumeUnit {
  return (volumeUnits as readonly (string | null)[]).includes(text)
}
