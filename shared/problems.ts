/**
 * Every refusal the product knows, as a stable code. The server maps a code to a status once
 * (server/http/problems.ts), the screen switches on it; prose may be reworded freely.
 */
export const problemCodes = [
  // requests that cannot be read
  'body-unreadable',
  'body-too-large',
  'fields-refused',
  'unsupported-media-type',
  'not-found',
  'method-not-allowed',
  'too-many-requests',
  'internal',
  // who is asking
  'sign-in-required',
  'sign-in-refused',
  'not-allowed',
  'already-set-up',
  // two people at once, or one twice
  'id-reused',
  'changed-under-you',
  'version-required',
  // set-up
  'code-taken',
  'email-taken',
  'retired',
  'last-administrator',
  'still-in-use',
  // drains and containers
  'time-in-future',
  'legs-do-not-sum',
  'wrong-site',
  'already-struck',
  'container-held',
  'not-held',
  'already-held',
  'same-container',
  // pickups
  'wrong-stage',
  'pickup-incomplete',
  'permit-expired',
  'document-changed',
  'already-signed',
  'cause-required',
  'nothing-received',
  // limits
  'already-reviewed',
  'pack-rule-fixed',
  // documents
  'ticket-expired',
] as const

export type ProblemCode = (typeof problemCodes)[number]

/** A field that was refused: a path like `legs.0.volume.value`, a stable code and words. */
export type FieldProblem = { path: string; code: string; detail: string }

/** RFC 9457 problem document as Ebbmark sends it. */
export type ProblemDocument = {
  type: string
  title: string
  status: number
  detail: string
  code: ProblemCode
  fields?: FieldProblem[]
  /** Figures and names the screen needs to explain the refusal. */
  facts?: Record<string, string>
}
