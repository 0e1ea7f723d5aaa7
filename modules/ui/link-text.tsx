import { Link, type Href } from 'expo-router'
import type { ReactNode } from 'react'
import { fonts } from './measures'
import { useColours } from './theme'
import { useWindowClass } from './use-window-class'

/** An underlined link to another screen. */
export function LinkText({
  href,
  children,
  label,
}: {
  href: Href
  children: ReactNode
  label?: string
}) {
  const colours = useColours()
  const isPhone = useWindowClass() === 'phone'
  return (
    <Link
      href={href}
      aria-label={label}
      style={{
        fontFamily: fonts.text,
        fontSize: isPhone ? 18 : 16,
        lineHeight: isPhone ? 28 : 24,
        color: colours.link,
        textDecorationLine: 'underline',
      }}
    >
      {children}
    </Link>
  )
}

/** A whole block that leads to another screen, like a row or a card. */
export function LinkBlock({
  href,
  label,
  children,
}: {
  href: Href
  label: string
  children: ReactNode
}) {
  return (
    <Link
      href={href}
      aria-label={label}
      style={{ display: 'flex', flexDirection: 'column', alignItems: 'stretch' }}
    >
      {children}
    </Link>
  )
}
