/**
 * The flatness form with panels that give way: T^T (sum N W N^T) T, W of each panel its own, on the pattern of the plan's own
 * factor, so that every trial costs one factorisation of values and no new ordering.
 */
import type { Plan } from '../../../plan/plan.ts'
import { weightedForm, type LiftSpace } from '../../stress/lift-space.ts'
import type { DivisiblePanel } from './diagonals-panels.ts'

/** W of the panel (m x m, m = k - 3, row by row); null: I, the panel stays whole. */
export type PanelWeight = (place: number) => Float64Array | null

export interface DividedForm {
  readonly panels: readonly DivisiblePanel[]
  /** T^T (sum N W N^T) T + shift T^T T on the space's pattern; `place` counts in `panels`. */
  values(weight: PanelWeight, shift: number): Float64Array
  /** N^T h of the panel in this place (length k - 3). */
  misfit(place: number, heights: Float64Array): Float64Array
  /** sum N W N^T h over all panels, whole ones included (length nodeCount). */
  apply(weight: PanelWeight, heights: Float64Array): Float64Array
}

interface Block {
  /** First entry of the panel's clique in the pattern's positions, and its unknowns. */
  readonly at: number
  readonly unknowns: number
  /** N^T T_p, unknown by unknown: reduced[a * m + r]. */
  readonly reduced: Float64Array
}

/** `flatForm`: Q h of the whole plan (see `applyForm`). */
export function dividedForm(space: LiftSpace, panels: readonly DivisiblePanel[], flatForm: (heights: Float64Array) => Float64Array): DividedForm {
  const { plan, elimination, form } = space
  const { position } = form.cliques
  const blocks = blocksOf(space, panels)
  return {
    panels,
    values(weight, shift) {
      const values = weightedForm(plan, elimination, form, null, shift, 1)
      panels.forEach((each, place) => {
        const w = weight(place)
        if (w === null) return
        const m = each.corners - 3
        const { at, unknowns, reduced } = blocks[place]
        const turned = new Float64Array(m)
        let entry = at
        for (let a = 0; a < unknowns; a += 1) {
          // (W - I) g_a against every g_b: the panel's own block is in the form already.
          for (let r = 0; r < m; r += 1) {
            turned[r] = -reduced[a * m + r]
            for (let s = 0; s < m; s += 1) turned[r] += w[r * m + s] * reduced[a * m + s]
          }
          for (let b = a; b < unknowns; b += 1) {
            let sum = 0
            for (let r = 0; r < m; r += 1) sum += turned[r] * reduced[b * m + r]
            values[position[entry++]] += sum
          }
        }
      })
      return values
    },
    misfit: (place, heights) => misfitOf(plan, panels[place], heights),
    apply(weight, heights) {
      const out = flatForm(heights)
      panels.forEach((each, place) => {
        const w = weight(place)
        if (w === null) return
        const m = each.corners - 3, from = plan.panelStart[each.panel]
        const r = misfitOf(plan, each, heights)
        for (let i = 0; i < m; i += 1) {
          let change = -r[i]
          for (let j = 0; j < m; j += 1) change += w[i * m + j] * r[j]
          for (let c = 0; c < each.corners; c += 1) out[plan.corner[from + c]] += each.basis[c * m + i] * change
        }
      })
      return out
    },
  }
}

function misfitOf(plan: Plan, { panel, corners, basis }: DivisiblePanel, heights: Float64Array): Float64Array {
  const m = corners - 3, from = plan.panelStart[panel]
  const out = new Float64Array(m)
  // Measured from the first corner: a roof far above its datum loses no digits.
  const first = heights[plan.corner[from]]
  for (let c = 1; c < corners; c += 1) {
    const h = heights[plan.corner[from + c]] - first
    for (let r = 0; r < m; r += 1) out[r] += basis[c * m + r] * h
  }
  return out
}

/** Cliques in the order in which the form was assembled: panels first, each with its unknowns as its corners bring them. */
function blocksOf({ plan, elimination }: LiftSpace, panels: readonly DivisiblePanel[]): Block[] {
  const { start, unknown, weight, free } = elimination
  const slot = new Int32Array(free.length).fill(-1)
  const blocks: Block[] = []
  let at = 0
  let next = 0
  for (let p = 0; p < plan.panelCount; p += 1) {
    const list: number[] = []
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      for (let t = start[plan.corner[c]]; t < start[plan.corner[c] + 1]; t += 1) {
        if (slot[unknown[t]] >= 0) continue
        slot[unknown[t]] = list.length
        list.push(unknown[t])
      }
    }
    if (next < panels.length && panels[next].panel === p) {
      const { corners, basis } = panels[next]
      const m = corners - 3
      const reduced = new Float64Array(list.length * m)
      for (let c = 0; c < corners; c += 1) {
        const node = plan.corner[plan.panelStart[p] + c]
        for (let t = start[node]; t < start[node + 1]; t += 1) {
          for (let r = 0; r < m; r += 1) reduced[slot[unknown[t]] * m + r] += weight[t] * basis[c * m + r]
        }
      }
      blocks.push({ at, unknowns: list.length, reduced })
      next += 1
    }
    at += (list.length * (list.length + 1)) / 2
    for (const u of list) slot[u] = -1
  }
  return blocks
}
