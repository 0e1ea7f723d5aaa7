import type { Transaction } from '@/db/client'
import { listDrainsWithNewestFacts } from '@/db/queries/drains'
import { drainFacts } from '@/shared/contracts/drains'
import { toLitres } from '@/shared/quantities/convert'
import { compare } from '@/shared/quantities/decimals'
import { volume } from '@/shared/contracts/values'

const batch = 1000

/**
 * What was typed stands behind the litres of every drain: the newest revision says the same volume as the record, and
 * it converts to exactly the litres that the lines sum to.
 */
export async function checkDrains(tx: Transaction): Promise<{ code: string; detail: string }[]> {
  const findings: { code: string; detail: string }[] = []
  let after: string | undefined
  for (;;) {
    const rows = await listDrainsWithNewestFacts(tx, after, batch)
    for (const { drain, revision, facts } of rows) {
      const read = drainFacts.strip().safeParse(facts)
      const typed = volume.safeParse({ value: drain.enteredValue, unit: drain.enteredUnit })
      const isRight =
        read.success &&
        typed.success &&
        revision === drain.revision &&
        read.data.volume.value === typed.data.value &&
        read.data.volume.unit === typed.data.unit &&
        compare(toLitres(typed.data.value, typed.data.unit), drain.litres) === 0
      if (!isRight) findings.push({ code: 'drain-differs', detail: drain.number })
    }
    const last = rows.at(-1)
    if (last === undefined || rows.length < batch) return findings
    after = last.drain.id
  }
}
