import { readFileSync } from 'node:fs'
import fontkit from '@pdf-lib/fontkit'
import { PDFDocument } from 'pdf-lib'
import { drawManifest } from '@/server/pickups/pdf/draw-manifest'
import { factsOf } from '../helpers/pdf/manifest-facts'
import { medianOf, report } from './report'
import { timed } from './statements'

/** One manifest of six lines, against an empty document with the same fonts embedded. */
async function main(): Promise<void> {
  const facts = factsOf(6)
  const median = medianOf(await timed(20, () => drawManifest(facts, '0'.repeat(64))))
  const floor = medianOf(
    await timed(20, async () => {
      const document = await PDFDocument.create()
      document.registerFontkit(fontkit)
      const page = document.addPage()
      for (const name of ['text-400', 'text-700', 'code-400', 'heading-600']) {
        const font = await document.embedFont(readFileSync(`fonts/${name}.ttf`), { subset: true })
        page.drawText('Manifest', { font })
      }
      await document.save()
    }),
  )
  report({ name: 'one manifest PDF of six lines', unit: 'ms', median, floor, aim: 'below 200 ms' })
}

void main()
