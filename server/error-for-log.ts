/**
 * An error as the log keeps it: what failed and where, its causes too, but never the values of a statement. A refused
 * insert carries the password hash or the address it was given, in its parameters, its message and its detail.
 */
export function errorForLog(error: unknown, depth = 0): Record<string, unknown> {
  if (!(error instanceof Error)) return { message: String(error) }
  const isStatement = 'query' in error && 'params' in error
  const message = isStatement ? `Failed query: ${String(error.query)}` : error.message
  const where = (error.stack ?? '').split('\n').filter((line) => /^\s+at /.test(line))
  return {
    type: error.name,
    message,
    stack: where.join('\n'),
    ...kept(error, ['code', 'constraint', 'table', 'column', 'routine']),
    ...(error.cause === undefined || depth > 4
      ? {}
      : { cause: errorForLog(error.cause, depth + 1) }),
  }
}

function kept(error: object, names: readonly string[]): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(error).filter(([name, value]) => names.includes(name) && value !== undefined),
  )
}
