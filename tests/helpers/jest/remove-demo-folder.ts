import { rmSync } from 'node:fs'
import { demoFolderVariable } from '../../browser/product'

export default function removeDemoFolder(): void {
  const folder = process.env[demoFolderVariable]
  if (folder !== undefined) rmSync(folder, { recursive: true, force: true })
}
