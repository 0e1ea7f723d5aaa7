import { and, eq, isNull } from 'drizzle-orm'
import { marks } from '@/db/schema/drains'
import { flags } from '@/db/schema/limits'
import { reviewMark } from '../drains/review-mark'
import { reviewFlag } from '../limits/review-flag'
import { atSite, pickupPartiesOf } from './company'
import { demoId } from './demo-id'
import type { DemoStep } from './replay'

/** The officer of a site goes through its open flags. */
export function reviewFlagsStep(site: string, on: string, note: string): DemoStep {
  return {
    name: `flags of ${site} on ${on}`,
    at: atSite(site, on, '16:30'),
    by: pickupPartiesOf(site).officer,
    act: async (tx, context) => {
      const open = await tx
        .select({ id: flags.id })
        .from(flags)
        .where(and(eq(flags.siteId, demoId(site)), eq(flags.state, 'open')))
      for (const { id } of open) await reviewFlag(tx, context, id, note)
    },
  }
}

/** The officer of a site goes through what needs a look. */
export function reviewMarksStep(site: string, on: string, note: string): DemoStep {
  return {
    name: `marks of ${site} on ${on}`,
    at: atSite(site, on, '16:40'),
    by: pickupPartiesOf(site).officer,
    act: async (tx, context) => {
      const open = await tx
        .select({ id: marks.id })
        .from(marks)
        .where(and(eq(marks.siteId, demoId(site)), isNull(marks.reviewedAt)))
      for (const { id } of open) await reviewMark(tx, context, id, note)
    },
  }
}
