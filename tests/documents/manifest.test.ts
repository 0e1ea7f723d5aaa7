import { PDFDict, PDFDocument, PDFName } from 'pdf-lib'
import { contentHash } from '@/server/content-hash'
import { drawManifest } from '@/server/pickups/pdf/draw-manifest'
import type { ManifestFacts } from '@/server/pickups/pdf/manifest-facts'
import { factsLine, factsOf, factsSignature } from '../helpers/pdf/manifest-facts'
import { readPdf, wordsOf } from '../helpers/pdf/read-pdf'

const draw = async (facts: ManifestFacts) => drawManifest(facts, contentHash(facts))
const read = async (facts: ManifestFacts) => readPdf((await draw(facts)).bytes)
const strokes: [number, number][][] = [
  [
    [60, 200],
    [300, 80],
    [500, 320],
  ],
  [[900, 100]],
]

test('the paper names the parties, their numbers, the permit, the load and what it is not', async () => {
  const { title, producer, madeAt, pages } = await read(
    factsOf(1, { orderNumber: 'PO-7781', note: 'Gate 2, ring first' }),
  )
  expect([title, producer, madeAt]).toEqual([
    'Manifest P-S1-25-004-K',
    'Ebbmark',
    'D:20250926141200Z',
  ])
  expect(pages).toHaveLength(1)
  const words = wordsOf(pages[0])
  for (const fact of [
    'Company pickup record · not a government form',
    'Manifest · Issued',
    'P-S1-25-004-K',
    'Pickup day: Sat 27 Sep 2025',
    'Issued 2025-09-26 09:12 -05:00 by Olga Invented',
    'Order: PO-7781',
    'Note: Gate 2, ring first',
    'Lower Yard (S1)',
    'ID number: INV-ZZG000000001',
    'Invented Tankers',
    'Permit INV-0001, current to 2025-12-31',
    'ID number: INV-ZZD000000001',
    'Invented Recovery',
    'C-201',
    'drum',
    'Used mineral hydraulic fluid',
    'USED OIL · 13 01 10',
    '48.125 gal',
    '159 kg',
    'at 0.875 kg/L',
    'Total: 48.125 gal',
    'Nobody pumps before the test result is written down.',
    'Ask a licensed or competent person when unsure.',
    'Signature, name, date and time',
    'Page 1 of 1',
  ]) {
    expect(words).toContain(fact)
  }
})

test('it gives no verdict, shows no draft and asks for no official number', async () => {
  const words = wordsOf((await read(factsOf(2))).pages[0])
  expect(words).not.toMatch(/compliant|hazardous|exempt|draft|certif|EPA|8700/i)
})

test.each([
  [1, 1],
  [40, 3],
  [200, 12],
])('%i lines flow over %i pages, each with its head and its number', async (count, expected) => {
  const facts = factsOf(count)
  const { bytes, pages: drawn } = await draw(facts)
  const { pages } = await readPdf(bytes)
  expect([drawn, pages.length]).toEqual([expected, expected])
  const codes = pages.flatMap(({ texts }) =>
    texts.flatMap(({ text }) => (/^C-\d+$/.test(text) ? [text] : [])),
  )
  expect(codes).toEqual(facts.lines.map(({ containerCode }) => containerCode))
  pages.forEach((page, index) => {
    const words = wordsOf(page)
    expect(words).toContain('not a government form')
    expect(words).toContain(`Page ${index + 1} of ${expected}`)
    expect(words).toContain('P-S1-25-004-K')
    expect(page.qr).toBe(`https://ebbmark.example.org/verify/${contentHash(facts)}`)
    expect(words).toContain(`/verify/${contentHash(facts).slice(0, 16)}`)
    if (words.includes('C-2')) expect(words).toContain('Estimated mass')
  })
})

test('every run of text shows: the glyphs are in the file and on the page', async () => {
  const accents = 'Łódź, Příliš žluťoučký kůň, Ærø, Straße, Ñandú, œuvre'
  const facts = factsOf(3, {
    note: accents,
    kind: 'signed-manifest',
    signatures: [factsSignature('generator'), factsSignature('driver', { dispute: 'Seal broken' })],
  })
  const { pages } = await read(facts)
  const runs = pages.flatMap(({ texts }) => texts).filter(({ text }) => /\w{2}/.test(text))
  expect(runs.length).toBeGreaterThan(60)
  expect(runs.filter(({ ink }) => ink < 0.5).map(({ text }) => text)).toEqual([])
  const shown = pages.map(({ text }) => text.replaceAll(/\s/g, '')).join('')
  expect(shown).toContain(accents.replaceAll(' ', ''))
  expect(shown).not.toContain('?')
})

test('nothing runs off the paper or into what stands beside it, however long it is', async () => {
  const long =
    'Extraordinarily Long Named Tanker and Recovery Partnership of the Lower Valley '.repeat(2)
  const facts = factsOf(1, {
    number: 'P-ABCDEFGHIJKLMNOP-25-004-K',
    organisation: { name: long.slice(0, 120), email: 'office@works.example.org', phone: '' },
    site: { ...factsOf(1).site, address: 'a\n'.repeat(150), name: long.slice(0, 80) },
    facility: { ...factsOf(1).facility, name: 'Altölverwertungsanstaltswerkstatt'.repeat(3) },
    note: 'a line of a note\n'.repeat(70),
    lines: [
      factsLine(1, { value: '12345678.12345', unit: 'fl_oz_us', containerDescription: long }),
      ...['mL', 'm3', 'pint_us', 'quart_us', 'bbl_petroleum'].map((unit, index) =>
        factsLine(index + 2, { value: '12345678.12345', unit }),
      ),
    ],
  })
  const { pages } = await read(facts)
  for (const { width, height, texts } of pages) {
    for (const { text, left, right, bottom, size } of texts) {
      expect([text, left >= 41, right <= width - 41]).toEqual([text, true, true])
      expect([text, bottom >= 28, bottom + size <= height - 30]).toEqual([text, true, true])
    }
    const clashes = texts.flatMap((one, index) =>
      texts
        .slice(index + 1)
        .filter(
          (other) =>
            Math.abs(one.bottom - other.bottom) < 3 &&
            one.left < other.right - 0.5 &&
            other.left < one.right - 0.5,
        )
        .map((other) => `${one.text} | ${other.text}`),
    )
    expect(clashes).toEqual([])
  }
})

