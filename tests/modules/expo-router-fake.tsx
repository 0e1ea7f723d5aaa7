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

export function Link({ href, children, ...rest }: { href: unknown; children: ReactNode }) {
  const label = 'aria-label' in rest ? String(rest['aria-label']) : undefined
  return (
    <a href={String(href)} aria-label={label}>
      {children}
    </a>
  )
}

export function Redirect({ href }: { href: unknown }) {
  return <p>{`went to ${typeof href === 'string' ? href : JSON.stringify(href)}`}</p>
}
