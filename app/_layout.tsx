import { useEffect } from 'react'
import { Slot } from 'expo-router'
import { registerServiceWorker } from '@/modules/offline/register-service-worker'
import { SessionProvider } from '@/modules/session/session-provider'
import { SkipLink } from '@/modules/session/skip-link'
import { Announcer } from '@/modules/ui/announcer'
import { ThemeProvider } from '@/modules/ui/theme'
import '@/modules/ui/words'

export default function RootLayout() {
  useEffect(registerServiceWorker, [])
  return (
    <ThemeProvider>
      <Announcer>
        <SessionProvider>
          <SkipLink />
          <Slot />
        </SessionProvider>
      </Announcer>
    </ThemeProvider>
  )
}
