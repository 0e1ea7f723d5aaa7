export type Figure = {
  name: string
  unit: string
  /** Middle of the measured values. */
  median: number
  /** What the same work takes at least, measured in the same run. */
  floor: number
  /** What was aimed at, of the ratio or of the figure, in words: "at most 2x". */
  aim: string
}

/** Prints a figure as one line of JSON. */
export function report({ name, unit, median, floor, aim }: Figure): void {
  const figure = {
    name,
    unit,
    median: rounded(median),
    floor: rounded(floor),
    ratio: rounded(median / floor),
    aim,
  }
  process.stdout.write(`${JSON.stringify(figure)}\n`)
}

/** The value in the middle; of an even number the mean of the two. */
export function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = Math.floor(sorted.length / 2)
  const [low = 0, high = 0] =
    sorted.length % 2 === 1 ? [sorted[middle], sorted[middle]] : sorted.slice(middle - 1)
  return (low + high) / 2
}

function rounded(value: number): number {
  return Number(value.toPrecision(4))
}
