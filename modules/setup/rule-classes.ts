/** Classes by which limit rules count a stream; an officer decides which fit. */
export const ruleClasses = [
  'any_oil',
  'used_oil',
  'used_oil_synthetic',
  'used_oil_biodegradable',
  'used_oil_filters',
  'oily_absorbents',
  'hazardous_waste_nonacute',
  'hazardous_waste_acute',
] as const
