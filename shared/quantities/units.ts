/** Units of volume and mass; identifiers are those of the NIST factor table the tests hold them against. */

export const volumeUnits = [
  'L',
  'gal_us',
  'gal_imp',
  'mL',
  'm3',
  'fl_oz_us',
  'gill_us',
  'pint_us',
  'quart_us',
  'bbl_petroleum',
  'in3',
  'ft3',
  'yd3',
  'fl_oz_imp',
  'gill_imp',
  'pint_imp',
  'quart_imp',
] as const

export const massUnits = [
  'kg',
  'lb_avdp',
  'g',
  'tonne',
  'oz_avdp',
  'cwt_short',
  'cwt_long',
  'ton_short',
  'ton_long',
] as const

export type VolumeUnit = (typeof volumeUnits)[number]
export type MassUnit = (typeof massUnits)[number]
export type Unit = VolumeUnit | MassUnit
export type Measure = 'volume' | 'mass'

/**
 * Exact size of one unit in litres or kilograms. Every one is a finite decimal: in = 2.54 cm, US gallon = 231 in3,
 * imperial gallon = 4.54609 L, pound = 0.45359237 kg (NIST SP 811, 2008, Appendix B.8 and its footnotes).
 */
export const exactSize: Record<Unit, string> = {
  mL: '0.001',
  L: '1',
  m3: '1000',
  fl_oz_us: '0.0295735295625',
  gill_us: '0.11829411825',
  pint_us: '0.473176473',
  quart_us: '0.946352946',
  gal_us: '3.785411784',
  bbl_petroleum: '158.987294928',
  in3: '0.016387064',
  ft3: '28.316846592',
  yd3: '764.554857984',
  fl_oz_imp: '0.0284130625',
  gill_imp: '0.1420653125',
  pint_imp: '0.56826125',
  quart_imp: '1.1365225',
  gal_imp: '4.54609',
  g: '0.001',
  kg: '1',
  tonne: '1000',
  oz_avdp: '0.028349523125',
  lb_avdp: '0.45359237',
  cwt_short: '45.359237',
  cwt_long: '50.80234544',
  ton_short: '907.18474',
  ton_long: '1016.0469088',
}

const symbols: Record<Unit, string> = {
  mL: 'mL',
  L: 'L',
  m3: 'm³',
  fl_oz_us: 'fl oz',
  gill_us: 'gi',
  pint_us: 'pt',
  quart_us: 'qt',
  gal_us: 'gal',
  bbl_petroleum: 'bbl',
  in3: 'in³',
  ft3: 'ft³',
  yd3: 'yd³',
  fl_oz_imp: 'imp fl oz',
  gill_imp: 'imp gi',
  pint_imp: 'imp pt',
  quart_imp: 'imp qt',
  gal_imp: 'imp gal',
  g: 'g',
  kg: 'kg',
  tonne: 't',
  oz_avdp: 'oz',
  lb_avdp: 'lb',
  cwt_short: 'short cwt',
  cwt_long: 'long cwt',
  ton_short: 'short ton',
  ton_long: 'long ton',
}

export function isUnit(text: string): text is Unit {
  return Object.hasOwn(exactSize, text)
}

export function measureOf(unit: Unit): Measure {
  return (volumeUnits as readonly string[]).includes(unit) ? 'volume' : 'mass'
}

/** Symbol to show after a figure; words for screen readers are in the catalogue under `units.<id>`. */
export function unitSymbol(unit: Unit): string {
  return symbols[unit]
}

/** Key of the unit's words in the catalogue, with plural forms: `t(unitWordsKey('gal_us'), { count })`. */
export function unitWordsKey(unit: Unit): string {
  return `units.${unit}`
}
