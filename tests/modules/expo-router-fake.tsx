import type { ReactNode } from 'react'

/** What the screens use of the router, without one: links are links, and where a screen went is written down. */
export const visits: string[] = []

export const router = {
  push: (href: unknown) => void visits.push(String(href)),
  replace: (href: unknown) => void visits.push(String(href)),
  back: () => void visits.push('back'),
  canGoBack: () => false,
  setParams: () => undefined,
}

export function useRouter() {
  return router
}

export function usePathname() {
  return '/drains/new'
}

type LinkProps = { href: unknown; children: ReactNode; 'aria-label'?: string }

export function Link({ href, children, 'aria-label': label }: LinkProps) {
  return (
    <a href={String(href)} aria-label={label}>
      {children}
    </a>
  )
}

export function Redirect({ href }: { href: unknown }) {
  return <p>{`went to ${typeof href === 'string' ? href : JSON.stringify(href)}`}</p>
}
