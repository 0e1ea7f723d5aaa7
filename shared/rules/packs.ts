import { z } from 'zod'
import { ruleDefinition, type RuleDefinition } from './definition'
import england from './packs/england.json'
import usFederal from './packs/us-federal.json'
import type { ProfileId } from './profiles'

const pack = z.array(ruleDefinition.strict())

/** The limit rules that come with a profile. Only what was read in a source is on by default. */
export function rulePack(profile: ProfileId): RuleDefinition[] {
  return pack.parse(profile === 'england' ? england : usFederal)
}
