/** Answers made by hand for the drawings: roofs whose planes are known from their definition, no solver in between. */
import type { Answer } from '../../../src/roof/answer/answer.ts'
import { interiorNodeCount, voidCount, type Plan } from '../../../src/plan/plan.ts'
import { jointName } from '../../../src/plan/names.ts'
import { grid, plan as planOf } from '../../make/plans.ts'

/**
 * The answer for heights z(x, y) given at the nodes: each panel's gradient from its first corner that turns, each joint's
 * stress from s = (a_L - a_R) . J d / |d|^2 with J a quarter turn counter-clockwise.
 */
export function answerFor(plan: Plan, z: (x: number, y: number) => number, more: Partial<Answer> = {}): Answer {
  const heights = Float64Array.from({ length: plan.nodeCount }, (_, i) => z(plan.x[i]!, plan.y[i]!))
  const gradient = new Float64Array(2 * plan.panelCount)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const corners = Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]))
    const at = (k: number): [number, number, number] => {
      const node = corners[k % corners.length]!
      return [plan.x[node]!, plan.y[node]!, heights[node]!]
    }
    for (let k = 0; k < corners.length; k += 1) {
      const [a, b, c] = [at(k), at(k + 1), at(k + 2)]
      const ux = b[0] - a[0], uy = b[1] - a[1], uz = b[2] - a[2]
      const vx = c[0] - a[0], vy = c[1] - a[1], vz = c[2] - a[2]
      const det = ux * vy - uy * vx
      if (Math.abs(det) < 1e-9) continue
      gradient[2 * p] = (uz * vy - uy * vz) / det
      gradient[2 * p + 1] = (ux * vz - uz * vx) / det
      break
    }
  }
  const stress = new Float64Array(plan.jointCount)
  for (let j = 0; j < plan.jointCount; j += 1) {
    const from = plan.origin[2 * j]!, to = plan.origin[2 * j + 1]!
    const dx = plan.x[to]! - plan.x[from]!, dy = plan.y[to]! - plan.y[from]!
    const left = plan.panelOf[2 * j]!, right = plan.panelOf[2 * j + 1]!
    const ax = gradient[2 * left]! - gradient[2 * right]!, ay = gradient[2 * left + 1]! - gradient[2 * right + 1]!
    stress[j] = (ax * -dy + ay * dx) / (dx * dx + dy * dy)
  }
  const flat = new Float64Array(plan.panelCount)
  const rise = Math.max(...heights) - Math.min(...heights)
  return {
    plan, frozenFree: new Uint8Array(plan.jointCount), frozenHeld: new Uint8Array(plan.jointCount),
    flatGroup: Int32Array.from({ length: plan.panelCount }, (_, p) => p), conditions: [],
    roof: {
      heights, written: heights, writtenX: plan.x, writtenY: plan.y, gradient, stress, corner_mm: flat, flatness_mm: flat, isNear: false,
    },
    summary: {
      version: '0.0.0', input: { name: 'made.obj', sha256: '' }, options: {},
      plan: {
        panels: plan.panelCount, joints: plan.jointCount, rimEdges: plan.edgeCount - plan.jointCount, nodes: plan.nodeCount,
        interiorNodes: interiorNodeCount(plan), voids: voidCount(plan), parts: plan.partCount, unit: plan.unit,
      },
      repairs: [], questions: [], leftOut: [], notices: [],
      stress: { freedom: 18, count: 18, freedomLeft: 21, gap: 0.01, residual: 1e-14, decided: true, frozenJoints: 0, flatGroups: plan.panelCount },
      held: { freedomLeft: 21, frozenJoints: 0, flatGroups: plan.panelCount, clashes: [] },
      verdict: 'lifts', reason: null, reasonKind: null,
      roof: {
        rise, riseAsked: null, rimVariation: rise, cornerMax_mm: 0, flatnessMax_mm: 0, flatnessRms_mm: 0, exactFlatnessMax_mm: 0,
        worstPanels: [], closingError: 0,
      },
      caution: 'Geometry only.',
    },
    ...more,
  }
}

/** m x n square bays raised as z = f(x) + g(y), two parabolas: every quad is flat. */
export function translated(m: number, n: number, rise = 2, voids: readonly (readonly [number, number])[] = [], bay = 1.5): Answer {
  const made = grid(m, n, { bay, voids })
  const w = m * bay, h = n * bay
  return answerFor(made, (x, y) => rise * (1 - 0.5 * ((2 * x) / w - 1) ** 2 - 0.5 * ((2 * y) / h - 1) ** 2))
}

/** A pyramid over a square of side 2: four triangles, gradients (0, 1), (-1, 0), (0, -1), (1, 0) from the south panel round. */
export function pyramid(): Answer {
  return answerFor(planOf([[-1, -1], [1, -1], [1, 1], [-1, 1], [0, 0]], [[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 0, 4]]), (x, y) => 1 - Math.max(Math.abs(x), Math.abs(y)))
}

/** The same answer with these joints frozen (0-based). */
export function withFrozen(answer: Answer, frozen: readonly number[]): Answer {
  const frozenHeld = answer.frozenHeld.slice()
  for (const j of frozen) frozenHeld[j] = 1
  const group = answer.flatGroup.slice()
  for (const j of frozen) {
    const [a, b] = [group[answer.plan.panelOf[2 * j]!]!, group[answer.plan.panelOf[2 * j + 1]!]!]
    for (let p = 0; p < group.length; p += 1) if (group[p] === b) group[p] = a
  }
  return { ...answer, frozenHeld, flatGroup: group, summary: { ...answer.summary, stress: { ...answer.summary.stress, frozenJointNames: frozen.map(jointName) } } }
}
