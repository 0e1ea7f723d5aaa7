const { createHash } = require('node:crypto')
const { readFileSync } = require('node:fs')
const { transformSync, version } = require('esbuild')

const own = readFileSync(__filename)

/** TypeScript to CommonJS by esbuild, as the server is built; types are checked elsewhere. */
module.exports = {
  process(source, path) {
    const { code, map } = transformSync(source, {
      loader: path.endsWith('x') ? 'tsx' : 'ts',
      jsx: 'automatic',
      format: 'cjs',
      target: 'node20',
      platform: 'node',
      sourcemap: 'external',
      sourcefile: path,
      // jest resolves require; a real import() would leave its module world.
      supported: { 'dynamic-import': false },
    })
    return { code, map }
  },
  getCacheKey(source, path) {
    return createHash('sha256')
      .update(own)
      .update(version)
      .update(path)
      .update('\0')
      .update(source)
      .digest('hex')
  },
}
