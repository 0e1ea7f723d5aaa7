import { phoneStore } from './queue-store'

/** What was typed and not saved, kept on the phone for seven days, per person and form. */
const keptForMs = 7 * 24 * 3_600_000

export async function keepDraft(key: string, value: unknown): Promise<void> {
  await (await phoneStore()).put('drafts', { key, keptAt: Date.now(), value })
}

export async function readDraft(key: string): Promise<unknown> {
  const kept = await (await phoneStore()).get('drafts', key)
  if (kept === undefined) return undefined
  if (Date.now() - kept.keptAt > keptForMs) {
    await forgetDraft(key)
    return undefined
  }
  return kept.value
}

export async function forgetDraft(key: string): Promise<void> {
  await (await phoneStore()).delete('drafts', key)
}
