import { useCallback, useMemo, useState, type ReactNode } from 'react'
import { usePathname, useRouter, type Href } from 'expo-router'
import { useTranslation } from 'react-i18next'
import type { Role } from '@/shared/policies'
import { Button } from '../ui/button'
import { Dialog } from '../ui/dialog'
import type { IconName } from '../ui/icon'
import { Shell } from '../ui/shell'
import { useWindowClass } from '../ui/use-window-class'
import { useAppKeys } from './app-keys'
import { KeySwitch } from './key-switch'
import { useSite } from './site-provider'
import { TopLine } from './top-line'
import { useSession } from './use-session'

type Section = 'yard' | 'drains' | 'containers' | 'pickups' | 'books'

/** What each role uses, in the order of its day. */
const sectionsOf: Record<Role, readonly Section[]> = {
  technician: ['yard', 'drains', 'containers', 'pickups'],
  officer: ['yard', 'drains', 'containers', 'pickups', 'books'],
  auditor: ['books', 'drains', 'containers', 'pickups'],
  administrator: ['yard', 'drains', 'containers', 'pickups', 'books'],
}

const icons: Record<Section, IconName> = {
  yard: 'yard',
  drains: 'drain',
  containers: 'drum',
  pickups: 'truck',
  books: 'ledger',
}

/** Where "Log a drain" stands above the bar. */
const loggingPaths = ['/yard', '/drains', '/containers']

/** Home of a role: where its day begins. */
export function homeOf(role: Role): Href {
  return role === 'auditor' ? '/books' : '/yard'
}

/** Sections, top line and the one big act around a screen; forms that need the whole phone stand alone. */
export function AppShell({ help, children }: { help: ReactNode; children: ReactNode }) {
  const { t } = useTranslation()
  const { person, can } = useSession()
  const { site } = useSite()
  const router = useRouter()
  const path = usePathname()
  const windowClass = useWindowClass()
  const [isListOpen, setListOpen] = useState(false)
  const mayLog = site !== undefined && can('record-drain', { siteId: site.id })

  const newDrain = useCallback(() => router.push('/drains/new'), [router])
  const list = useCallback(() => setListOpen(true), [])
  useAppKeys({ newDrain: mayLog ? newDrain : undefined, list })

  const items = useMemo(
    () =>
      sectionsOf[person.role].map((section) => ({
        label: t(`session.bar.${section}`),
        icon: icons[section],
        href: `/${section}` as Href,
        isCurrent: path === `/${section}` || path.startsWith(`/${section}/`),
      })),
    [person.role, path, t],
  )

  if (windowClass === 'phone' && isWholePhone(path)) return children
  return (
    <Shell
      items={items}
      top={<TopLine help={help} />}
      primary={
        mayLog && loggingPaths.includes(path) ? (
          <Button
            kind="primary"
            isLarge
            isWide
            icon={windowClass === 'wide' ? undefined : 'plus'}
            label={t('yard.logDrain')}
            onPress={newDrain}
          />
        ) : undefined
      }
    >
      {children}
      <Dialog
        title={t('session.personMenu.keys')}
        isOpen={isListOpen}
        onClose={() => setListOpen(false)}
        actions={<Button label={t('ui.close')} onPress={() => setListOpen(false)} />}
      >
        <KeySwitch />
      </Dialog>
    </Shell>
  )
}

/** The drain form is laid out for the whole of a small phone. */
function isWholePhone(path: string): boolean {
  return path === '/drains/new'
}