test('a mass is an estimate with its density, a weighed one, or not stated', async () => {
  const { pages } = await read(
    factsOf(0, {
      lines: [
        factsLine(1),
        factsLine(2, { stream: 'Used water-based fluid', density: null, massKilograms: null }),
        factsLine(3, {
          isFluid: false,
          value: '18.4',
          unit: 'kg',
          litres: '0',
          kilograms: '18.4',
          massKilograms: '18.4',
          density: null,
        }),
        factsLine(4, {
          isFluid: false,
          value: '0',
          unit: 'kg',
          litres: '0',
          pieces: 38,
          massKilograms: null,
          density: null,
        }),
      ],
    }),
  )
  const words = wordsOf(pages[0])
  expect(words).toContain('159 kg at 0.875 kg/L')
  expect(words).toContain('no density on record')
  expect(words).toContain('18.4 kg weighed')
  expect(words).toContain('38 pieces')
  expect(words).toContain('Total: 96.25 gal 18.4 kg 38 pieces')
  expect(words).toContain('Mass of the lines that state one: 178 kg')
})

test('signatures are drawn lines or a typed name, with time, offset and dispute', async () => {
  const unsigned = await read(factsOf(1))
  const { pages } = await read(
    factsOf(1, {
      kind: 'signed-manifest',
      revision: 2,
      signatures: [
        factsSignature('generator', { strokes }),
        factsSignature('driver', { dispute: 'Drum C-201 gauged at 40 gal by me.' }),
      ],
    }),
  )
  const words = wordsOf(pages[0])
  expect(words).toContain('Manifest · Signed')
  expect(words).toContain('Revision 2')
  expect(words).toContain('Olga Invented, EHS officer')
  expect(words).toContain('Signed 2025-09-27 10:31 -05:00')
  expect(words).toContain('Dispute: Drum C-201 gauged at 40 gal by me.')
  expect(words.match(/Signed by typed name/g)).toHaveLength(1)
  expect(words).not.toContain('Signature, name, date and time')
  expect((pages[0]?.paths ?? 0) - (unsigned.pages[0]?.paths ?? 0)).toBe(1)
})

test('a void paper says so on every page, with who and why', async () => {
  const { pages } = await read(
    factsOf(40, {
      kind: 'void-manifest',
      voided: { at: '2025-09-28T08:00:00-05:00', by: 'Olga Invented', reason: 'wrong hauler' },
    }),
  )
  expect(pages.length).toBeGreaterThan(1)
  for (const { texts } of pages) {
    expect(texts.filter(({ text }) => text === 'VOID')).toHaveLength(1)
  }
  expect(wordsOf(pages[0])).toContain(
    'Voided 2025-09-28 08:00 -05:00 by Olga Invented: wrong hauler',
  )
})

test('the paper is the profile’s: Letter or A4', async () => {
  const [letter, a4] = [
    await read(factsOf(1)),
    await read(factsOf(1, { paper: 'a4', locale: 'en-GB' })),
  ]
  expect([letter.pages[0]?.width, letter.pages[0]?.height]).toEqual([612, 792])
  expect([a4.pages[0]?.width, a4.pages[0]?.height]).toEqual([595.28, 841.89])
})

test('only the product’s own fonts, embedded', async () => {
  const { bytes } = await draw(factsOf(1, { note: 'Łódź' }))
  const { pages } = await readPdf(bytes)
  for (const font of pages.flatMap(({ fonts }) => fonts)) {
    expect(font).toMatch(/^(AtkinsonHyperlegible|BarlowSemiCondensed)/)
  }
  const objects = (await PDFDocument.load(bytes)).context.enumerateIndirectObjects()
  const ofType = (type: string) =>
    objects.flatMap(([, object]) =>
      object instanceof PDFDict && object.get(PDFName.of('Type')) === PDFName.of(type)
        ? [object]
        : [],
    )
  const descriptors = ofType('FontDescriptor')
  expect(descriptors.length).toBeGreaterThan(4)
  expect(descriptors.filter((one) => !one.has(PDFName.of('FontFile2')))).toEqual([])
  const kinds = ofType('Font').map((font) => String(font.get(PDFName.of('Subtype'))))
  expect(new Set(kinds)).toEqual(new Set(['/Type0', '/CIDFontType2']))
})

test('the same facts give the same bytes, and another fact gives others', async () => {
  const facts = factsOf(40, { signatures: [factsSignature('driver', { strokes })] })
  const [one, again] = [await draw(facts), await draw(structuredClone(facts))]
  expect(Buffer.from(one.bytes).equals(again.bytes)).toBe(true)
  const other = await draw({ ...facts, issuedBy: 'Somebody Else' })
  expect(Buffer.from(one.bytes).equals(other.bytes)).toBe(false)
})
