import { themes, type Colours, type StatusColours } from '@/modules/ui/colours'

/** WCAG 2.x: relative luminance and contrast ratio, from the definition. */
function luminance(hex: string): number {
  const [r = 0, g = 0, b = 0] = [1, 3, 5].map((at) => {
    const channel = parseInt(hex.slice(at, at + 2), 16) / 255
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4
  })
  return 0.2126 * r + 0.7152 * g + 0.0722 * b
}

function contrast(a: string, b: string): number {
  const [light = 0, dark = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x)
  return (light + 0.05) / (dark + 0.05)
}

const statuses = ['settled', 'check', 'stop', 'waiting', 'voided', 'note'] as const

describe.each(Object.entries(themes) as [string, Colours][])('%s', (_, colours) => {
  test.each(['yard', 'sheet', 'well'] as const)('words are readable on %s', (ground) => {
    for (const ink of ['ink', 'inkSoft', 'inkFaint', 'link'] as const) {
      expect(contrast(colours[ink], colours[ground])).toBeGreaterThanOrEqual(4.5)
    }
    expect(contrast(colours.ink, colours[ground])).toBeGreaterThanOrEqual(7)
    expect(contrast(colours.edge, colours[ground])).toBeGreaterThanOrEqual(3)
    expect(contrast(colours.focus, colours[ground])).toBeGreaterThanOrEqual(3)
  })

  test('states and acts are readable on their own ground', () => {
    for (const status of statuses) {
      const { text, bg, edge }: StatusColours = colours[status]
      for (const ground of [bg, colours.sheet, colours.yard]) {
        expect(contrast(text, ground)).toBeGreaterThanOrEqual(4.5)
      }
      expect(contrast(colours.ink, bg)).toBeGreaterThanOrEqual(7)
      expect(contrast(edge, colours.sheet)).toBeGreaterThanOrEqual(3)
    }
    expect(contrast(colours.onAct, colours.act)).toBeGreaterThanOrEqual(7)
    expect(contrast(colours.onAct, colours.actPressed)).toBeGreaterThanOrEqual(4.5)
    expect(contrast(colours.ink, colours.actWash)).toBeGreaterThanOrEqual(7)
    for (const ink of ['inkSoft', 'act', 'link'] as const) {
      expect(contrast(colours[ink], colours.actWash)).toBeGreaterThanOrEqual(4.5)
    }
    expect(contrast(colours.fluid, colours.sheet)).toBeGreaterThanOrEqual(3)
  })
})
