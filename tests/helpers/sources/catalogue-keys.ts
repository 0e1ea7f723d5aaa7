import { basename } from 'node:path'
import ts from 'typescript'
import { filesBelow, lineOf, readText, visit, type Source } from './read-sources'

/** Every key of the English catalogue, `area.key`, plural endings taken off. */
export function catalogueKeys(): Set<string> {
  const keys = new Set<string>()
  for (const path of filesBelow('shared/words/en')) {
    collect(basename(path, '.json'), JSON.parse(readText(path)), keys)
  }
  return keys
}

function collect(prefix: string, value: unknown, keys: Set<string>): void {
  if (typeof value !== 'object' || value === null) {
    keys.add(prefix.replace(/_(zero|one|two|few|many|other)$/, ''))
    return
  }
  for (const [name, inner] of Object.entries(value)) collect(`${prefix}.${name}`, inner, keys)
}

export type NamedKeys = {
  /** Keys asked of t() as they stand, with where. */
  asked: { key: string; where: string }[]
  /** Every literal that could name a key, wherever it is written. */
  literals: Set<string>
  /** Keys that are put together, as patterns: t(`drains.marks.${code}`) names every key that begins so. */
  patterns: { pattern: RegExp; where: string; isAsked: boolean }[]
}

/** What the sources name of the catalogue. */
export function namedKeys(sources: readonly Source[]): NamedKeys {
  const named: NamedKeys = { asked: [], literals: new Set(), patterns: [] }
  for (const { path, tree } of sources) {
    visit(tree, (node) => {
      const where = `${path}:${lineOf(tree, node)}`
      if (ts.isStringLiteral(node) || ts.isNoSubstitutionTemplateLiteral(node)) {
        named.literals.add(node.text)
        if (isAskedOfT(node)) named.asked.push({ key: node.text, where })
      }
      const pattern = ts.isTemplateExpression(node) ? patternOf(node) : undefined
      if (pattern !== undefined) named.patterns.push({ pattern, where, isAsked: isAskedOfT(node) })
    })
  }
  return named
}

/** Of a template that could make a key: what is written out has a dot, and nothing but what keys are made of. */
function patternOf({ head, templateSpans }: ts.TemplateExpression): RegExp | undefined {
  const written = [head, ...templateSpans.map(({ literal }) => literal)].map(({ text }) => text)
  const isKey =
    written.every((text) => /^[\w.-]*$/.test(text)) && /[a-z]\.|\.[a-z]/i.test(written.join(' '))
  if (!isKey) return undefined
  return new RegExp(`^${written.map((text) => text.replaceAll('.', '\\.')).join('.+')}$`)
}

/** First argument of t(...), or of the server's say(...), also through a choice: t(isOpen ? 'a.b' : 'a.c'). */
function isAskedOfT(node: ts.Node): boolean {
  const { parent } = node
  if (ts.isArrayLiteralExpression(parent)) return false
  if (ts.isConditionalExpression(parent) && parent.condition !== node) return isAskedOfT(parent)
  if (ts.isParenthesizedExpression(parent)) return isAskedOfT(parent)
  if (!ts.isCallExpression(parent) || parent.arguments[0] !== node) return false
  const called = parent.expression
  return (
    (ts.isIdentifier(called) && (called.text === 't' || called.text === 'say')) ||
    (ts.isPropertyAccessExpression(called) && called.name.text === 't')
  )
}
