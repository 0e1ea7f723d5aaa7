/** 4 px grid; sheet-metal corners; targets that gloves find (56 and 64 px in the yard, 44 px at a desk). */
export const gap = { tiny: 4, small: 8, gutter: 12, medium: 16, large: 24, huge: 40 } as const
export const radius = 6
export const target = { yard: 56, primary: 64, desk: 44 } as const

export const fonts = {
  text: "'Atkinson Hyperlegible Next', system-ui, sans-serif",
  heading: "'Barlow Semi Condensed', 'Atkinson Hyperlegible Next', sans-serif",
  code: "'Atkinson Hyperlegible Mono', ui-monospace, monospace",
} as const
