import type { PDFDocument, PDFPage, RGB } from 'pdf-lib'
import { runsOf, widthOf, wrap, type FaceName, type Faces } from './pdf-fonts'

export type Paper = 'letter' | 'a4'

/** Width and height in points. */
const papers: Record<Paper, [number, number]> = { letter: [612, 792], a4: [595.28, 841.89] }

export const margin = 42
/** What is kept free at the foot for the page's number and code. */
const lowest = 86

type LineAt = {
  x: number
  y: number
  face?: FaceName
  size?: number
  right?: number | undefined
}

/** Writes down a page and opens the next one when the space runs out; y is the baseline-to-be, from the top down. */
export class PdfPen {
  readonly pages: PDFPage[] = []
  readonly width: number
  y = 0
  private readonly size: [number, number]

  constructor(
    private readonly document: PDFDocument,
    readonly faces: Faces,
    paper: Paper,
    private readonly black: RGB,
    private readonly startPage: (pen: PdfPen, isFirst: boolean) => void,
  ) {
    this.size = papers[paper]
    this.width = this.size[0] - 2 * margin
    this.openPage()
  }

  /** The pen set on a page that was written before. */
  on(page: PDFPage): Pick<PdfPen, 'line'> {
    return { line: (text, at) => this.write(page, text, at) }
  }

  get page(): PDFPage {
    const page = this.pages.at(-1)
    if (page === undefined) throw new Error('a pen always has a page')
    return page
  }

  openPage(): void {
    this.pages.push(this.document.addPage(this.size))
    this.y = this.size[1] - margin
    this.startPage(this, this.pages.length === 1)
  }

  /** Opens a page unless `height` points are left on this one. */
  need(height: number): void {
    if (this.y - height < lowest) this.openPage()
  }

  line(text: string, at: LineAt): void {
    this.write(this.page, text, at)
  }

  private write(page: PDFPage, text: string, at: LineAt): void {
    const face = this.faces[at.face ?? 'text']
    const size = at.size ?? 10.5
    let x = at.right === undefined ? at.x : at.right - widthOf(face, text, size)
    for (const run of runsOf(face, text)) {
      page.drawText(run.text, { x, y: at.y, size, font: run.font, color: this.black })
      x += widthOf(face, run.text, size)
    }
  }

  /** Wrapped text from `y` down, against the right edge where one is given; gives the height it took. */
  block(
    text: string,
    at: {
      x: number
      width: number
      y: number
      face?: FaceName
      size?: number
      right?: number | undefined
    },
  ): number {
    const size = at.size ?? 10.5
    const lines = wrap(this.faces[at.face ?? 'text'], text, size, at.width)
    lines.forEach((line, index) =>
      this.line(line, { ...at, size, y: at.y - size - index * size * 1.3 }),
    )
    return lines.length * size * 1.3
  }

  /** Several lines of text that may be longer than a page: it flows on. */
  flow(text: string, size: number): void {
    for (const line of wrap(this.faces.text, text, size, this.width)) {
      this.need(size * 1.3)
      this.line(line, { x: margin, y: this.y - size, size })
      this.y -= size * 1.3
    }
  }

  /** One line of text, cut with three dots where it is wider than the space. */
  fit(text: string, width: number, size: number, face: FaceName = 'text'): string {
    if (widthOf(this.faces[face], text, size) <= width) return text
    let kept = text
    while (kept !== '' && widthOf(this.faces[face], `${kept}…`, size) > width)
      kept = kept.slice(0, -1)
    return `${kept.trimEnd()}…`
  }

  heightOf(text: string, width: number, size = 10.5, face: FaceName = 'text'): number {
    return wrap(this.faces[face], text, size, width).length * size * 1.3
  }

  rule(y: number, thickness = 0.7, from = margin, to = margin + this.width): void {
    this.page.drawLine({ start: { x: from, y }, end: { x: to, y }, thickness, color: this.black })
  }

  /** The level line: a rule with a short gauge tick at its left end. */
  levelLine(y: number, from = margin, to = margin + this.width): void {
    this.rule(y, 1.6, from, to)
    this.page.drawLine({
      start: { x: from + 0.8, y },
      end: { x: from + 0.8, y: y + 7 },
      thickness: 1.6,
      color: this.black,
    })
  }
}
