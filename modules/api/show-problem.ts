import { useCallback } from 'react'
import type { FieldValues, Path, UseFormSetError } from 'react-hook-form'
import { useTranslation } from 'react-i18next'
import type { ProblemCode } from '@/shared/problems'
import { fieldWords } from './field-words'
import { OfflineError, ProblemError } from './problem-error'

/** What a screen says about a failed act; `code` is there for screens that offer a way out. */
export type ShownProblem = {
  code: ProblemCode | 'offline'
  title: string
  detail: string
  facts: Record<string, string>
}

type FormOfProblem<Values extends FieldValues> = {
  setError: UseFormSetError<Values>
  /** Where the body's path differs from the form's field: `legs.0.volume.value` -> `legs.0.typed`. */
  fieldOf?: (path: string) => string
}

/**
 * The one place where a failed act becomes words: `const showProblem = useShowProblem('setup')`, then in a catch
 * `setProblem(showProblem(error, form))`. Refused fields are set on the form, each under its own field.
 * Anything that is neither a refusal nor silence is a programming error and is thrown on.
 */
export function useShowProblem(area: string) {
  const { t } = useTranslation()
  return useCallback(
    <Values extends FieldValues>(error: unknown, form?: FormOfProblem<Values>): ShownProblem => {
      if (error instanceof OfflineError) {
        return {
          code: 'offline',
          title: t('api.offline.title'),
          detail: t('api.offline.detail'),
          facts: {},
        }
      }
      if (!(error instanceof ProblemError)) throw error
      const { code, title, detail, facts = {} } = error.document
      error.fields.forEach((field, position) => {
        const name = (form?.fieldOf?.(field.path) ?? field.path) as Path<Values>
        form?.setError(
          name,
          { type: field.code, message: fieldWords(t, area, field) },
          { shouldFocus: position === 0 },
        )
      })
      return {
        code,
        title: t([`${area}.problems.${code}.title`, `problems.${code}.title`], {
          ...facts,
          defaultValue: title,
        }),
        detail: t([`${area}.problems.${code}.detail`, `problems.${code}.detail`], {
          ...facts,
          defaultValue: detail,
        }),
        facts,
      }
    },
    [t, area],
  )
}
