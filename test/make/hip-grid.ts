/** The 12 x 8 grid whose corner panels are divided by diagonals that run inwards along the hips. */
import type { Plan } from '../../src/plan/plan.ts'
import { plan, type Points } from './plans.ts'

export type Placed = (i: number, j: number) => readonly [x: number, y: number]

export interface Divided {
  readonly points: Points
  readonly faces: readonly (readonly number[])[]
}

/** m x n quads with nodes where `place` says, row by row from the bottom left, `rings` panels divided at each corner. */
export function hipPoints(m: number, n: number, rings: number, place: Placed): Divided {
  const points: (readonly [number, number])[] = []
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) points.push(place(i, j))
  const faces: number[][] = []
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      const a = j * (m + 1) + i
      const [b, c, d] = [a + 1, a + m + 2, a + m + 1]
      const [fromSide, fromEnd] = [Math.min(i, m - 1 - i), Math.min(j, n - 1 - j)]
      if (fromSide !== fromEnd || fromSide >= rings) faces.push([a, b, c, d])
      else if (i < m / 2 === j < n / 2) faces.push([a, b, c], [a, c, d])
      else faces.push([a, b, d], [b, c, d])
    }
  }
  return { points, faces }
}

export function hipGrid(rings: number, place: Placed = (i, j) => [1.5 * i, 1.5 * j]): Plan {
  const { points, faces } = hipPoints(12, 8, rings, place)
  return plan(points, faces)
}
