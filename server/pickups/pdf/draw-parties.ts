import { say } from '../../words'
import type { ManifestFacts } from './manifest-facts'
import { margin, type PdfPen } from './pdf-pen'

/** Who hands over, who carries, who receives, side by side; and the note under them. */
export function drawParties(pen: PdfPen, facts: ManifestFacts): void {
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
    pen.flow(`${say('documents.note')}: ${facts.note}`, 9.5)
    pen.y -= 6
  }
}

function siteLines({ organisation, site }: ManifestFacts): string[] {
  return [
    `${organisation.name}, ${site.name} (${site.code})`,
    `${say('documents.identification')}: ${site.identificationNumber || say('documents.none')}`,
    ...[addressOf(site.address), site.phone || organisation.phone, organisation.email].filter(
      (line) => line !== '',
    ),
  ]
}

function partyLines(party: Omit<ManifestFacts['facility'], never>): string[] {
  return [
    party.name,
    `${say('documents.identification')}: ${party.identificationNumber}`,
    ...[addressOf(party.address), party.phone, party.email].filter((line) => line !== ''),
    ...(party.contactName === '' ? [] : [`${say('documents.contact')}: ${party.contactName}`]),
  ]
}

/** An address as typed, or run on when it would be as tall as a page. */
function addressOf(typed: string): string {
  const lines = typed
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '')
  return lines.join(lines.length > 5 ? ', ' : '\n')
}

function haulerLines({ hauler }: ManifestFacts): string[] {
  const [name = '', identification = '', ...rest] = partyLines(hauler)
  const permit = hauler.permit === null ? [] : [say('documents.permit', hauler.permit)]
  return [name, identification, ...permit, ...rest]
}
