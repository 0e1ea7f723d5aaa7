import type { Drain } from '@/shared/contracts/drains'
import { OfflineError, ProblemError } from '@/modules/api/problem-error'
import { createQueue } from '@/modules/offline/queue'
import type { QueueStore } from '@/modules/offline/queue-store'
import type { QueuedRecord, RecordedDrain } from '@/modules/offline/queued-record'

const personId = '6f0c2b4e-0000-4000-8000-000000000001'

/** The phone's disk: outlives every queue made on it. */
function phone() {
  const kept = new Map<string, string>()
  const store: QueueStore = {
    list: async (id) =>
      [...kept.values()]
        .map((text) => JSON.parse(text) as QueuedRecord)
        .filter((record) => record.personId === id),
    get: async (id) => {
      const text = kept.get(id)
      return text === undefined ? undefined : (JSON.parse(text) as QueuedRecord)
    },
    put: async (record) => void kept.set(record.id, JSON.stringify(record)),
    remove: async (id) => void kept.delete(id),
  }
  return { store, kept }
}

/** A server that records by id, as the real one does; what happens to its answers is up to the test. */
function serverWith(fate: (call: number) => 'answer' | 'lose-answer' | 'silence' | ProblemError) {
  const recorded = new Map<string, RecordedDrain>()
  const sent: string[] = []
  const send = async (body: RecordedDrain): Promise<Drain> => {
    sent.push(body.id)
    const what = fate(sent.length)
    if (what === 'silence') throw new OfflineError()
    if (what instanceof ProblemError) throw what
    recorded.set(body.id, body)
    if (what === 'lose-answer') throw new OfflineError()
    return { id: body.id, number: 'D-25-0028', needsLook: false } as Drain
  }
  return { send, recorded, sent }
}

function refusal(code: 'wrong-site' | 'internal' | 'sign-in-required') {
  return new ProblemError({ type: 'about:blank', title: code, status: 400, detail: code, code })
}

function drainOf(id: string): {
  body: RecordedDrain
  machineName: string
  containerCodes: string[]
} {
  return {
    machineName: 'M-05',
    containerCodes: ['C-101'],
    body: {
      id,
      siteId: personId,
      machine: { kind: 'unlisted', description: 'press' },
      streamId: personId,
      occurredAt: '2025-03-09T14:05:00-05:00',
      volume: { value: '18.5', unit: 'gal_us' },
      method: 'pump-meter',
      legs: [{ containerId: personId }],
    },
  }
}

const first = '11111111-1111-4111-8111-111111111111'
const second = '22222222-2222-4222-8222-222222222222'

function queueOn(
  store: QueueStore,
  send: (body: RecordedDrain) => Promise<Drain>,
  clock = { now: new Date('2025-03-09T19:05:00Z') },
) {
  return createQueue({ personId, store, send, now: () => clock.now, random: () => 0.5 })
}

const statesOf = (queue: ReturnType<typeof queueOn>) =>
  queue.records().map(({ id, state }) => [id, state])

test('a record is on the phone before anything is sent', async () => {
  const { store, kept } = phone()
  const onDiskWhenSent: boolean[] = []
  const queue = queueOn(store, async (body) => {
    onDiskWhenSent.push(kept.has(body.id))
    throw new OfflineError()
  })
  await queue.add(drainOf(first))
  expect(kept.has(first)).toBe(true)
  await queue.flush()
  expect(onDiskWhenSent).toEqual([true])
  queue.close()
})

test('a record outlives the page and is sent by the next one under the same id', async () => {
  const { store } = phone()
  const silent = serverWith(() => 'silence')
  const before = queueOn(store, silent.send)
  await before.add(drainOf(first))
  await before.flush()
  before.close()

  const server = serverWith(() => 'answer')
  const after = queueOn(store, server.send)
  await after.open()
  expect(statesOf(after)).toEqual([[first, 'queued']])
  await after.flush({ all: true })
  expect(statesOf(after)).toEqual([[first, 'accepted']])
  expect(after.records()[0]?.number).toBe('D-25-0028')
  expect([...silent.sent, ...server.sent]).toEqual([first, first])
  after.close()
})

test('a lost answer is retried with the same id, and the book has the drain once', async () => {
  const { store } = phone()
  const server = serverWith((call) => (call === 1 ? 'lose-answer' : 'answer'))
  const queue = queueOn(store, server.send)
  await queue.add(drainOf(first))
  await queue.flush()
  expect(statesOf(queue)).toEqual([[first, 'queued']])
  await queue.flush({ all: true })
  expect(server.sent).toEqual([first, first])
  expect(server.recorded.size).toBe(1)
  expect(statesOf(queue)).toEqual([[first, 'accepted']])
  queue.close()
})

