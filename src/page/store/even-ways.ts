/** The ways left that keep the halves of a roof alike: the even parts of ways, each once. */
import { dot } from '../../base/dot.ts'
import { symmetricHeights } from '../../plan/project/mirrored.ts'
import type { MirrorLine, Way } from '../../job/session.ts'

/** An even part with less of its way's size, or with less that is not in those before, is none. */
const leastShare = 1e-6

export function evenWays(mirror: MirrorLine, ways: readonly Way[]): Way[] {
  const kept: Way[] = []
  const directions: Float64Array[] = []
  for (const way of ways) {
    const even = symmetricHeights(mirror, way.heights)
    const rest = even.slice()
    for (const direction of directions) {
      const share = dot(rest, direction)
      for (let i = 0; i < rest.length; i += 1) rest[i] -= share * direction[i]
    }
    const size = Math.sqrt(dot(rest, rest))
    if (!(size > leastShare * Math.sqrt(dot(way.heights, way.heights)))) continue
    directions.push(rest.map((value) => value / size))
    let peak = 0
    for (let i = 1; i < even.length; i += 1) if (Math.abs(even[i]) > Math.abs(even[peak]) * (1 + leastShare)) peak = i
    const factor = 1 / even[peak]
    // The rise follows in proportion: it counts the highest node, which even parts of small amounts leave the highest.
    kept.push({ heights: even.map((height) => height * factor), peak, riseUp: way.riseUp * factor, riseDown: way.riseDown * factor })
  }
  return kept
}
