import type { ProblemCode } from '@/shared/problems'

/** Constraint name -> what a person is told: the database has the last word, in the service's words. */
const codes: Record<string, ProblemCode> = {
  sites_code_once: 'code-taken',
  streams_code_once: 'code-taken',
  fluids_name_once: 'code-taken',
  machines_code_once: 'code-taken',
  containers_code_once: 'code-taken',
  parties_name_once: 'code-taken',
  people_email_once: 'email-taken',
  drains_pkey: 'id-reused',
  transfers_pkey: 'id-reused',
  pickups_pkey: 'id-reused',
  pickup_lines_pkey: 'id-reused',
  signatures_pkey: 'id-reused',
  signatures_party_once: 'already-signed',
  holds_pkey: 'id-reused',
  holds_one_open: 'already-held',
  permits_pkey: 'id-reused',
  sites_pkey: 'id-reused',
  streams_pkey: 'id-reused',
  fluids_pkey: 'id-reused',
  machines_pkey: 'id-reused',
  containers_pkey: 'id-reused',
  parties_pkey: 'id-reused',
  people_pkey: 'id-reused',
  rules_pkey: 'id-reused',
}

/** The problem code of a refused constraint, or undefined when the error is something else. */
export function constraintProblem(error: unknown): ProblemCode | undefined {
  const name = constraintName(error)
  return name === undefined ? undefined : codes[name]
}

/** Name of the constraint (or trigger) that refused; drizzle keeps the driver's error in `cause`. */
export function constraintName(error: unknown): string | undefined {
  for (
    let at = error;
    typeof at === 'object' && at !== null;
    at = 'cause' in at ? at.cause : null
  ) {
    if ('constraint' in at && typeof at.constraint === 'string') return at.constraint
  }
  return undefined
}
