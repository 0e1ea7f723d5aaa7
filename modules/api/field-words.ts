import type { TFunction } from 'i18next'

/**
 * Words of a refused field. Looked up as `<area>.fields.<field>.<code>`, `<area>.fields.<code>`, then
 * `api.fields.<code>`; the server's detail is the last resort.
 * @param path as in the body: `lines.0.quantity.value`; positions are left out of the key
 */
export function fieldWords(
  t: TFunction,
  area: string,
  problem: { path: string; code: string; detail?: string },
): string {
  const field = problem.path
    .split('.')
    .filter((part) => !/^\d+$/.test(part))
    .join('_')
  return t(
    [
      `${area}.fields.${field}.${problem.code}`,
      `${area}.fields.${problem.code}`,
      `api.fields.${problem.code}`,
    ],
    { defaultValue: problem.detail ?? t('api.fields.unknown') },
  )
}