test('two flushes at once send a record once', async () => {
  const { store } = phone()
  const server = serverWith(() => 'answer')
  const queue = queueOn(store, server.send)
  await queue.add(drainOf(first))
  await Promise.all([queue.flush({ all: true }), queue.flush({ all: true })])
  expect(server.sent).toEqual([first])
  queue.close()
})

test('a record cut off while sending is sent again', async () => {
  const { store } = phone()
  const queue = queueOn(store, serverWith(() => 'answer').send)
  const added = await queue.add(drainOf(first))
  await store.put({ ...added, state: 'sending' })
  await queue.flush()
  expect(statesOf(queue)).toEqual([[first, 'accepted']])
  queue.close()
})

test('a refused record stays with its reason, and those behind it are still sent', async () => {
  const { store } = phone()
  const server = serverWith((call) => (call === 1 ? refusal('wrong-site') : 'answer'))
  const clock = { now: new Date('2025-03-09T19:05:00Z') }
  const queue = queueOn(store, server.send, clock)
  await queue.add(drainOf(first))
  clock.now = new Date('2025-03-09T19:06:00Z')
  await queue.add(drainOf(second))
  await queue.flush()
  expect(statesOf(queue)).toEqual([
    [first, 'refused'],
    [second, 'accepted'],
  ])
  expect(queue.records()[0]?.refusal?.code).toBe('wrong-site')
  await queue.flush({ all: true })
  expect(server.sent).toEqual([first, second])
  queue.close()
})

test('a mended record replaces the refused one under its id', async () => {
  const { store } = phone()
  const server = serverWith((call) => (call === 1 ? refusal('wrong-site') : 'answer'))
  const queue = queueOn(store, server.send)
  await queue.add(drainOf(first))
  await queue.flush()
  const mended = drainOf(first)
  await queue.add({ ...mended, body: { ...mended.body, note: 'mended' } })
  await queue.flush()
  expect(queue.records()).toHaveLength(1)
  expect(server.recorded.get(first)?.note).toBe('mended')
  queue.close()
})

test.each(['internal', 'sign-in-required'] as const)(
  'a passing refusal (%s) leaves the record waiting',
  async (code) => {
    const { store } = phone()
    const queue = queueOn(store, serverWith(() => refusal(code)).send)
    await queue.add(drainOf(first))
    await queue.flush()
    expect(statesOf(queue)).toEqual([[first, 'queued']])
    queue.close()
  },
)

test('after silence the next try waits, twice as long each time, unless a person asks', async () => {
  const { store } = phone()
  const server = serverWith(() => 'silence')
  const clock = { now: new Date('2025-03-09T19:00:00Z') }
  const queue = queueOn(store, server.send, clock)
  await queue.add(drainOf(first))
  await queue.flush()
  expect(queue.records()[0]?.nextTryAt).toBe('2025-03-09T19:00:05.000Z')
  await queue.flush()
  expect(server.sent).toHaveLength(1)
  clock.now = new Date('2025-03-09T19:00:05Z')
  await queue.flush()
  expect(queue.records()[0]?.nextTryAt).toBe('2025-03-09T19:00:15.000Z')
  await queue.flush({ all: true })
  expect(server.sent).toHaveLength(3)
  queue.close()
})

test('undo takes a waiting record off the phone, but not one that the book has', async () => {
  const { store, kept } = phone()
  const queue = queueOn(store, serverWith(() => 'answer').send)
  await queue.add(drainOf(first))
  expect(await queue.remove(first)).toBeUndefined()
  expect(kept.has(first)).toBe(false)
  await queue.add(drainOf(second))
  await queue.flush()
  expect((await queue.remove(second))?.number).toBe('D-25-0028')
  expect(kept.has(second)).toBe(true)
  queue.close()
})

test('one person never sends what another left on the phone', async () => {
  const { store } = phone()
  const server = serverWith(() => 'answer')
  const queue = queueOn(store, server.send)
  const mine = await queue.add(drainOf(first))
  await store.put({ ...mine, id: second, personId: 'somebody-else' })
  await queue.flush({ all: true })
  expect(server.sent).toEqual([first])
  expect((await store.get(second))?.state).toBe('queued')
  queue.close()
})
