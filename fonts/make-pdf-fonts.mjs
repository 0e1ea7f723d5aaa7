import { readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import subsetFont from 'subset-font'

/**
 * Makes the TrueType files that PDFs embed from the web fonts: latin only, at fixed weights. PDF writers damage fonts
 * that they subset themselves from a full file, so the cut is made once, here, and committed.
 */
const here = import.meta.dirname
const characters = [
  ...range(0x20, 0x7e),
  ...range(0xa0, 0xff),
  ...[
    0x2013, 0x2014, 0x2018, 0x2019, 0x201c, 0x201d, 0x2022, 0x2026, 0x2212, 0x20ac, 0x131, 0x152,
    0x153,
  ],
]
// Letters of central and northern Europe come from a second file of the same face.
const furtherLatin = [...range(0x100, 0x24f), ...range(0x1e00, 0x1eff)]
const fonts = [
  ['atkinson-hyperlegible-next-latin-wght-normal', 'text-400', { wght: 400 }],
  ['atkinson-hyperlegible-next-latin-wght-normal', 'text-700', { wght: 700 }],
  ['atkinson-hyperlegible-mono-latin-wght-normal', 'code-400', { wght: 400 }],
  ['barlow-semi-condensed-latin-600-normal', 'heading-600', undefined],
  ['atkinson-hyperlegible-next-latin-ext-wght-normal', 'text-ext-400', { wght: 400 }, furtherLatin],
  ['atkinson-hyperlegible-next-latin-ext-wght-normal', 'text-ext-700', { wght: 700 }, furtherLatin],
  ['barlow-semi-condensed-latin-ext-600-normal', 'heading-ext-600', undefined, furtherLatin],
]

function range(from, to) {
  return Array.from({ length: to - from + 1 }, (_, index) => from + index)
}

for (const [from, to, variationAxes, taken = characters] of fonts) {
  const bytes = await subsetFont(
    readFileSync(join(here, `${from}.woff2`)),
    String.fromCodePoint(...taken),
    {
      targetFormat: 'truetype',
      ...(variationAxes === undefined ? {} : { variationAxes }),
    },
  )
  writeFileSync(join(here, `${to}.ttf`), bytes)
}
