import { render } from '@testing-library/react'
import type { ReactNode } from 'react'
import { SWRConfig } from 'swr'
import { QueueProvider } from '@/modules/offline/queue-provider'
import { SessionContext } from '@/modules/session/session-context'
import { SiteProvider } from '@/modules/session/site-provider'
import { Announcer } from '@/modules/ui/announcer'
import '@/modules/ui/words'
import type { SignedInPerson } from '@/shared/contracts/session'

/** jsdom has no modal dialogs: open is all that the screens need of one. */
export function openDialogsPlainly(): void {
  HTMLDialogElement.prototype.showModal = function showModal() {
    this.open = true
  }
  HTMLDialogElement.prototype.close = function close() {
    this.open = false
  }
}

/** Renders a screen as it stands below the session gate, for this person. */
export function renderSignedIn(screen: ReactNode, person: SignedInPerson) {
  const session = {
    state: { status: 'signed-in' as const, person },
    signIn: async () => undefined,
    setUp: async () => undefined,
    signOut: async () => undefined,
  }
  return render(
    <SWRConfig value={{ provider: () => new Map(), dedupingInterval: 0 }}>
      <Announcer>
        <SessionContext value={session}>
          <QueueProvider personId={person.id}>
            <SiteProvider>{screen}</SiteProvider>
          </QueueProvider>
        </SessionContext>
      </Announcer>
    </SWRConfig>,
  )
}
