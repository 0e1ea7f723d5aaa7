import type { AskedRequest } from './asked-request'

/** A request with one part spoiled, and the path a refusal should name. */
export type Spoiled = { what: string; path: string; asked: AskedRequest }

type Path = (string | number)[]

const long = 'x'.repeat(100_000)
const inPlaceOfText = [
  'a\u0000b',
  '\ud800',
  '0000-01-01',
  '9999-12-31',
  '0001-01-01T00:00:00Z',
  '-1',
  '1e400',
  '9'.repeat(40),
  '00000000-0000-0000-0000-000000000000',
  "'%_\\",
  long,
  '',
]
const inPlaceOfNumber = [-1, 2 ** 31, 2 ** 53, 1.5, 1e300, '1']
const inPlaceOfAnything: unknown[] = [null, 7, [], {}, [[]]]

/** One request, each of its parts spoiled in each way. */
export function spoiled(asked: AskedRequest): Spoiled[] {
  return [...spoiledBody(asked), ...spoiledQuery(asked)]
}

function spoiledBody(asked: AskedRequest): Spoiled[] {
  if (asked.body === undefined) return []
  const whole = inPlaceOfAnything.map((body) => ({
    what: `body = ${shown(body)}`,
    path: '',
    asked: { ...asked, body },
  }))
  const parts = pathsOf(asked.body).flatMap((path) =>
    replacementsOf(at(asked.body, path)).map((value) => ({
      what: `${path.join('.')} = ${shown(value)}`,
      path: path.join('.'),
      asked: { ...asked, body: withAt(asked.body, path, value) },
    })),
  )
  const extra = JSON.parse(
    JSON.stringify(asked.body).replace(/^\{/, '{"surplus":1,"__proto__":{"role":"administrator"},'),
  ) as unknown
  const more = { what: 'one field too many', path: 'surplus', asked: { ...asked, body: extra } }
  return [...whole, ...parts, more]
}

function spoiledQuery(asked: AskedRequest): Spoiled[] {
  const names = Object.keys(asked.query ?? {})
  const parts = names.flatMap((name) =>
    [...inPlaceOfText.filter((text) => text !== long), '1.5', '-1', ['a', 'b']].map((value) => ({
      what: `?${name}=${shown(value)}`,
      path: `query.${name}`,
      asked: { ...asked, query: { ...asked.query, [name]: value } },
    })),
  )
  const extra = { ...asked, query: { ...asked.query, surplus: '1' } }
  return [...parts, { what: '?surplus=1', path: 'query.surplus', asked: extra }]
}

function replacementsOf(value: unknown): unknown[] {
  if (typeof value === 'string') return [...inPlaceOfText, ...inPlaceOfAnything]
  if (typeof value === 'number') return [...inPlaceOfNumber, ...inPlaceOfAnything]
  if (!Array.isArray(value)) return [...inPlaceOfAnything, 'x']
  return [...inPlaceOfAnything, 'x', Array.from({ length: 1000 }, () => value[0] as unknown)]
}

/** Every part of a body, the containing ones too. */
function pathsOf(value: unknown, before: Path = []): Path[] {
  if (typeof value !== 'object' || value === null) return []
  return Object.entries(value).flatMap(([name, part]) => {
    const path = [...before, name]
    return [path, ...pathsOf(part, path)]
  })
}

function at(value: unknown, path: Path): unknown {
  return path.reduce((part, name) => (part as Record<string, unknown>)[name], value)
}

function withAt(value: unknown, path: Path, part: unknown): unknown {
  const copy = structuredClone(value) as Record<string, unknown>
  const [last, ...before] = [...path].reverse()
  const holder = at(copy, before.reverse()) as Record<string, unknown>
  holder[last ?? ''] = part
  return copy
}

function shown(value: unknown): string {
  return JSON.stringify(value).slice(0, 60)
}
