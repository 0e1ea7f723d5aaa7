/** Who may do what: the one table, read by the server to refuse and by the client to hide. */

export const roles = ['technician', 'officer', 'auditor', 'administrator'] as const
export type Role = (typeof roles)[number]

const everyone: readonly Role[] = roles
const yard: readonly Role[] = ['technician', 'officer', 'administrator']
const desk: readonly Role[] = ['officer', 'administrator']
const readers: readonly Role[] = ['officer', 'auditor', 'administrator']
const administrators: readonly Role[] = ['administrator']

const table = {
  'read-own-account': everyone,
  'change-own-password': everyone,
  'read-set-up': everyone,
  'change-set-up': administrators,
  'read-people': readers,
  'change-people': administrators,
  'read-yard': yard,
  'read-drains': everyone,
  'record-drain': yard,
  'amend-drain': yard,
  'strike-drain': yard,
  'read-marks': everyone,
  'review-mark': desk,
  'read-containers': everyone,
  'hold-container': yard,
  'release-container': desk,
  'record-transfer': yard,
  'read-pickups': everyone,
  'plan-pickup': desk,
  'issue-pickup': desk,
  'sign-pickup': desk,
  'receive-pickup': desk,
  'settle-pickup': desk,
  'void-pickup': desk,
  'read-books': readers,
  'read-limits': everyone,
  'change-rules': desk,
  'review-flag': desk,
  'read-mailbox': desk,
  'read-audit': readers,
} as const satisfies Record<string, readonly Role[]>

export type Act = keyof typeof table

export const acts = Object.keys(table) as Act[]

/** What a policy needs to know of a person. */
export type PolicyPerson = { role: Role; siteIds: readonly string[] }

/** Auditors and administrators see the whole organisation; others the sites they are given. */
export function seesEverySite(person: PolicyPerson): boolean {
  return person.role === 'auditor' || person.role === 'administrator'
}

/**
 * May this person do this act, on this site when one is named?
 * Tenancy is not decided here: another organisation's rows cannot be seen at all.
 */
export function can(person: PolicyPerson, act: Act, subject: { siteId?: string } = {}): boolean {
  if (!table[act].includes(person.role)) return false
  if (subject.siteId === undefined) return true
  return seesEverySite(person) || person.siteIds.includes(subject.siteId)
}
