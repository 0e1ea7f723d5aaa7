import ts from 'typescript'
import { lineOf, visit, type Source } from './read-sources'

/** Properties whose text a person reads or hears. */
const visibleProperties = new Set([
  'accessibilityHint',
  'accessibilityLabel',
  'alt',
  'aria-description',
  'aria-label',
  'aria-roledescription',
  'aria-valuetext',
  'body',
  'caption',
  'description',
  'emptyText',
  'heading',
  'help',
  'hint',
  'label',
  'legend',
  'message',
  'placeholder',
  'subtitle',
  'summary',
  'text',
  'title',
  'tooltip',
])

/** In plain data these are as often a colour, a type face or a request. */
const doubtfulInData = new Set(['body', 'heading', 'text'])

const hasLetters = /\p{L}/u
/** `internal` in data is a code for the program; a screen's words have a capital or a space. */
const isCode = /^[a-z0-9-]+$/
const isKey = /^[a-z][A-Za-z]*(\.[\w-]+)+$/

/** Words written into a screen instead of the catalogue, as `file:line words`. */
export function findVisibleWords({ path, tree }: Source): string[] {
  const found: string[] = []
  const report = (node: ts.Node, words: string) =>
    found.push(`${path}:${lineOf(tree, node)} ${words.trim().replace(/\s+/g, ' ')}`)
  const look = (node: ts.Expression, isNoWord = isKey) => {
    for (const literal of textsOf(node)) {
      const { text } = literal
      if (hasLetters.test(text) && !isKey.test(text) && !isNoWord.test(text)) report(literal, text)
    }
  }
  visit(tree, (node) => {
    if (ts.isJsxText(node) && hasLetters.test(node.text)) report(node, node.text)
    if (ts.isJsxExpression(node) && node.expression && isJsx(node.parent)) look(node.expression)
    if (ts.isJsxAttribute(node) && visibleProperties.has(node.name.getText(tree))) {
      const value = node.initializer
      if (value !== undefined && ts.isStringLiteral(value)) look(value)
      else if (value !== undefined && ts.isJsxExpression(value) && value.expression)
        look(value.expression)
    }
    if (ts.isPropertyAssignment(node)) {
      const name = nameOf(node.name)
      if (visibleProperties.has(name) && !doubtfulInData.has(name)) look(node.initializer, isCode)
    }
  })
  return found
}

function isJsx(node: ts.Node): boolean {
  return ts.isJsxElement(node) || ts.isJsxFragment(node)
}

function nameOf(name: ts.PropertyName): string {
  return ts.isIdentifier(name) || ts.isStringLiteral(name) ? name.text : ''
}

/** Texts an expression may come to, as far as it is written out in place. */
function textsOf(node: ts.Expression): ts.LiteralLikeNode[] {
  if (ts.isStringLiteral(node) || ts.isNoSubstitutionTemplateLiteral(node)) return [node]
  if (ts.isParenthesizedExpression(node)) return textsOf(node.expression)
  if (ts.isConditionalExpression(node))
    return [...textsOf(node.whenTrue), ...textsOf(node.whenFalse)]
  if (ts.isTemplateExpression(node))
    return [node.head, ...node.templateSpans.map(({ literal }) => literal)]
  if (ts.isBinaryExpression(node)) {
    const chooses = [
      ts.SyntaxKind.BarBarToken,
      ts.SyntaxKind.QuestionQuestionToken,
      ts.SyntaxKind.PlusToken,
    ].includes(node.operatorToken.kind)
    return chooses
      ? [...textsOf(node.left), ...textsOf(node.right)]
      : node.operatorToken.kind === ts.SyntaxKind.AmpersandAmpersandToken
        ? textsOf(node.right)
        : []
  }
  return []
}
