/**
 * Starting shapes over the least-area rectangle that encloses the outer rim: u along its longer side, v along the shorter,
 * both from -1 to 1, height 0 to 1:
 *     dome 1 - (u^2 + v^2) / 2      barrel 1 - v^2      pitched 1 - |v|      hipped: lowest of four planes of equal pitch
 */
import { enclosingRectangle } from '../../base/geometry/enclosing-rectangle.ts'
import type { Plan } from '../../plan/plan.ts'

export type Shape = 'dome' | 'barrel' | 'pitched' | 'hipped'

/** Shape heights 0..1 of each node (length nodeCount, not to be written to), and the shorter side of the rectangle in span units; found once a plan. */
export function shapeHeights(plan: Plan, shape: Shape): ShapeHeights {
  const known = shapesOf.get(plan) ?? new Map<Shape, ShapeHeights>()
  shapesOf.set(plan, known)
  const made = known.get(shape) ?? newHeights(plan, shape)
  known.set(shape, made)
  return made
}

interface ShapeHeights {
  readonly heights: Float64Array
  readonly shorterSide: number
}

const shapesOf = new WeakMap<Plan, Map<Shape, ShapeHeights>>()

function newHeights(plan: Plan, shape: Shape): ShapeHeights {
  const { centreX, centreY, axisX, axisY, halfLong, halfShort } = enclosingRectangle(outerRim(plan))
  const heights = new Float64Array(plan.nodeCount)
  for (let i = 0; i < plan.nodeCount; i += 1) {
    const dx = plan.work[2 * i] - centreX, dy = plan.work[2 * i + 1] - centreY
    const along = dx * axisX + dy * axisY
    const across = dy * axisX - dx * axisY
    heights[i] = heightAt(shape, along / halfLong, across / halfShort, halfLong / halfShort)
  }
  return { heights, shorterSide: 2 * halfShort }
}

/** `aspect` = longer over shorter side: the hipped roof's ends have the pitch of its sides. */
function heightAt(shape: Shape, u: number, v: number, aspect: number): number {
  switch (shape) {
    case 'dome':
      return 1 - (u * u + v * v) / 2
    case 'barrel':
      return 1 - v * v
    case 'pitched':
      return 1 - Math.abs(v)
    case 'hipped':
      return Math.min(1 - Math.abs(v), aspect * (1 - Math.abs(u)))
  }
}

/** Working coordinates of the nodes on outer rims, x y x y .. */
function outerRim(plan: Plan): Float64Array {
  const points: number[] = []
  for (let loop = 0; loop < plan.rimIsVoid.length; loop += 1) {
    if (plan.rimIsVoid[loop] === 1) continue
    for (let k = plan.rimStart[loop]; k < plan.rimStart[loop + 1]; k += 1) {
      const node = plan.origin[plan.rimHalf[k]]
      points.push(plan.work[2 * node], plan.work[2 * node + 1])
    }
  }
  return Float64Array.from(points)
}
