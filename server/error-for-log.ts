/**
 * An error as the log keeps it: what failed and where, its causes too, but never the values of a statement. A refused
 * insert carries the password hash or the address it was given, in its parameters, its message and its detail.
 */
export function errorForLog(error: unknown, depth = 0): Record<string, unknown> {
  if (typeof error !== 'object' || error === null || !('message' in error)) {
    return { message: String(error) }
  }
  const { name, message, stack, cause, query } = error as Partial<Error> & { query?: unknown }
  const isStatement = query !== undefined && 'params' in error
  const where = (stack ?? '').split('\n').filter((line) => /^\s+at /.test(line))
  return {
    type: name,
    message: isStatement ? `Failed query: ${String(query)}` : message,
    stack: where.join('\n'),
    ...kept(error, ['code', 'constraint', 'table', 'column', 'routine']),
    ...(cause === undefined || depth > 4 ? {} : { cause: errorForLog(cause, depth + 1) }),
  }
}

function kept(error: object, names: readonly string[]): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(error).filter(([name, value]) => names.includes(name) && value !== undefined),
  )
}
