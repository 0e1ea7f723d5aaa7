import type { Response } from 'supertest'
import type { ProblemCode, ProblemDocument } from '@/shared/problems'

/** The reply is a problem document of this status and code (RFC 9457), naming this field when one is given. */
export function expectProblem(
  reply: Response,
  status: number,
  code: ProblemCode,
  field?: string,
): ProblemDocument {
  const document = reply.body as ProblemDocument
  expect(`${reply.status} ${String(document.code)}`).toBe(`${status} ${code}`)
  expect(reply.type).toBe('application/problem+json')
  expect(document).toMatchObject({
    type: expect.stringMatching(new RegExp(`/problems/${code}$`)),
    title: expect.stringMatching(/\S/),
    detail: expect.stringMatching(/\S/),
    status,
  })
  if (field !== undefined) expect(document.fields?.map(({ path }) => path)).toContain(field)
  return document
}
