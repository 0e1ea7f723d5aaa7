import type { KeyObject } from 'node:crypto'
import type { Services } from './http/route'
import type { Role } from '@/shared/policies'

/** Who may be signed in as in the demo; shown on the sign-in page and by `npm start`. */
export type DemoInfo = {
  password: string
  people: { name: string; email: string; role: Role; does: string }[]
}

/** What the application is made with, beyond what acts are handed. */
export type AppServices = Services & {
  databaseKind: 'pglite' | 'postgres'
  secret: KeyObject
  demo: DemoInfo | null
  /** Mail stays in the local mailbox because no mail server is set. */
  keepsMail: boolean
  version: string
}
