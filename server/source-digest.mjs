import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join, resolve } from 'node:path'

export const root = resolve(import.meta.dirname, '..')
/** Inside node_modules, so that a new installation forgets what was built with the old one. */
const stamps = join(root, 'node_modules/.cache/ebbmark')

/**
 * Whether the files below the paths differ from those of the last `keep()`. Names, sizes and times are compared first,
 * so a start with nothing changed reads no file; when times differ (a checkout sets new ones) the contents decide.
 */
export function compareSources(name, paths) {
  const files = paths.flatMap(filesAt).sort()
  const looks = digest(files, (file) => {
    const { size, mtimeMs } = statSync(file)
    return `${size} ${mtimeMs}`
  })
  const [oldLooks, oldContents] = readStamp(name)
  if (looks === oldLooks) return { isChanged: false, keep: () => undefined }
  const contents = digest(files, (file) => readFileSync(file))
  const keep = () => writeStamp(name, looks, contents)
  if (contents !== oldContents) return { isChanged: true, keep }
  keep()
  return { isChanged: false, keep }
}

/** All files below a folder, with their full paths. */
export function filesBelow(folder) {
  return readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath ?? entry.path, entry.name))
}

function filesAt(path) {
  const full = join(root, path)
  if (!existsSync(full)) return []
  return statSync(full).isDirectory() ? filesBelow(full) : [full]
}

function digest(files, of) {
  const hash = createHash('sha256')
  for (const file of files)
    hash
      .update(`${file.slice(root.length)}\0`)
      .update(of(file))
      .update('\n')
  return hash.digest('hex')
}

function readStamp(name) {
  try {
    return readFileSync(join(stamps, name), 'utf8').split('\n')
  } catch {
    return []
  }
}

function writeStamp(name, ...lines) {
  mkdirSync(stamps, { recursive: true })
  writeFileSync(join(stamps, name), lines.join('\n'))
}
