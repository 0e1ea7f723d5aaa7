import { degrees, PDFDocument, rgb } from 'pdf-lib'
import { formatDay } from '@/shared/calendar'
import { formatFigure, formatTyped } from '@/shared/quantities/format'
import { sum } from '@/shared/quantities/decimals'
import type { Unit } from '@/shared/quantities/units'
import { say } from '../../words'
import { drawLines } from './draw-lines'
import { drawParties } from './draw-parties'
import { drawQr, qrSide } from './draw-qr'
import { drawSignatures } from './draw-signatures'
import type { ManifestFacts } from './manifest-facts'
import { shownInstant } from './shown-instant'
import { embedFaces } from './pdf-fonts'
import { margin, PdfPen } from './pdf-pen'

/** As many characters of the hash as are printed for typing; `verifyDocument` takes them. */
const printedCodeLength = 16
const black = rgb(0, 0, 0)

/**
 * Draws a manifest from its facts: the same facts give the same bytes, to the last one. The code on the paper is the
 * hash of the facts, because a paper cannot carry the hash of itself.
 * @returns the PDF's bytes and how many pages it has
 */
export async function drawManifest(
  facts: ManifestFacts,
  factsSha256: string,
): Promise<{ bytes: Uint8Array; pages: number }> {
  const document = await PDFDocument.create({ updateMetadata: false })
  const madeAt = new Date(facts.madeAt)
  document.setTitle(`${say('documents.title')} ${facts.number}`)
  document.setAuthor(facts.organisation.name)
  document.setCreator('Ebbmark')
  document.setProducer('Ebbmark')
  document.setCreationDate(madeAt)
  document.setModificationDate(madeAt)
  document.setLanguage('en')
  const pen = new PdfPen(
    document,
    await embedFaces(document, JSON.stringify(facts)),
    facts.paper,
    black,
    (own, isFirst) => startPage(own, facts, isFirst),
  )
  drawParties(pen, facts)
  drawLines(pen, facts)
  drawTotals(pen, facts)
  drawCautions(pen)
  drawSignatures(pen, facts)
  drawFooters(pen, facts, factsSha256)
  return {
    bytes: await document.save({ addDefaultPage: false, useObjectStreams: true }),
    pages: pen.pages.length,
  }
}

/** The head of every page: what it is not, what it is, its number, the level line. */
function startPage(pen: PdfPen, facts: ManifestFacts, isFirst: boolean): void {
  const right = margin + pen.width
  pen.line(say('documents.notAForm'), { x: 0, right, y: pen.y - 8, size: 9, face: 'bold' })
  const organisation = pen.fit(facts.organisation.name, pen.width - 220, 9)
  pen.line(organisation, { x: margin, y: pen.y - 8, size: 9 })
  pen.y -= 34
  const title = `${say('documents.title')} · ${say(`documents.subtitle.${facts.kind}`)}`
  pen.line(isFirst ? title : say('documents.continued', { number: facts.number }), {
    x: margin,
    y: pen.y,
    size: isFirst ? 22 : 14,
    face: 'heading',
  })
  pen.line(facts.number, { x: 0, right, y: pen.y, size: isFirst ? 16 : 12, face: 'code' })
  pen.y -= 10
  pen.levelLine(pen.y)
  pen.y -= 8
  if (facts.voided !== null) stampVoid(pen)
  if (!isFirst) return
  const parts = [
    `${say('documents.plannedOn')}: ${formatDay(facts.plannedOn, facts.locale)}`,
    say('documents.issued', { at: shownInstant(facts.issuedAt), by: facts.issuedBy }),
    say('documents.revision', { revision: facts.revision }),
    ...(facts.orderNumber === '' ? [] : [`${say('documents.order')}: ${facts.orderNumber}`]),
  ]
  pen.y -= pen.block(parts.join('   ·   '), { x: margin, width: pen.width, y: pen.y, size: 9.5 })
  if (facts.voided !== null) {
    const words = say('documents.voidedBy', { ...facts.voided, at: shownInstant(facts.voided.at) })
    pen.y -= pen.block(words, { x: margin, width: pen.width, y: pen.y, face: 'bold' })
  }
  pen.y -= 8
}

