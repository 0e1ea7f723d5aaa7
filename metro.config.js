const { getDefaultConfig } = require('expo/metro-config')

const config = getDefaultConfig(__dirname)

// zod brings the messages of forty languages; ours come from the catalogue, so only its English stays in the bundle.
const resolve = config.resolver.resolveRequest
config.resolver.resolveRequest = (context, name, platform) => {
  const isZodLocales =
    /[\\/]node_modules[\\/]zod[\\/]/.test(context.originModulePath) &&
    /(^|\/)locales\/index\.c?js$/.test(name)
  if (isZodLocales)
    return { type: 'sourceFile', filePath: require.resolve('./modules/api/zod-locales.ts') }
  return (resolve ?? context.resolveRequest)(context, name, platform)
}

module.exports = config
