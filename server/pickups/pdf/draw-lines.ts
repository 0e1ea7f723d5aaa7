import { formatFigure, formatTyped } from '@/shared/quantities/format'
import type { Unit } from '@/shared/quantities/units'
import { say } from '../../words'
import type { ManifestFacts } from './manifest-facts'
import { margin, type PdfPen } from './pdf-pen'

type Line = ManifestFacts['lines'][number]
type Column = {
  key: string
  share: number
  isFigure: boolean
  text: (line: Line, facts: ManifestFacts) => string
}

const columns: Column[] = [
  { key: 'position', share: 0.06, isFigure: false, text: (line) => String(line.position) },
  { key: 'container', share: 0.22, isFigure: false, text: containerText },
  { key: 'stream', share: 0.27, isFigure: false, text: streamText },
  { key: 'count', share: 0.08, isFigure: true, text: (line) => String(line.containerCount) },
  { key: 'quantity', share: 0.19, isFigure: true, text: quantityText },
  { key: 'mass', share: 0.18, isFigure: true, text: massText },
]

const size = 9.5
const padding = 3
const gap = 8

/** The table of lines: any number of them, with the heading again on every page. */
export function drawLines(pen: PdfPen, facts: ManifestFacts): void {
  drawHead(pen)
  for (const line of facts.lines) {
    const texts = columns.map((column) => column.text(line, facts))
    const height =
      Math.max(...texts.map((text, index) => pen.heightOf(text, widthAt(pen, index), size))) +
      2 * padding
    const before = pen.pages.length
    pen.need(height)
    if (pen.pages.length > before) drawHead(pen)
    texts.forEach((text, index) => drawCell(pen, text, index))
    pen.y -= height
    pen.rule(pen.y, 0.4)
  }
  pen.y -= 4
}

function drawHead(pen: PdfPen): void {
  pen.need(60)
  pen.rule(pen.y, 1)
  columns.forEach(({ key }, index) => drawCell(pen, say(`documents.columns.${key}`), index, true))
  pen.y -= size * 1.3 + 2 * padding
  pen.rule(pen.y, 1)
}

function drawCell(pen: PdfPen, text: string, index: number, isHead = false): void {
  const width = widthAt(pen, index)
  const x = leftOf(pen, index)
  const right = columns[index]?.isFigure ? x + width : undefined
  pen.block(text, { x, width, right, y: pen.y - padding, size, face: isHead ? 'bold' : 'text' })
}

function leftOf(pen: PdfPen, index: number): number {
  return margin + columns.slice(0, index).reduce((left, { share }) => left + share * pen.width, 0)
}

function widthAt(pen: PdfPen, index: number): number {
  const isLast = index === columns.length - 1
  return (columns[index]?.share ?? 0) * pen.width - (isLast ? 0 : gap)
}

function containerText(line: Line): string {
  const type = say(`documents.containerTypes.${line.containerType}`)
  return [line.containerCode, line.containerDescription || type].join('\n')
}

function streamText(line: Line): string {
  return [line.stream, [line.labelWords, line.wasteCode].filter(Boolean).join(' · ')]
    .filter(Boolean)
    .join('\n')
}

function quantityText(line: Line, facts: ManifestFacts): string {
  const isCounted = line.value === '0' && line.pieces > 0
  const measured = formatTyped(line.value, line.unit as Unit, { locale: facts.locale })
  const pieces = line.pieces > 0 ? say('documents.pieces', { count: line.pieces }) : ''
  return [isCounted ? '' : measured, pieces].filter(Boolean).join('\n')
}

function massText(line: Line, facts: ManifestFacts): string {
  if (line.massKilograms === null) return line.isFluid ? say('documents.noDensity') : '–'
  const mass = `${formatFigure(line.massKilograms, line.isFluid ? 0 : 1, facts.locale)}\u00a0kg`
  return [
    mass,
    line.density === null
      ? say('documents.weighed')
      : say('documents.atDensity', { density: line.density }),
  ].join('\n')
}
