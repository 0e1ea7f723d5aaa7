import type { FieldProblem, ProblemCode } from '@/shared/problems'

/** A refusal on its way to the person who asked; server/http/problems.ts turns it into a problem document. */
export class Problem extends Error {
  readonly code: ProblemCode
  readonly fields: FieldProblem[] | undefined
  readonly facts: Record<string, string> | undefined

  constructor(
    code: ProblemCode,
    more: { fields?: FieldProblem[]; facts?: Record<string, string> } = {},
  ) {
    super(code)
    this.name = 'Problem'
    this.code = code
    this.fields = more.fields
    this.facts = more.facts
  }
}

/** `throw problem('container-held', { facts: { container: 'C-201' } })` */
export function problem(
  code: ProblemCode,
  more: { fields?: FieldProblem[]; facts?: Record<string, string> } = {},
): Problem {
  return new Problem(code, more)
}

/** A refused field: path as in the body (`legs.0.containerId`), stable code, words for a reader of the API. */
export function fieldProblem(
  code: ProblemCode,
  path: string,
  fieldCode: string,
  detail: string,
  facts: Record<string, string> = {},
): Problem {
  return new Problem(code, { fields: [{ path, code: fieldCode, detail }], facts })
}
