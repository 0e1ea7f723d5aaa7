import { parseQuantity } from '@/shared/quantities/parse'
import { isUnit, unitSymbol, type VolumeUnit } from '@/shared/quantities/units'
import type { FieldSpec, Kind } from './kinds'

/** What stands in the boxes: text, or the ticked choices. */
export type Values = Record<string, string | string[]>
export type SetUpRecord = { id: string; version: string; retiredAt: string | null } & Record<
  string,
  unknown
>

/** A record as its form shows it; of none, an empty form with what is usual. */
export function valuesOf(kind: Kind, record: SetUpRecord | undefined, usual: Values): Values {
  return Object.fromEntries(
    kind.fields.map((field) => [
      field.name,
      record === undefined
        ? (usual[field.name] ?? (field.input === 'many' ? [] : ''))
        : valueOf(field, record),
    ]),
  )
}

function valueOf(field: FieldSpec, record: SetUpRecord): string | string[] {
  if (field.name === 'density')
    return textOf((record['density'] as { kilogramsPerLitre?: unknown } | null)?.kilogramsPerLitre)
  if (field.name === 'densityBasis')
    return textOf((record['density'] as { basis?: unknown } | null)?.basis ?? 'default')
  const value = record[field.name]
  if (field.input === 'many') return Array.isArray(value) ? value.map(String) : []
  if (field.input === 'quantity') return quantityText(value)
  return textOf(value)
}

function textOf(value: unknown): string {
  return typeof value === 'string' || typeof value === 'number' ? String(value) : ''
}

function quantityText(value: unknown): string {
  if (typeof value !== 'object' || value === null || !('value' in value) || !('unit' in value))
    return ''
  const unit = String(value.unit)
  return `${String(value.value)} ${isUnit(unit) ? unitSymbol(unit) : unit}`
}

/** The body a form stands for; the contract's schema judges it. Empty optional boxes are null or left out. */
export function bodyOf(
  kind: Kind,
  values: Values,
  unit: VolumeUnit,
  isNew: boolean,
): Record<string, unknown> {
  const body: Record<string, unknown> = {}
  for (const field of kind.fields) {
    if (field.onlyNew === true && !isNew) continue
    const value = values[field.name] ?? ''
    if (field.input === 'quantity') body[field.name] = quantityOf(String(value), unit)
    else if (field.input === 'figure')
      body[field.name] = value === '' ? null : String(value).trim().replace(',', '.')
    else body[field.name] = value
  }
  if (kind.name !== 'streams') return body
  const { density, densityBasis, ...stream } = body
  return {
    ...stream,
    density: density === null ? null : { kilogramsPerLitre: density, basis: densityBasis },
  }
}

function quantityOf(typed: string, unit: VolumeUnit): unknown {
  if (typed.trim() === '') return null
  const read = parseQuantity(typed, { defaultUnit: unit, measure: 'volume' })
  // What cannot be read goes to the schema as it is, which says so at its field.
  return read.ok ? { value: read.value, unit: read.unit } : { value: typed, unit }
}

/** The form's field of a path in the body: `density.kilogramsPerLitre` -> density, `capacity.value` -> capacity. */
export function fieldOfPath(path: string): string {
  if (path === 'density.basis') return 'densityBasis'
  return path.split('.')[0] ?? path
}
