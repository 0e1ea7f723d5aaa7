import type { ErrorRequestHandler } from 'express'
import { ZodError } from 'zod'
import { constraintProblem } from '@/db/constraint-problems'
import type { FieldProblem, ProblemCode, ProblemDocument } from '@/shared/problems'
import { Problem } from '../problem'
import { problemWords } from './problem-words'

/** Code -> HTTP status, once. */
const statusOf: Record<ProblemCode, number> = {
  'body-unreadable': 400,
  'body-too-large': 413,
  'fields-refused': 400,
  'unsupported-media-type': 415,
  'not-found': 404,
  'method-not-allowed': 405,
  'too-many-requests': 429,
  internal: 500,
  'sign-in-required': 401,
  'sign-in-refused': 401,
  'not-allowed': 403,
  'already-set-up': 409,
  'id-reused': 409,
  'changed-under-you': 409,
  'version-required': 428,
  'code-taken': 409,
  'email-taken': 409,
  retired: 409,
  'last-administrator': 409,
  'still-in-use': 409,
  'time-in-future': 400,
  'legs-do-not-sum': 400,
  'wrong-site': 400,
  'already-struck': 409,
  'container-held': 409,
  'not-held': 409,
  'already-held': 409,
  'same-container': 400,
  'wrong-stage': 409,
  'pickup-incomplete': 409,
  'permit-expired': 409,
  'document-changed': 409,
  'already-signed': 409,
  'cause-required': 400,
  'nothing-received': 409,
  'already-reviewed': 409,
  'pack-rule-fixed': 409,
  'ticket-expired': 403,
}

/** HTTP status a code is answered with. */
export function statusOfProblem(code: ProblemCode): number {
  return statusOf[code]
}

/** RFC 9457 document of a problem; its words come from the catalogue (problems.json). */
export function problemDocument(problem: Problem): ProblemDocument {
  const { title, detail } = problemWords(problem.code, problem.facts ?? {})
  return {
    type: `https://ebbmark.example.org/problems/${problem.code}`,
    title,
    status: statusOf[problem.code],
    detail,
    code: problem.code,
    ...(problem.fields === undefined ? {} : { fields: problem.fields }),
    ...(problem.facts === undefined ? {} : { facts: problem.facts }),
  }
}

/** zod's issues as field problems; a message that is one of our stable codes becomes the code. */
export function fieldsOf(error: ZodError, prefix = ''): FieldProblem[] {
  return error.issues.flatMap((issue) => {
    const path = [prefix, ...issue.path.map(String)].filter((part) => part !== '').join('.')
    if (issue.code === 'unrecognized_keys') {
      return issue.keys.map((key) => ({
        path: path === '' ? key : `${path}.${key}`,
        code: 'unknown-field',
        detail: `There is no field ${key} here`,
      }))
    }
    const isOwnCode = /^[a-z]+(-[a-z]+)+$/.test(issue.message)
    return [{ path, code: isOwnCode ? issue.message : issue.code, detail: issue.message }]
  })
}

/** Anything thrown, as a Problem; what nobody foresaw is `internal`. */
export function asProblem(error: unknown): Problem {
  if (error instanceof Problem) return error
  if (error instanceof ZodError) return new Problem('fields-refused', { fields: fieldsOf(error) })
  const code = constraintProblem(error)
  if (code !== undefined) return new Problem(code)
  const type = typeof error === 'object' && error !== null && 'type' in error ? error.type : ''
  if (type === 'entity.too.large') return new Problem('body-too-large')
  if (type === 'encoding.unsupported' || type === 'charset.unsupported') {
    return new Problem('unsupported-media-type')
  }
  const status = typeof error === 'object' && error !== null && 'status' in error ? error.status : 0
  if (typeof status === 'number' && status >= 400 && status < 500)
    return new Problem('body-unreadable')
  return new Problem('internal')
}

/** Last middleware: every error leaves as application/problem+json; only the unforeseen is logged as an error. */
export const sendProblem: ErrorRequestHandler = (error: unknown, request, response, next) => {
  if (response.headersSent) {
    next(error)
    return
  }
  const found = asProblem(error)
  if (found.code === 'internal') request.log.error({ err: error }, 'unforeseen')
  const document = problemDocument(found)
  response.status(document.status).type('application/problem+json').send(JSON.stringify(document))
}
