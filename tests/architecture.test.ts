import { basename } from 'node:path'
import ts from 'typescript'
import { catalogueKeys, namedKeys } from './helpers/sources/catalogue-keys'
import { findCycles, reachedFrom } from './helpers/sources/find-cycles'
import { findVisibleWords } from './helpers/sources/find-visible-words'
import {
  filesBelow,
  lineOf,
  readSources,
  readText,
  sourceFolders,
  topFolderOf,
  visit,
  type Import,
  type Source,
} from './helpers/sources/read-sources'

const everything = readSources()
const sources = everything.filter(({ path }) => topFolderOf(path) !== 'tests')
const tests = everything.filter(({ path }) => topFolderOf(path) === 'tests')

/** Two columns that meet only in shared/. */
const mayImport: Record<string, readonly string[]> = {
  app: ['app', 'modules', 'shared', 'fonts'],
  modules: ['modules', 'shared', 'fonts'],
  shared: ['shared'],
  server: ['server', 'db', 'shared', 'package.json'],
  db: ['db', 'shared'],
}

/** Features meet in app/, not in each other. */
const modulesForAll = ['ui', 'api', 'session', 'offline']
/** Server areas that others build on; the demo company is made by calling everybody's acts. */
const areasForAll = ['http', 'book', 'files', 'mail', 'audit', 'limits', 'people', 'documents']
/** What else one area may take from another: how a record looks (present-*), and these files. */
const filesForAll = ['server/drains/raise-marks.ts']
const areasOfEverything = ['demo', 'jobs']

const react = /^(react|react-dom|react-native|expo|swr|react-hook-form|react-i18next)($|[-/])/
const database = /^(drizzle-orm|pg|@electric-sql\/pglite)($|\/)/
const webServer = /^(express|passport|helmet|pino|nodemailer|cookie-parser)($|[-/])/
const node = /^node:/
const banned: Record<string, readonly RegExp[]> = {
  app: [database, webServer, node],
  modules: [database, webServer, node],
  shared: [react, database, webServer, node],
  server: [react],
  db: [react, webServer],
}

function edges(keep: (source: Source, found: Import) => boolean, of = sources): string[] {
  return of.flatMap((source) =>
    source.imports
      .filter((found) => keep(source, found))
      .map(({ line, specifier }) => `${source.path}:${line} imports ${specifier}`),
  )
}

/** The folder inside a top folder: `drains` of modules/drains/drain-form.tsx; '' of a file directly in it. */
function areaOf(path: string): string {
  const parts = path.split('/')
  return parts.length > 2 ? (parts[1] ?? '') : ''
}

test('imports run app -> modules -> shared and server -> db -> shared', () => {
  const wrong = edges(({ path }, { file }) => {
    if (file === undefined) return false
    return !mayImport[topFolderOf(path)]?.includes(topFolderOf(file) || file)
  })
  expect(wrong).toEqual([])
})

test('a module imports of the others only ui, api, session and offline', () => {
  const wrong = edges(({ path }, { file }) => {
    if (file === undefined || topFolderOf(path) !== 'modules' || topFolderOf(file) !== 'modules')
      return false
    return areaOf(path) !== areaOf(file) && !modulesForAll.includes(areaOf(file))
  })
  expect(wrong).toEqual([])
})

test('an area of the server imports of the others only what all build on', () => {
  const wrong = edges(({ path }, { file }) => {
    if (file === undefined || topFolderOf(path) !== 'server' || topFolderOf(file) !== 'server')
      return false
    const [from, to] = [areaOf(path), areaOf(file)]
    if (from === '' || to === '' || from === to || areasOfEverything.includes(from)) return false
    return !areasForAll.includes(to) && !filesForAll.includes(file) && !/\/present-/.test(file)
  })
  expect(wrong).toEqual([])
})

test('packages stay on their side', () => {
  const wrong = edges(({ path }, { file, specifier }) => {
    if (file !== undefined) return false
    return (banned[topFolderOf(path)] ?? []).some((pattern) => pattern.test(specifier))
  })
  expect(wrong).toEqual([])
})

test('a crossing import is written @/..., an inner one is relative', () => {
  const wrong = edges(({ path }, { file, specifier }) => {
    if (file === undefined) return false
    return (topFolderOf(path) !== topFolderOf(file)) !== specifier.startsWith('@/')
  })
  expect(wrong).toEqual([])
})

test('imports make no cycle', () => {
  expect(findCycles(sources)).toEqual([])
})

