import type { Container } from '@/shared/contracts/containers'
import { absolute, add, isNegative, subtract } from '@/shared/quantities/decimals'

export type LiveRoom = {
  contentsLitres: string
  afterLitres: string
  /** Below zero: over the line by that much. */
  roomLitres: string
  isOver: boolean
  overLitres: string
}

/** Where a container would stand with this much more in it: `room = fill line - book - pour`, exact. */
export function roomAfter(
  container: Pick<Container, 'litres' | 'fillLineLitres'>,
  pouredLitres: string,
): LiveRoom {
  const afterLitres = add(container.litres, pouredLitres)
  const roomLitres = subtract(container.fillLineLitres, afterLitres)
  return {
    contentsLitres: container.litres,
    afterLitres,
    roomLitres,
    isOver: isNegative(roomLitres),
    overLitres: isNegative(roomLitres) ? absolute(roomLitres) : '0',
  }
}
