import type { Container } from '@/shared/contracts/containers'
import type { DrainRow } from '@/shared/contracts/drains'
import { convert } from '@/shared/quantities/convert'
import { add, compare, subtract } from '@/shared/quantities/decimals'
import { legLitres } from './ask-before-saving'
import type { FactsInput } from './drain-values'

export type LevelChange = {
  containerId: string
  code: string
  fromLitres: string
  toLitres: string
}

/** What an amendment does to the containers: the old legs go out, the new ones go in. Exact litres. */
export function amendEffect(
  drain: Pick<DrainRow, 'legs'>,
  facts: Pick<FactsInput, 'volume' | 'legs'>,
  containers: readonly Pick<Container, 'id' | 'code' | 'litres'>[],
): LevelChange[] {
  const litres = convert(facts.volume.value, facts.volume.unit, 'L')
  const after = new Map(containers.map((container) => [container.id, container.litres]))
  const move = (containerId: string, change: (before: string) => string) => {
    const before = after.get(containerId)
    if (before !== undefined) after.set(containerId, change(before))
  }
  for (const leg of drain.legs) move(leg.containerId, (before) => subtract(before, leg.litres))
  for (const leg of legLitres(facts, litres)) {
    move(leg.containerId, (before) => add(before, leg.litres))
  }
  return containers.flatMap(({ id, code, litres: fromLitres }) => {
    const toLitres = after.get(id) ?? fromLitres
    return compare(fromLitres, toLitres) === 0
      ? []
      : [{ containerId: id, code, fromLitres, toLitres }]
  })
}