test('default exports live in app/ only', () => {
  const isDefault = (statement: ts.Statement): boolean =>
    ts.isExportAssignment(statement) ||
    (ts.canHaveModifiers(statement) &&
      (ts.getModifiers(statement) ?? []).some(({ kind }) => kind === ts.SyntaxKind.DefaultKeyword))
  const wrong = everything
    // jest's global set-up is asked for as a default export.
    .filter(({ path }) => topFolderOf(path) !== 'app' && !path.startsWith('tests/helpers/jest/'))
    .filter(({ tree }) => tree.statements.some(isDefault))
    .map(({ path }) => path)
  expect(wrong).toEqual([])
})

test('every source file is reached from a route or from an entry point of the server', () => {
  const entries = everything
    .map(({ path }) => path)
    .filter((path) => path.startsWith('app/') || path.startsWith('db/schema/'))
  // Metro puts this one in the place of a package's own file.
  const named = readText('metro.config.js').match(/modules\/[\w/-]+\.ts/g) ?? []
  const reached = reachedFrom(everything, [
    ...entries,
    ...named,
    'server/launch.mjs',
    'server/main.ts',
    'server/check-book.ts',
  ])
  const files = sourceFolders
    .flatMap(filesBelow)
    .filter((path) => !path.startsWith('db/migrations/'))
  expect(files.filter((path) => !reached.has(path))).toEqual([])
})

test('every file of the tests is a test or serves one', () => {
  const isTest = (path: string) => /\.(test|bench)\.tsx?$/.test(path)
  const named = [...tests.map(({ path }) => path), 'jest.config.js', 'package.json']
    .map(readText)
    .join('\n')
  const reached = reachedFrom(everything, tests.map(({ path }) => path).filter(isTest))
  const idle = tests
    .map(({ path }) => path)
    // A file that is started as a process, or by jest, is named instead of imported.
    .filter(
      (path) =>
        !path.endsWith('.d.ts') &&
        !reached.has(path) &&
        !named.includes(basename(path).replace(/\.tsx?$/, '')),
    )
  expect(idle).toEqual([])
})

test('no test is left out or run alone', () => {
  const wrong: string[] = []
  for (const { path, tree } of tests) {
    visit(tree, (found) => {
      const isPicked =
        ts.isPropertyAccessExpression(found) &&
        /^(only|skip|todo|failing)$/.test(found.name.text) &&
        /^(test|it|describe)\b/.test(found.expression.getText(tree))
      const isOldWay =
        ts.isCallExpression(found) &&
        /^(xit|xtest|xdescribe|fit|fdescribe)$/.test(found.expression.getText(tree))
      if (isPicked || isOldWay) wrong.push(`${path}:${lineOf(tree, found)}`)
    })
  }
  expect(wrong).toEqual([])
})

test('no file is named for nothing in particular', () => {
  const vague = /(^|\/)(utils?|helpers?|common|types?|misc|index)\.tsx?$/
  const wrong = everything
    .map(({ path }) => path)
    .filter((path) => vague.test(path) && !/^app\/.*index\.tsx$/.test(path))
  expect(wrong).toEqual([])
})

test('files are named in kebab-case', () => {
  const wrong = sources
    .map(({ path }) => path)
    // app/ follows the segments of addresses: (app), [id], _layout, +html.
    .filter((path) => topFolderOf(path) !== 'app' && !/^[a-z0-9/.-]+$/.test(path))
  expect(wrong).toEqual([])
})

describe('words a person sees come from the catalogue', () => {
  const screens = sources.filter(({ path }) => ['app', 'modules'].includes(topFolderOf(path)))
  const keys = catalogueKeys()
  const named = namedKeys(sources)

  test('none is written into a screen', () => {
    expect(screens.flatMap(findVisibleWords)).toEqual([])
  })

  test('every key asked for is there', () => {
    const missing = named.asked.filter(({ key }) => !keys.has(key))
    const empty = named.patterns.filter(
      ({ pattern, isAsked }) => isAsked && ![...keys].some((key) => pattern.test(key)),
    )
    expect([
      ...missing.map(({ key, where }) => `${where} ${key}`),
      ...empty.map(({ pattern, where }) => `${where} ${pattern.source}`),
    ]).toEqual([])
  })

  test('every key is asked for', () => {
    const patterns = [...new Set(named.patterns.map(({ pattern }) => pattern.source))].map(
      (source) => new RegExp(source),
    )
    const idle = [...keys].filter(
      (key) => !named.literals.has(key) && !patterns.some((pattern) => pattern.test(key)),
    )
    expect(idle).toEqual([])
  })
})
