import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { demoFolderVariable, startProduct } from '../../browser/product'

/** Makes the demo company once, through the product's own first start; every browser test file copies it. */
export default async function makeDemoFolder(): Promise<void> {
  const dataFolder = mkdtempSync(join(tmpdir(), 'ebbmark-demo-'))
  const product = await startProduct({ dataFolder })
  await product.stop()
  process.env[demoFolderVariable] = dataFolder
}