function stampVoid(pen: PdfPen): void {
  const { width, height } = pen.page.getSize()
  const { main } = pen.faces.heading
  const [word, size, lean] = [say('documents.void'), 150, (35 * Math.PI) / 180]
  // The middle of the word (half its length along, a third of its size up) on the middle of the page.
  const [along, up] = [main.widthOfTextAtSize(word, size) / 2, size / 3]
  pen.page.drawText(word, {
    x: width / 2 - along * Math.cos(lean) + up * Math.sin(lean),
    y: height / 2 - along * Math.sin(lean) - up * Math.cos(lean),
    size,
    font: main,
    color: rgb(0.82, 0.82, 0.82),
    rotate: degrees(35),
  })
}

/** Totals per unit as shipped, added exactly; the mass only of lines that state one. */
function drawTotals(pen: PdfPen, facts: ManifestFacts): void {
  const units = [...new Set(facts.lines.map(({ unit }) => unit))] as Unit[]
  const figures = units.flatMap((unit) => {
    const total = sum(facts.lines.filter((line) => line.unit === unit).map(({ value }) => value))
    return total === '0' ? [] : [formatTyped(total, unit, { locale: facts.locale })]
  })
  const pieces = facts.lines.reduce((total, line) => total + line.pieces, 0)
  if (pieces > 0) figures.push(say('documents.pieces', { count: pieces }))
  const masses = facts.lines.flatMap(({ massKilograms }) => massKilograms ?? [])
  const text = `${say('documents.total')}: ${figures.join('   ')}`
  pen.need(pen.heightOf(text, pen.width, 10.5, 'bold') + 24)
  pen.y -= pen.block(text, { x: margin, width: pen.width, y: pen.y, face: 'bold' })
  if (masses.length > 0) {
    const mass = `${formatFigure(sum(masses), 0, facts.locale)}\u00a0kg`
    pen.y -= pen.block(`${say('documents.massTotal')}: ${mass}`, {
      x: margin,
      width: pen.width,
      y: pen.y,
      size: 9.5,
    })
  }
  pen.y -= 8
}

function drawCautions(pen: PdfPen): void {
  const texts = ['gate', 'streams', 'solvents', 'mass', 'defer'].map((key) =>
    say(`documents.cautions.${key}`),
  )
  const height = texts.reduce((total, text) => total + pen.heightOf(text, pen.width - 10, 9), 24)
  pen.need(height)
  pen.y -= pen.block(say('documents.cautions.title'), {
    x: margin,
    width: pen.width,
    y: pen.y,
    face: 'heading',
    size: 12,
  })
  for (const text of texts) {
    pen.line('-', { x: margin, y: pen.y - 9, size: 9 })
    pen.y -= pen.block(text, { x: margin + 10, width: pen.width - 10, y: pen.y, size: 9 })
  }
  pen.y -= 8
}

/** On every page: page x of y, how to check this paper, and the code that leads there. */
function drawFooters(pen: PdfPen, facts: ManifestFacts, factsSha256: string): void {
  const pages = pen.pages.length
  const code = factsSha256.slice(0, printedCodeLength)
  const width = pen.width - qrSide - 16
  const check = say('documents.check', { address: `${facts.publicUrl}/verify/${code}` })
  pen.pages.forEach((page, index) => {
    const where = [
      say('documents.page', { page: index + 1, pages }),
      facts.number,
      say('documents.revision', { revision: facts.revision }),
    ].join('   ·   ')
    pen.on(page).line(where, { x: margin, y: 42, size: 8.5 })
    pen.on(page).line(pen.fit(check, width, 8.5), { x: margin, y: 30, size: 8.5 })
    drawQr(page, `${facts.publicUrl}/verify/${factsSha256}`, margin + pen.width - qrSide, 22)
  })
}
