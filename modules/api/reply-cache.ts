import type { Cache, State } from 'swr'
import { keepReplies } from './kept-replies'

/** Writing waits for a lull: a screen that opens fetches several replies at once. */
const lullMs = 400

/** swr's cache as a map that writes what was answered to the phone; errors and flags stay in memory. */
export class ReplyCache extends Map<string, State> implements Cache {
  private readonly personId: string
  private readonly waiting = new Map<string, State>()
  private timer: ReturnType<typeof setTimeout> | undefined
  private isClosed = false

  constructor(personId: string, kept: Map<string, State>) {
    super()
    this.personId = personId
    // Not handed to Map's constructor: it would call our `set` before the fields exist.
    for (const [key, state] of kept) super.set(key, state)
  }

  override set(key: string, state: State): this {
    const before = super.get(key)
    super.set(key, state)
    if (!this.isClosed && state.data !== undefined && state.data !== before?.data) {
      this.waiting.set(key, keptPart(state))
      this.timer ??= setTimeout(() => void this.write(), lullMs)
    }
    return this
  }

  /** After sign-out: answers still on their way are not kept. */
  close(): void {
    this.isClosed = true
    this.waiting.clear()
    if (this.timer !== undefined) clearTimeout(this.timer)
  }

  private async write(): Promise<void> {
    this.timer = undefined
    const states = new Map(this.waiting)
    this.waiting.clear()
    // A full phone costs the cache, never the screen.
    await keepReplies(this.personId, states).catch(() => undefined)
  }
}

/** swr finds replies to refresh by the `_k` it stores beside them: it must outlive a reload as well. */
function keptPart(state: State): State {
  const { data, _k } = state as State & { _k?: unknown }
  return { data, _k } as State
}
