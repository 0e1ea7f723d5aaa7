import { addDays } from '@/shared/calendar'

/** Long enough to ask for a new permit before the next pickup. */
const noticeDays = 30

/** How a permit's last day stands: behind, near or far; a permit holds through its last day. */
export function expiryOf(
  endsOn: string,
  today: string,
): { kind: 'stop' | 'check' | 'note'; words: string } {
  if (endsOn < today) return { kind: 'stop', words: 'setup.permits.ended' }
  if (endsOn <= addDays(today, noticeDays)) return { kind: 'check', words: 'setup.permits.soon' }
  return { kind: 'note', words: 'setup.permits.until' }
}
