import { createContext, useCallback, useContext, useRef, useState, type ReactNode } from 'react'

const AnnounceContext = createContext<(words: string) => void>(() => undefined)

/** One polite live region at the root; screens say through it what changed without a reload. */
export function Announcer({ children }: { children: ReactNode }) {
  const [words, setWords] = useState('')
  const turn = useRef(false)
  const announce = useCallback((said: string) => {
    // The same words twice would be silent: a space tells them apart.
    turn.current = !turn.current
    setWords(turn.current ? said : `${said} `)
  }, [])
  return (
    <AnnounceContext.Provider value={announce}>
      {children}
      <div
        role="status"
        aria-live="polite"
        style={{
          position: 'absolute',
          width: 1,
          height: 1,
          overflow: 'hidden',
          clipPath: 'inset(50%)',
        }}
      >
        {words}
      </div>
    </AnnounceContext.Provider>
  )
}

export function useAnnounce(): (words: string) => void {
  return useContext(AnnounceContext)
}
