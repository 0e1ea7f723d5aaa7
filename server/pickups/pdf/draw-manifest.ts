import { degrees, PDFDocument, rgb } from 'pdf-lib'
import { create as createQr } from 'qrcode'
import { formatDay } from '@/shared/calendar'
import { formatFigure, formatTyped } from '@/shared/quantities/format'
import { sum } from '@/shared/quantities/decimals'
import type { Unit } from '@/shared/quantities/units'
import { say } from '../../words'
import { drawLines } from './draw-lines'
import { drawSignatures } from './draw-signatures'
import type { ManifestFacts } from './manifest-facts'
import { shownInstant } from './shown-instant'
import { embedFaces } from './pdf-fonts'
import { margin, PdfPen } from './pdf-pen'

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
  const pen = new PdfPen(document, await embedFaces(document), facts.paper, black, (own, isFirst) =>
    startPage(own, facts, isFirst),
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
  pen.line(facts.organisation.name, { x: margin, y: pen.y - 8, size: 9 })
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
  pen.page.drawText(say('documents.void'), {
    x: width / 2 - 150,
    y: height / 2 - 110,
    size: 150,
    font: main,
    color: rgb(0.82, 0.82, 0.82),
    rotate: degrees(35),
  })
}

function drawParties(pen: PdfPen, facts: ManifestFacts): void {
  const gap = 14
  const width = (pen.width - 2 * gap) / 3
  const blocks = [
    { title: say('documents.generator'), lines: siteLines(facts) },
    { title: say('documents.hauler'), lines: haulerLines(facts) },
    { title: say('documents.facility'), lines: partyLines(facts.facility) },
  ]
  const heights = blocks.map(({ lines }) =>
    lines.reduce((total, line) => total + pen.heightOf(line, width, 9.5), 18),
  )
  const height = Math.max(...heights)
  pen.need(height)
  blocks.forEach(({ title, lines }, index) => {
    const x = margin + index * (width + gap)
    let y = pen.y
    y -= pen.block(title, { x, width, y, face: 'heading', size: 12 })
    for (const [at, line] of lines.entries()) {
      y -= pen.block(line, { x, width, y, size: 9.5, face: at === 0 ? 'bold' : 'text' })
    }
  })
  pen.y -= height + 10
  if (facts.note !== '') {
    pen.y -=
      pen.block(`${say('documents.note')}: ${facts.note}`, {
        x: margin,
        width: pen.width,
        y: pen.y,
        size: 9.5,
      }) + 6
  }
}

function siteLines({ organisation, site }: ManifestFacts): string[] {
  return [
    `${organisation.name}, ${site.name} (${site.code})`,
    `${say('documents.identification')}: ${site.identificationNumber || say('documents.none')}`,
    ...[site.address, site.phone || organisation.phone, organisation.email].filter(
      (line) => line !== '',
    ),
  ]
}

function partyLines(party: Omit<ManifestFacts['facility'], never>): string[] {
  return [
    party.name,
    `${say('documents.identification')}: ${party.identificationNumber}`,
    ...[party.address, party.phone, party.email].filter((line) => line !== ''),
    ...(party.contactName === '' ? [] : [`${say('documents.contact')}: ${party.contactName}`]),
  ]
}

function haulerLines({ hauler }: ManifestFacts): string[] {
  const [name = '', identification = '', ...rest] = partyLines(hauler)
  const permit = hauler.permit === null ? [] : [say('documents.permit', hauler.permit)]
  return [name, identification, ...permit, ...rest]
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
  pen.need(40)
  pen.line(`${say('documents.total')}: ${figures.join('   ')}`, {
    x: margin,
    y: pen.y - 12,
    face: 'bold',
  })
  if (masses.length > 0) {
    const mass = `${formatFigure(sum(masses), 0, facts.locale)}\u00a0kg`
    pen.line(`${say('documents.massTotal')}: ${mass}`, {
      x: 0,
      right: margin + pen.width,
      y: pen.y - 12,
      size: 9.5,
    })
  }
  pen.y -= 26
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

/** Page x of y and, on the last page, the code that leads to the check of this paper. */
function drawFooters(pen: PdfPen, facts: ManifestFacts, factsSha256: string): void {
  const pages = pen.pages.length
  pen.pages.forEach((page, index) => {
    const text = [
      say('documents.page', { page: index + 1, pages }),
      facts.number,
      say('documents.code', { code: factsSha256.slice(0, 16) }),
    ].join('   ·   ')
    page.drawText(text, { x: margin, y: 30, size: 8.5, font: pen.faces.text.main, color: black })
    drawQr(page, `${facts.publicUrl}/verify/${factsSha256}`, margin + pen.width - 50, 22, 50)
  })
}

function drawQr(page: PdfPen['page'], text: string, x: number, y: number, side: number): void {
  const { modules } = createQr(text, { errorCorrectionLevel: 'M' })
  const unit = side / modules.size
  let path = ''
  for (let row = 0; row < modules.size; row += 1) {
    for (let column = 0; column < modules.size; column += 1) {
      if (modules.get(row, column)) {
        path += `M${(column * unit).toFixed(3)} ${(row * unit).toFixed(3)}h${unit.toFixed(3)}v${unit.toFixed(3)}h-${unit.toFixed(3)}z`
      }
    }
  }
  page.drawSvgPath(path, { x, y: y + side, color: black, borderWidth: 0 })
}
