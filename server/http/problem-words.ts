import words from '@/shared/words/en/problems.json'
import type { ProblemCode } from '@/shared/problems'

/** Title and detail of a problem from the catalogue, with `{{name}}` filled from its facts. */
export function problemWords(
  code: ProblemCode,
  facts: Record<string, string>,
): { title: string; detail: string } {
  const found = words[code]
  const fill = (text: string) =>
    text.replace(/\{\{(\w+)\}\}/g, (_, name: string) => facts[name] ?? '–')
  return { title: fill(found.title), detail: fill(found.detail) }
}
