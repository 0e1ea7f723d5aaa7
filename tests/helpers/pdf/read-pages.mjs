import jsqr from 'jsqr'
import { getDocument, OPS, VerbosityLevel } from 'pdfjs-dist/legacy/build/pdf.mjs'

/** Pixels a point at which pages are drawn: 144 dots an inch. */
const scale = 2
const darkest = 110

/**
 * Reads a PDF with a reader that had no part in writing it: its words as text, and its pages as they look.
 * Runs outside jest's own module world; takes and gives plain values only.
 */
export async function readPages(base64) {
  const data = new Uint8Array(Buffer.from(base64, 'base64'))
  const task = getDocument({ data, verbosity: VerbosityLevel.ERRORS, disableFontFace: true })
  const document = await task.promise
  const { info } = await document.getMetadata()
  const pages = []
  for (let number = 1; number <= document.numPages; number += 1) {
    pages.push(await readPage(await document.getPage(number), document.canvasFactory))
  }
  await task.destroy()
  return { title: info.Title, producer: info.Producer, madeAt: info.CreationDate, pages }
}

async function readPage(page, canvasFactory) {
  const viewport = page.getViewport({ scale })
  const { canvas, context } = canvasFactory.create(
    Math.ceil(viewport.width),
    Math.ceil(viewport.height),
  )
  await page.render({ canvasContext: context, viewport, canvas }).promise
  const image = context.getImageData(0, 0, canvas.width, canvas.height)
  const { items } = await page.getTextContent()
  const operators = await page.getOperatorList()
  const texts = items
    .filter(({ str }) => str.trim() !== '')
    .map((item) => ({
      text: item.str,
      size: item.height,
      left: item.transform[4],
      right: item.transform[4] + item.width,
      bottom: item.transform[5],
      ink: inkOf(item, image, viewport),
    }))
  return {
    width: viewport.width / scale,
    height: viewport.height / scale,
    text: texts.map(({ text }) => text).join('\n'),
    texts,
    fonts: fontsOf(page, operators),
    /** Lines, fills and strokes: rules, the QR code, drawn signatures. */
    paths: operators.fnArray.filter((operator) => operator === OPS.constructPath).length,
    qr: jsqr(image.data, image.width, image.height)?.data ?? null,
  }
}

/** How much of a text's length has ink in it, of 1: glyphs that are in the file but do not show leave none. */
function inkOf(item, image, viewport) {
  const [left, top] = viewport.convertToViewportPoint(
    item.transform[4],
    item.transform[5] + item.height,
  )
  const [right, bottom] = viewport.convertToViewportPoint(
    item.transform[4] + item.width,
    item.transform[5] - item.height * 0.25,
  )
  let inked = 0
  let columns = 0
  for (let x = Math.floor(left); x < Math.ceil(right); x += 1) {
    columns += 1
    for (let y = Math.floor(top); y < Math.ceil(bottom); y += 1) {
      if (image.data[(y * image.width + x) * 4] < darkest) {
        inked += 1
        break
      }
    }
  }
  const letters = item.str.replaceAll(/[\s\u00a0]/g, '').length
  return inked / columns / (letters / item.str.length)
}

function fontsOf(page, { fnArray, argsArray }) {
  const names = new Set()
  fnArray.forEach((operator, index) => {
    if (operator === OPS.setFont) names.add(page.commonObjs.get(argsArray[index][0]).name)
  })
  return [...names]
}
