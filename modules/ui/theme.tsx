import {
  createContext,
  useContext,
  useEffect,
  useMemo,
  useState,
  useSyncExternalStore,
  type ReactNode,
} from 'react'
import { themes, type Colours, type ThemeName } from './colours'

/** `auto` follows the device between light and dark; glare is chosen by hand, for the sun. */
export type ThemeChoice = 'auto' | ThemeName
export const themeChoices: readonly ThemeChoice[] = ['auto', 'light', 'dark', 'glare']

type Theme = {
  name: ThemeName
  colours: Colours
  choice: ThemeChoice
  choose: (choice: ThemeChoice) => void
}

const ThemeContext = createContext<Theme>({
  name: 'light',
  colours: themes.light,
  choice: 'auto',
  choose: () => undefined,
})

const storageKey = 'ebbmark.theme'

function keptChoice(): ThemeChoice {
  const kept = typeof localStorage === 'undefined' ? null : localStorage.getItem(storageKey)
  return themeChoices.find((choice) => choice === kept) ?? 'auto'
}

function usePrefersDark(): boolean {
  return useSyncExternalStore(
    (changed) => {
      if (typeof matchMedia === 'undefined') return () => undefined
      const query = matchMedia('(prefers-color-scheme: dark)')
      query.addEventListener('change', changed)
      return () => query.removeEventListener('change', changed)
    },
    () => typeof matchMedia !== 'undefined' && matchMedia('(prefers-color-scheme: dark)').matches,
    () => false,
  )
}

/** Colours of the chosen theme for everything below, and for the page itself through CSS variables. */
export function ThemeProvider({ children }: { children: ReactNode }) {
  const [choice, setChoice] = useState<ThemeChoice>(keptChoice)
  const prefersDark = usePrefersDark()
  const name: ThemeName = choice === 'auto' ? (prefersDark ? 'dark' : 'light') : choice
  const colours = themes[name]

  useEffect(() => {
    const { style } = document.documentElement
    style.setProperty('--yard', colours.yard)
    style.setProperty('--ink', colours.ink)
    style.setProperty('--focus', colours.focus)
    style.setProperty('--act', colours.act)
    style.setProperty('--on-act', colours.onAct)
    style.setProperty('color-scheme', name === 'dark' ? 'dark' : 'light')
  }, [colours, name])

  const theme = useMemo<Theme>(
    () => ({
      name,
      colours,
      choice,
      choose: (next) => {
        localStorage.setItem(storageKey, next)
        setChoice(next)
      },
    }),
    [name, colours, choice],
  )
  return <ThemeContext.Provider value={theme}>{children}</ThemeContext.Provider>
}

export function useTheme(): Theme {
  return useContext(ThemeContext)
}

export function useColours(): Colours {
  return useContext(ThemeContext).colours
}
