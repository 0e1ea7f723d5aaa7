import { LineCapStyle, rgb } from 'pdf-lib'
import { say } from '../../words'
import type { ManifestFacts } from './manifest-facts'
import { shownInstant } from './shown-instant'
import { margin, type PdfPen } from './pdf-pen'

const gap = 24
const drawn = { width: 150, height: 60 }

/** Two signature fields side by side: drawn lines, a typed name, or a line to sign on. */
export function drawSignatures(pen: PdfPen, facts: ManifestFacts): void {
  const width = (pen.width - gap) / 2
  const parties = (['generator', 'driver'] as const).map((party) => ({
    party,
    signature: facts.signatures.find((signature) => signature.party === party),
  }))
  const height =
    165 +
    Math.max(
      ...parties.map(({ signature }) =>
        signature?.dispute ? pen.heightOf(signature.dispute, width, 9) + 14 : 0,
      ),
    )
  pen.need(height)
  pen.y -= pen.block(say('documents.signatures.title'), {
    x: margin,
    width: pen.width,
    y: pen.y,
    face: 'heading',
    size: 12,
  })
  pen.y -=
    pen.block(say('documents.signatures.meaning'), {
      x: margin,
      width: pen.width,
      y: pen.y,
      size: 9,
    }) + 4
  const top = pen.y
  const bottoms = parties.map(({ party, signature }, index) =>
    drawField(pen, party, signature, margin + index * (width + gap), width, top),
  )
  pen.y = Math.min(...bottoms) - 8
}

function drawField(
  pen: PdfPen,
  party: 'generator' | 'driver',
  signature: ManifestFacts['signatures'][number] | undefined,
  x: number,
  width: number,
  top: number,
): number {
  let y = top
  y -= pen.block(say(`documents.signatures.${party}`), { x, width, y, face: 'bold' })
  const lineAt = y - drawn.height
  if (signature?.strokes) drawStrokes(pen, signature.strokes, x, lineAt)
  else if (signature !== undefined)
    pen.line(signature.name, { x: x + 10, y: lineAt + 10, size: 18, face: 'heading' })
  pen.levelLine(lineAt, x, x + width)
  y = lineAt - 4
  if (signature === undefined) {
    return y - pen.block(say('documents.signatures.blank'), { x, width, y, size: 9 })
  }
  const words = [
    [signature.name, signature.capacity].filter(Boolean).join(', '),
    `${say('documents.signatures.signedAt')} ${shownInstant(signature.signedAt)}`,
    ...(signature.strokes === null ? [say('documents.signatures.typed')] : []),
    ...(signature.dispute === ''
      ? []
      : [say('documents.signatures.dispute', { text: signature.dispute })]),
    say('documents.signatures.read', { hash: `${signature.documentSha256.slice(0, 16)}…` }),
  ]
  for (const [index, line] of words.entries()) {
    y -= pen.block(line, { x, width, y, size: index === 0 ? 10.5 : 8.5 })
  }
  return y
}

/** Strokes of a 1000 x 400 box, drawn as lines: no picture, sharp at any size. */
function drawStrokes(
  pen: PdfPen,
  strokes: readonly (readonly [number, number])[][],
  x: number,
  y: number,
): void {
  const scale = drawn.width / 1000
  const path = strokes
    .map((stroke) =>
      stroke
        // A stroke of one point is a dot: a line to itself, which the round end makes visible.
        .concat(stroke.length === 1 ? stroke : [])
        .map(
          ([px, py], index) =>
            `${index === 0 ? 'M' : 'L'}${(px * scale).toFixed(2)} ${(py * scale).toFixed(2)}`,
        )
        .join(''),
    )
    .join('')
  pen.page.drawSvgPath(path, {
    x,
    y: y + drawn.height,
    borderColor: rgb(0, 0, 0),
    borderWidth: 1.1,
    borderLineCap: LineCapStyle.Round,
  })
}
