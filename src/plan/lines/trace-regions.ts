/**
 * The regions between the lines: each is one counter-clockwise cycle with the outer cycles of the figures that float in
 * it. Region 0 .. n - 1 are numbered like `cycle`; -1 is the open outside.
 */
import type { Cycles } from './trace-cycles.ts'
import type { Nested } from './trace-nesting.ts'

export interface Regions {
  /** Counter-clockwise cycle of each region. */
  readonly cycle: Int32Array
  /** Region on the left of each half-edge, -1 outside and for edges taken out. */
  readonly of: Int32Array
  /** Half-edges with region r on their left: half[start[r] .. start[r + 1]). */
  readonly start: Int32Array
  readonly half: Int32Array
}

export function regionsOf(cycles: Cycles, nested: Nested): Regions {
  const regionOfCycle = new Int32Array(cycles.area.length).fill(-1)
  const cycle: number[] = []
  for (let c = 0; c < cycles.area.length; c += 1) if (cycles.area[c] > 0) regionOfCycle[c] = cycle.push(c) - 1
  for (let k = 0; k < nested.outer.length; k += 1) {
    if (nested.outer[k] >= 0 && nested.within[k] >= 0) regionOfCycle[nested.outer[k]] = regionOfCycle[nested.within[k]]
  }
  const of = new Int32Array(cycles.of.length)
  for (let h = 0; h < of.length; h += 1) of[h] = cycles.of[h] < 0 ? -1 : regionOfCycle[cycles.of[h]]
  const start = new Int32Array(cycle.length + 1)
  for (const region of of) if (region >= 0) start[region + 1] += 1
  for (let r = 0; r < cycle.length; r += 1) start[r + 1] += start[r]
  const fill = start.slice(0, cycle.length)
  const half = new Int32Array(start[cycle.length])
  for (let h = 0; h < of.length; h += 1) if (of[h] >= 0) half[fill[of[h]]++] = h
  return { cycle: Int32Array.from(cycle), of, start, half }
}

/**
 * The regions inside a closed chain of half-edges that has its inside on the left, in the order in which they are found
 * from the first of them outwards.
 */
export function regionsInside({ of, start, half }: Regions, chain: Int32Array): number[] {
  const border = new Set<number>()
  for (const h of chain) border.add(h >> 1)
  const found = new Set<number>()
  for (const h of chain) if (of[h] >= 0) found.add(of[h])
  // A set grows while it is walked: whatever is added is visited too.
  for (const region of found) {
    for (let k = start[region]; k < start[region + 1]; k += 1) {
      const beyond = of[half[k] ^ 1]
      if (beyond >= 0 && !border.has(half[k] >> 1)) found.add(beyond)
    }
  }
  return [...found]
}
