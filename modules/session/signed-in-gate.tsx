import { Redirect, usePathname } from 'expo-router'
import type { ReactNode } from 'react'
import { ReplyCacheProvider } from '../api/reply-cache-provider'
import { QueueProvider } from '../offline/queue-provider'
import { AppShell } from './app-shell'
import { useSessionGate } from './session-context'
import { SiteProvider } from './site-provider'

/** Everything below needs a signed-in person; whoever is not goes to sign in and comes back to the same page. */
export function SignedInGate({ help, children }: { help: ReactNode; children: ReactNode }) {
  const { state } = useSessionGate()
  const path = usePathname()
  if (state.status === 'signed-out') {
    return <Redirect href={{ pathname: '/sign-in', params: path === '/' ? {} : { next: path } }} />
  }
  const { id } = state.person
  return (
    <ReplyCacheProvider key={id} personId={id}>
      <QueueProvider key={id} personId={id}>
        <SiteProvider>
          <AppShell help={help}>{children}</AppShell>
        </SiteProvider>
      </QueueProvider>
    </ReplyCacheProvider>
  )
}
