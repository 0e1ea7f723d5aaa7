/**
 * Streams a new organisation starts with. Classes say which limit rules count a stream; an officer changes them.
 * List of Waste codes are those of Commission Decision 2000/532/EC, chapter 13 01 and 15 02, shown as a starting point.
 */
export const defaultStreams = [
  {
    code: 'mineral',
    name: 'Used mineral hydraulic fluid',
    kind: 'fluid',
    labelWords: 'USED OIL',
    wasteCode: '13 01 10',
    ruleClasses: ['any_oil', 'used_oil'],
    // Mid of 870 to 900 kg/m3 for mineral hydraulic oil; a default, to be replaced by the data sheet's.
    density: { kilogramsPerLitre: '0.875', basis: 'default' },
  },
  {
    code: 'ester',
    name: 'Used ester fluid',
    kind: 'fluid',
    labelWords: 'USED OIL, ESTER',
    wasteCode: '13 01 12',
    ruleClasses: ['any_oil', 'used_oil', 'used_oil_biodegradable'],
    density: { kilogramsPerLitre: '0.92', basis: 'data-sheet' },
  },
  {
    code: 'water',
    name: 'Used water-based fluid',
    kind: 'fluid',
    labelWords: 'USED WATER-GLYCOL FLUID',
    wasteCode: '',
    ruleClasses: [],
    // Water-glycol runs from 1.04 to 1.09 kg/L: no figure may be assumed silently.
    density: null,
  },
  {
    code: 'filters',
    name: 'Spent filters',
    kind: 'solid',
    labelWords: 'USED OIL FILTERS',
    wasteCode: '15 02 02',
    ruleClasses: ['used_oil_filters'],
    density: null,
  },
  {
    code: 'absorbents',
    name: 'Oily absorbents',
    kind: 'solid',
    labelWords: 'OILY ABSORBENTS',
    wasteCode: '15 02 02',
    ruleClasses: ['oily_absorbents'],
    density: null,
  },
] as const

/** Streams that spent parts of a drain go to, by code. */
export const filterStreamCode = 'filters'
export const absorbentStreamCode = 'absorbents'
