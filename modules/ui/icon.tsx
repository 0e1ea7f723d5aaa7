import Svg, { Path } from 'react-native-svg'
import { useTheme } from './theme'

/** Drawn from the shop on a 24 grid: 2 px lines with square caps. Always beside a word. */
const paths = {
  yard: 'M3 20h18M5 20V10l7-5 7 5v10M9 20v-6h6v6',
  drain: 'M4 5h9v5h4M13 3v4M17 10v3M17 16v1M4 21h16M4 5v5h9',
  drum: 'M6 3h12v18H6zM6 8h12M6 16h12',
  tote: 'M4 4h16v14H4zM4 9h16M4 14h16M10 4v14M15 4v14M5 18v3M19 18v3',
  tank: 'M4 8h16v9H4zM7 17v3M17 17v3M10 8V5h4v3',
  pail: 'M5 8h14l-2 13H7zM6 8a6 5 0 0 1 12 0',
  bin: 'M4 7h16M6 7l1 14h10l1-14M9 11v6M15 11v6',
  van: 'M2 6h11v11H2zM13 10h5l4 4v3h-9M6 17v3M17 17v3',
  truck: 'M2 7h12v9H2zM14 10h4l3 3v3h-7M6 16v3M17 16v3',
  ledger: 'M5 3h14v18H5zM9 3v18M12 8h4M12 12h4',
  gear: 'M12 9v6M9 12h6M12 3v3M12 18v3M3 12h3M18 12h3M6 6l2 2M16 16l2 2M18 6l-2 2M8 16l-2 2',
  filter: 'M7 3h10v14H7zM7 7h10M7 13h10M10 17v4h4v-4',
  pad: 'M4 8l8-4 8 4-8 4zM4 12l8 4 8-4M4 16l8 4 8-4',
  stick: 'M8 2v20M8 6h4M8 10h3M8 14h4M8 18h3M14 14h6',
  seal: 'M9 3h6v6H9zM12 9v4M7 13h10v8H7z',
  flag: 'M5 22V3M5 4h13l-3 4 3 4H5',
  tick: 'M4 12l5 6L20 5',
  eye: 'M2 12c4-7 16-7 20 0-4 7-16 7-20 0zM12 10v4M10 12h4',
  bar: 'M4 4h16v16H4zM7 12h10',
  hourglass: 'M6 3h12M6 21h12M7 3c0 6 10 12 10 18M17 3c0 6-10 12-10 18',
  page: 'M6 3h9l3 3v15H6zM3 12h18',
  info: 'M12 10v8M12 6v1M3 3h18v18H3z',
  plus: 'M12 4v16M4 12h16',
  minus: 'M4 12h16',
  back: 'M14 4l-8 8 8 8',
  next: 'M10 4l8 8-8 8',
  down: 'M4 9l8 8 8-8',
  close: 'M5 5l14 14M19 5L5 19',
  menu: 'M3 6h18M3 12h18M3 18h18',
  person: 'M9 4h6v6H9zM4 21v-6h16v6',
  print: 'M7 8V3h10v5M4 8h16v9H4zM7 14h10v7H7z',
  download: 'M12 3v12M7 10l5 5 5-5M4 21h16',
  search: 'M4 4h11v11H4zM15 15l6 6',
  phone: 'M7 2h10v20H7zM11 18h2',
  pen: 'M4 20l3-1L20 6l-2-2L5 17z',
  mail: 'M3 5h18v14H3zM3 6l9 7 9-7',
  backspace: 'M9 5h12v14H9l-6-7zM12 9l6 6M18 9l-6 6',
  warning: 'M12 6v8M12 17v1M3 3h18v18H3z',
} as const

export type IconName = keyof typeof paths

export function Icon({
  name,
  size = 24,
  colour,
}: {
  name: IconName
  size?: number
  colour?: string
}) {
  const { colours, name: theme } = useTheme()
  return (
    <Svg width={size} height={size} viewBox="0 0 24 24" fill="none" aria-hidden>
      <Path
        d={paths[name]}
        stroke={colour ?? colours.ink}
        strokeWidth={theme === 'glare' ? 2.5 : 2}
        strokeLinecap="square"
      />
    </Svg>
  )
}
