import type { ReactNode } from 'react'
import { fonts } from './measures'
import { useColours } from './theme'

export type Fact = { name: string; value: ReactNode }

/** Names and values, as a list that a screen reader reads in pairs. */
export function FactList({ facts }: { facts: readonly Fact[] }) {
  const colours = useColours()
  return (
    <dl
      style={{
        display: 'grid',
        gridTemplateColumns: 'minmax(7em, max-content) 1fr',
        gap: '8px 16px',
        margin: 0,
        fontFamily: fonts.text,
        fontSize: 17,
        lineHeight: 1.4,
        color: colours.ink,
      }}
    >
      {facts.map(({ name, value }) => (
        <div key={name} style={{ display: 'contents' }}>
          <dt style={{ color: colours.inkSoft, fontSize: 15 }}>{name}</dt>
          <dd style={{ margin: 0, overflowWrap: 'anywhere' }}>{value}</dd>
        </div>
      ))}
    </dl>
  )
}
