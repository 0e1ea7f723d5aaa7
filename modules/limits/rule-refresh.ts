/** What shows rules or what they measure. */
export const whatRulesChange = ['listRules', 'listFlags', 'readFlag', 'readYard'] as const
