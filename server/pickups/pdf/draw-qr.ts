import { rgb, type PDFPage } from 'pdf-lib'
import { create } from 'qrcode'

/** Side of the code on paper, in points (20 mm): a module of a 50-module code is 0.4 mm. */
export const qrSide = 56

/** A QR code as one filled path, with neighbours in a row joined so that no hairline shows between them. */
export function drawQr(page: PDFPage, text: string, x: number, y: number): void {
  const { modules } = create(text, { errorCorrectionLevel: 'M' })
  const unit = qrSide / modules.size
  const at = (modulesAlong: number) => (modulesAlong * unit).toFixed(3)
  let path = ''
  for (let row = 0; row < modules.size; row += 1) {
    let column = 0
    while (column < modules.size) {
      const start = column
      while (column < modules.size && modules.get(row, column)) column += 1
      if (column > start)
        path += `M${at(start)} ${at(row)}H${at(column)}V${at(row + 1)}H${at(start)}z`
      column += 1
    }
  }
  page.drawSvgPath(path, { x, y: y + qrSide, color: rgb(0, 0, 0), borderWidth: 0 })
}
