import { createHash } from 'node:crypto'

/** A signature as a pen would draw it in the 1000 x 400 box: loops whose shape the name decides. */
export function signatureStrokes(name: string): [number, number][][] {
  const bytes = [...createHash('sha256').update(name).digest()]
  const at = (index: number) => bytes[index % bytes.length] ?? 0
  return name.split(' ').map((word, part) => {
    const left = 90 + part * 430
    const points = 10 + word.length * 4
    return Array.from({ length: points }, (_, index): [number, number] => {
      const along = index / (points - 1)
      const turn = index * 0.9 + at(part) / 40
      const height = 60 + (at(index + part * 7) % 50) * (1 - along)
      return [
        Math.round(left + along * 330 + Math.cos(turn) * 22),
        Math.round(220 + Math.sin(turn) * height),
      ]
    })
  })
}
