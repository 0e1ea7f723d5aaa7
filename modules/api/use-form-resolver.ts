import { toNestErrors } from '@hookform/resolvers'
import { useMemo } from 'react'
import type { FieldError, FieldValues, Resolver } from 'react-hook-form'
import { useTranslation } from 'react-i18next'
import type { z } from 'zod'
import { fieldWords } from './field-words'

/**
 * Resolver of react-hook-form for a contract's schema: the form refuses with the same codes as the server, and the
 * same words are shown.
 */
export function useFormResolver<Input extends FieldValues, Output>(
  schema: z.ZodType<Output, Input>,
  area: string,
): Resolver<Input, unknown, Output> {
  const { t } = useTranslation()
  return useMemo<Resolver<Input, unknown, Output>>(
    () => async (values, _context, options) => {
      const parsed = schema.safeParse(values)
      if (parsed.success) return { values: parsed.data, errors: {} }
      const errors: Record<string, FieldError> = {}
      for (const issue of parsed.error.issues) {
        const path = issue.path.map(String).join('.')
        const code = codeOf(issue)
        errors[path] ??= {
          type: code,
          message: fieldWords(t, area, { path, code }),
        }
      }
      return { values: {}, errors: toNestErrors<Input>(errors, options) }
    },
    [schema, area, t],
  )
}

/** Our own codes travel as zod messages (`not-a-code`); an empty required line is said plainly. */
function codeOf(issue: z.core.$ZodIssue): string {
  if (/^[a-z]+(-[a-z]+)+$/.test(issue.message)) return issue.message
  const isEmptyLine = issue.code === 'too_small' && issue.origin === 'string' && issue.minimum === 1
  if (isEmptyLine || (issue.code === 'invalid_type' && issue.input === undefined)) return 'required'
  if (issue.code === 'invalid_format') return `not-a-${issue.format}`
  return issue.code
}
