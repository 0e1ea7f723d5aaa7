import type { ProblemCode } from '@/shared/problems'

type Sent = { method: string; path: string; headers: Headers; body: unknown }
export type FakeReply = { status: number; body: unknown; type?: string } | 'no signal'

/** Answers every request with what `reply` says; the requests made are in the returned list, in order. */
export function fakeFetch(reply: (sent: Sent) => FakeReply | Promise<FakeReply>): Sent[] {
  const requests: Sent[] = []
  globalThis.fetch = async (address, options) => {
    const sent: Sent = {
      method: options?.method ?? 'GET',
      path: String(address),
      headers: new Headers(options?.headers),
      body: typeof options?.body === 'string' ? (JSON.parse(options.body) as unknown) : undefined,
    }
    requests.push(sent)
    const answer = await reply(sent)
    if (answer === 'no signal') throw new TypeError('Failed to fetch')
    const {
      status,
      body,
      type = status < 400 ? 'application/json' : 'application/problem+json',
    } = answer
    return {
      ok: status < 400,
      status,
      headers: new Headers({ 'Content-Type': type }),
      json: async () => body,
    } as Response
  }
  return requests
}

export function problemReply(
  status: number,
  code: ProblemCode,
  more: {
    fields?: { path: string; code: string; detail: string }[]
    facts?: Record<string, string>
  } = {},
): FakeReply {
  return {
    status,
    body: { type: 'about:blank', title: code, detail: code, status, code, ...more },
  }
}
