import type { FieldProblem, ProblemCode, ProblemDocument } from '@/shared/problems'

/** A refusal the server explained: its problem document (RFC 9457) as a thrown error. */
export class ProblemError extends Error {
  readonly document: ProblemDocument

  constructor(document: ProblemDocument) {
    super(document.code)
    this.name = 'ProblemError'
    this.document = document
  }

  get code(): ProblemCode {
    return this.document.code
  }

  get fields(): FieldProblem[] {
    return this.document.fields ?? []
  }
}

/** No answer came: no signal, the server is down, or it took too long. Nothing is known about the request's fate. */
export class OfflineError extends Error {
  constructor(cause?: unknown) {
    super('no answer', { cause })
    this.name = 'OfflineError'
  }
}

/** Is this the refusal with that code? */
export function isProblem(error: unknown, code?: ProblemCode): error is ProblemError {
  return error instanceof ProblemError && (code === undefined || error.code === code)
}
