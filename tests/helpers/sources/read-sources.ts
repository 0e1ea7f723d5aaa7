import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs'
import { dirname, join, relative, resolve } from 'node:path'
import ts from 'typescript'

export const root = resolve(__dirname, '../../..')
export const sourceFolders = ['app', 'modules', 'shared', 'server', 'db'] as const

export type Import = {
  specifier: string
  line: number
  /** Path from the root of the file it means, or undefined of a package. */
  file: string | undefined
  isTypeOnly: boolean
}

export type Source = {
  /** Path from the root, with slashes. */
  path: string
  tree: ts.SourceFile
  imports: Import[]
}

/** Every source and test file, parsed once. JSON files that sources import are named by their imports. */
export function readSources(): Source[] {
  return [...sourceFolders, 'tests'].flatMap((folder) =>
    filesBelow(folder)
      .filter((path) => /\.(tsx?|[cm]?js)$/.test(path))
      .map(parse),
  )
}

/** Paths from the root of all files below one of its folders. */
export function filesBelow(folder: string): string[] {
  const full = join(root, folder)
  if (!existsSync(full)) return []
  return readdirSync(full, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => relative(root, join(entry.parentPath, entry.name)).replaceAll('\\', '/'))
    .sort()
}

export function readText(path: string): string {
  return readFileSync(join(root, path), 'utf8')
}

export function topFolderOf(path: string): string {
  return path.includes('/') ? (path.split('/')[0] ?? '') : ''
}

/** Line of a node, counted from 1. */
export function lineOf(tree: ts.SourceFile, node: ts.Node): number {
  return tree.getLineAndCharacterOfPosition(node.getStart(tree)).line + 1
}

export function visit(node: ts.Node, see: (node: ts.Node) => void): void {
  see(node)
  ts.forEachChild(node, (child) => visit(child, see))
}

function parse(path: string): Source {
  const tree = ts.createSourceFile(path, readText(path), ts.ScriptTarget.Latest, true)
  const imports: Import[] = []
  visit(tree, (node) => {
    const found = importIn(node)
    if (found === undefined) return
    const { specifier, isTypeOnly } = found
    imports.push({
      specifier,
      line: lineOf(tree, node),
      file: fileOf(path, specifier),
      isTypeOnly,
    })
  })
  return { path, tree, imports }
}

function importIn(node: ts.Node): { specifier: string; isTypeOnly: boolean } | undefined {
  if (ts.isImportDeclaration(node) && ts.isStringLiteral(node.moduleSpecifier)) {
    return { specifier: node.moduleSpecifier.text, isTypeOnly: bringsTypesOnly(node.importClause) }
  }
  if (
    ts.isExportDeclaration(node) &&
    node.moduleSpecifier &&
    ts.isStringLiteral(node.moduleSpecifier)
  ) {
    return { specifier: node.moduleSpecifier.text, isTypeOnly: node.isTypeOnly }
  }
  if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) {
    const { literal } = node.argument
    return ts.isStringLiteral(literal) ? { specifier: literal.text, isTypeOnly: true } : undefined
  }
  if (!ts.isCallExpression(node)) return undefined
  const isLoad =
    node.expression.kind === ts.SyntaxKind.ImportKeyword ||
    (ts.isIdentifier(node.expression) && node.expression.text === 'require')
  const [named] = node.arguments
  return isLoad && named !== undefined && ts.isStringLiteral(named)
    ? { specifier: named.text, isTypeOnly: false }
    : undefined
}

function bringsTypesOnly(clause: ts.ImportClause | undefined): boolean {
  if (clause === undefined) return false
  if (clause.phaseModifier === ts.SyntaxKind.TypeKeyword) return true
  const named = clause.namedBindings
  if (clause.name !== undefined || named === undefined || !ts.isNamedImports(named)) return false
  return named.elements.length > 0 && named.elements.every(({ isTypeOnly }) => isTypeOnly)
}

const endings = ['', '.ts', '.tsx', '.web.ts', '.web.tsx', '.mjs', '.js', '.cjs', '/index.ts']

function fileOf(from: string, specifier: string): string | undefined {
  const isOwn = specifier.startsWith('@/')
  if (!isOwn && !specifier.startsWith('.')) return undefined
  const base = isOwn ? join(root, specifier.slice(2)) : resolve(root, dirname(from), specifier)
  const found = endings
    .map((ending) => base + ending)
    .find((path) => existsSync(path) && statSync(path).isFile())
  return relative(root, found ?? base).replaceAll('\\', '/')
}
