/** The cure "move nodes" asked directly, without files: for tests that make their plans in code. */
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { conditionRows } from '../../src/roof/conditions/condition-rows.ts'
import type { PlanKeeps } from '../../src/roof/cures/adjust/adjust.ts'
import { movedNodes, type Moved, type MoveOutcome } from '../../src/roof/cures/move/move-nodes.ts'
import { nodeAreas } from '../../src/roof/raise/nearest.ts'
import { raise, type Asked } from './raise.ts'

export const keepsOf = (keeps: Partial<PlanKeeps> = {}): PlanKeeps => ({
  rim: 'slide', fixed: [], straight: true, leastEdge: null, leastAngle: null, largestShift: null, bays: false, symmetry: false, axes: false, shapes: [], ...keeps,
})

/** `target`: heights in spans per node. */
export function outcome(plan: Plan, asked: Asked = {}, keeps: Partial<PlanKeeps> = {}): MoveOutcome {
  const { conditions = [] } = asked
  const rows = conditionRows(plan, conditions, 0)
  if (!rows.ok) throw new Error(rows.problem.message)
  const { under } = raise(plan, asked)
  return finish(movedNodes({
    plan, rows: rows.value, conditions, under, areas: nodeAreas(plan), keeps: keepsOf(keeps),
    wish: {
      rows: rows.value, names: conditions.map((c) => c.name), shape: 'dome', target: null, rise: null, rule: { down: false, datum: null }, pitched: false,
      within: () => false, ...asked,
    },
  }))
}

export function movedPlanOf(plan: Plan, asked: Asked = {}, keeps: Partial<PlanKeeps> = {}): Moved {
  const found = outcome(plan, asked, keeps)
  if (found.kind === 'moved') return found.moved
  throw new Error(found.kind === 'refused' ? `refused: ${found.refusal.message}` : `${found.code}: ${found.message}`)
}

/** Shift of each node in the plan's unit. */
export const shifts = (plan: Plan, moved: Plan): Float64Array => plan.x.map((x, n) => Math.hypot(moved.x[n]! - x, moved.y[n]! - plan.y[n]!))

export const rootMeanSquare = (values: ArrayLike<number>): number => {
  let sum = 0
  for (let i = 0; i < values.length; i += 1) sum += values[i]! ** 2
  return Math.sqrt(sum / values.length)
}

/** Corners of `moved` that are re-entrant and were not in `plan`, by cross products. */
export function newlyReflex(plan: Plan, moved: Plan): number {
  const turn = ({ x, y }: Plan, a: number, b: number, c: number): number => (x[b]! - x[a]!) * (y[c]! - y[b]!) - (y[b]! - y[a]!) * (x[c]! - x[b]!)
  let count = 0
  for (let p = 0; p < plan.panelCount; p += 1) {
    const nodes = [...plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1])]
    nodes.forEach((node, k) => {
      const [before, after] = [nodes[(k + nodes.length - 1) % nodes.length]!, nodes[(k + 1) % nodes.length]!]
      if (turn(plan, before, node, after) > 0 && !(turn(moved, before, node, after) > 0)) count += 1
    })
  }
  return count
}

/** Hexagonal cells, flat to flat 1, as they tile `columns` by `rows`. */
export function hexagons(columns: number, rows: number): { points: [number, number][]; faces: number[][] } {
  const points: [number, number][] = []
  const known = new Map<string, number>()
  const faces: number[][] = []
  const r = 1 / Math.sqrt(3)
  for (let j = 0; j < rows; j += 1) {
    for (let i = 0; i < columns; i += 1) {
      const cx = i + (j % 2) / 2, cy = j * 1.5 * r
      faces.push(Array.from({ length: 6 }, (_, k) => {
        const [x, y] = [cx + r * Math.cos(((2 * k + 1) * Math.PI) / 6), cy + r * Math.sin(((2 * k + 1) * Math.PI) / 6)]
        // Rounded numbers, since the text of -0.0000001 is not that of 0.
        const key = `${Math.round(1e6 * x)} ${Math.round(1e6 * y)}`
        const at = known.get(key) ?? points.push([x, y]) - 1
        known.set(key, at)
        return at
      }))
    }
  }
  return { points, faces }
}
