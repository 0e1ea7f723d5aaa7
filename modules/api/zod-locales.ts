/** Stands in for zod's list of languages in the web bundle (metro.config.js): its English alone. */
export { default as en } from 'zod/v4/locales/en.js'
