import { machineCalled, quillbrook } from './company'

type Leg = { container: string; volume?: { value: string; unit: 'gal_us' | 'L' } }

const litresPer = { gal_us: 3.785411784, L: 1 }

/** What the season's plan takes to be in each container: it decides where a drain goes, no figure rests on it. */
export type SeasonYard = ReturnType<typeof seasonYard>

/** What the plan of a season is made with. */
export type Season = {
  yard: SeasonYard
  random: () => number
  /** The last day of the season, as the site's calendar has it. */
  today: (site: string) => string
}

/** @param litres what stands in each container, by code */
export function seasonYard(litres: ReadonlyMap<string, number>) {
  const levels = new Map(litres)
  const level = (code: string) => levels.get(code) ?? 0
  const fluidsOf = (site: string) =>
    quillbrook.containers.filter(
      (one) =>
        one.site === site && (one.type === 'drum' || one.type === 'tote') && one.code !== 'H-1',
    )
  const lineOf = (code: string) => {
    const found = quillbrook.containers.find((one) => one.code === code)
    if (found === undefined) return 0
    return (Number(found.capacity) * litresPer[found.unit] * Number(found.fillPercent)) / 100
  }
  return {
    /** Share of the fill line that is reached. */
    share: (code: string) => level(code) / lineOf(code),
    /** Containers of a site that are worth a truck. */
    toShip: (site: string) =>
      fluidsOf(site)
        .map(({ code }) => code)
        .filter((code) => level(code) > 20),
    empty: (codes: readonly string[]) => codes.forEach((code) => levels.set(code, 0)),
    /** Legs of a drain into the containers of its stream, one after the other; undefined when there is no room. */
    pour: (machine: string, value: number, unit: 'gal_us' | 'L'): Leg[] | undefined => {
      const { site, stream } = machineCalled(machine)
      const legs: { container: string; value: number }[] = []
      let rest = value
      for (const { code } of fluidsOf(site).filter((one) => one.stream === stream)) {
        // A little is left free: the plan is not exact.
        const room = Math.floor(((lineOf(code) - level(code) - 1) / litresPer[unit]) * 2) / 2
        const part = Math.min(rest, room)
        if (part < 1 && part < rest) continue
        legs.push({ container: code, value: part })
        rest -= part
        if (rest === 0) break
      }
      if (rest > 0) return undefined
      for (const leg of legs) {
        levels.set(leg.container, level(leg.container) + leg.value * litresPer[unit])
      }
      return legs.map((leg, index) =>
        index === legs.length - 1
          ? { container: leg.container }
          : { container: leg.container, volume: { value: String(leg.value), unit } },
      )
    },
  }
}
