import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import type { PDFDocument, PDFFont } from 'pdf-lib'

export type FaceName = 'text' | 'bold' | 'heading' | 'code'

/** A face with the second file that carries its further latin letters, where it has one. */
export type Face = {
  main: PDFFont
  further: PDFFont | null
  covers: (code: number) => boolean
  /** Of characters measured so far, at 1000 points. */
  widths: Map<string, number>
}
export type Faces = Record<FaceName, Face>

const files: Record<FaceName, { main: string; further: string | null }> = {
  text: { main: 'text-400', further: 'text-ext-400' },
  bold: { main: 'text-700', further: 'text-ext-700' },
  heading: { main: 'heading-600', further: 'heading-ext-600' },
  code: { main: 'code-400', further: null },
}

/** Kerning is never written into the page, and working it out is most of the time a page takes. */
const embedding = { subset: true, features: { kern: false, liga: false, calt: false } }

/**
 * Embeds the product's own fonts, cut down to the letters the document uses.
 * @param words everything the document may write: where no further letter is in it, the second files are left out
 */
export async function embedFaces(document: PDFDocument, words: string): Promise<Faces> {
  const { default: fontkit } = await import('@pdf-lib/fontkit')
  document.registerFontkit(fontkit)
  const needsFurther = [...words.normalize('NFC')].some((character) => isFurtherLatin(character))
  const read = (name: string) => readFileSync(join(process.cwd(), 'fonts', `${name}.ttf`))
  const embed = (name: string) => document.embedFont(read(name), embedding)
  const face = async (name: FaceName): Promise<Face> => {
    const { main, further } = files[name]
    const known = new Set(fontkit.create(read(main)).characterSet)
    return {
      main: await embed(main),
      further: needsFurther && further !== null ? await embed(further) : null,
      covers: (code) => known.has(code),
      widths: new Map(),
    }
  }
  return {
    text: await face('text'),
    bold: await face('bold'),
    heading: await face('heading'),
    code: await face('code'),
  }
}

/** Letters of central and northern Europe and of Vietnamese: what the second files are cut to. */
function isFurtherLatin(character: string): boolean {
  const code = character.codePointAt(0) ?? 0
  return (code >= 0x100 && code <= 0x24f) || (code >= 0x1e00 && code <= 0x1eff)
}

type Run = { text: string; font: PDFFont }

/** A line in runs of one font each; what neither file has is shown as a question mark rather than as nothing. */
export function runsOf(face: Face, text: string): Run[] {
  const runs: Run[] = []
  for (const character of text.normalize('NFC')) {
    const code = character.codePointAt(0) ?? 0
    const isFurther = face.further !== null && isFurtherLatin(character) && !face.covers(code)
    const font = isFurther && face.further !== null ? face.further : face.main
    const shown = isFurther || face.covers(code) ? character : isSpace(code) ? ' ' : '?'
    const last = runs.at(-1)
    if (last !== undefined && last.font === font) last.text += shown
    else runs.push({ text: shown, font })
  }
  return runs
}

/** Tabs, and the thin and narrow spaces of number formats, which the files lack. */
function isSpace(code: number): boolean {
  return code === 0x09 || code === 0x2009 || code === 0x202f
}

/** Width in points: without kerning a line is as wide as its characters, each measured once. */
export function widthOf(face: Face, text: string, size: number): number {
  let width = 0
  for (const run of runsOf(face, text)) {
    for (const character of run.text) width += perThousand(face, run.font, character)
  }
  return (width * size) / 1000
}

function perThousand({ widths }: Face, font: PDFFont, character: string): number {
  const known = widths.get(character)
  if (known !== undefined) return known
  const measured = font.widthOfTextAtSize(character, 1000)
  widths.set(character, measured)
  return measured
}

/** Breaks text at spaces, and words that are wider than the column wherever they must. */
export function wrap(face: Face, text: string, size: number, width: number): string[] {
  return text.split('\n').flatMap((paragraph) => {
    const lines: string[] = []
    let line = ''
    for (const word of paragraph.split(' ')) {
      const joined = line === '' ? word : `${line} ${word}`
      if (widthOf(face, joined, size) <= width) {
        line = joined
        continue
      }
      if (line !== '') lines.push(line)
      line = word
      while (widthOf(face, line, size) > width && line.length > 1) {
        let fits = line.length - 1
        while (fits > 1 && widthOf(face, line.slice(0, fits), size) > width) fits -= 1
        lines.push(line.slice(0, fits))
        line = line.slice(fits)
      }
    }
    return [...lines, line]
  })
}
