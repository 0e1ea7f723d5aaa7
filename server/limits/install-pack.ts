import { eq } from 'drizzle-orm'
import type { Transaction } from '@/db/client'
import { rules } from '@/db/schema/limits'
import { rulePack } from '@/shared/rules/packs'
import { profileOf } from '@/shared/rules/profiles'
import type { ActContext } from '../act-context'
import { evaluateSiteLimits } from './evaluate-site-limits'

/**
 * Gives a site the rules of its profile. Rules it has already stay as an officer set them; those of another profile
 * are switched off, so that their flags keep what they rest on.
 */
export async function installPack(
  tx: Transaction,
  context: Pick<ActContext, 'person' | 'newId' | 'clock'>,
  siteId: string,
  profile: string,
): Promise<void> {
  const pack = rulePack(profileOf(profile).id)
  const installed = await tx.select().from(rules).where(eq(rules.siteId, siteId))
  for (const rule of installed) {
    const belongs = rule.packRuleId === null || pack.some(({ id }) => id === rule.packRuleId)
    if (!belongs && rule.enabled) {
      await tx
        .update(rules)
        .set({
          enabled: false,
          changedAt: context.clock(),
          changedBy: context.person.id,
          changeReason: 'Profile changed',
        })
        .where(eq(rules.id, rule.id))
    }
  }
  const missing = pack.filter(({ id }) => !installed.some(({ packRuleId }) => packRuleId === id))
  if (missing.length > 0) {
    await tx.insert(rules).values(
      missing.map((definition) => ({
        id: context.newId(),
        organisationId: context.person.organisationId,
        siteId,
        origin: 'pack' as const,
        packRuleId: definition.id,
        definition,
        enabled: definition.enabledByDefault,
        version: 1,
        changedAt: context.clock(),
        changedBy: context.person.id,
      })),
    )
  }
  await evaluateSiteLimits(tx, context, siteId)
}
