/**
 * Answers made by hand for tests of what comes after the job: heights known from a definition, everything else worked
 * out here in the plainest way, without the code under test.
 */
import type { Answer, Roof, Summary } from '../../src/roof/answer/answer.ts'
import { interiorNodeCount, voidCount, type Plan } from '../../src/plan/plan.ts'
import { metres } from '../../src/base/length.ts'
import { caution } from '../../src/roof/answer/caution.ts'
import { cornerDeviation, minimumZone, type Point3 } from '../oracle/second-reader.ts'

/** A roof over the plan with these heights; the plane of a panel is the one through its first three corners not in line. */
export function roofOf(plan: Plan, heights: readonly number[], options: { decimals?: number; isNear?: boolean } = {}): Roof {
  const scale = 10 ** (options.decimals ?? 6)
  const written = Float64Array.from(heights, (z) => Math.round(z * scale) / scale)
  const gradient = new Float64Array(2 * plan.panelCount)
  const corner_mm = new Float64Array(plan.panelCount)
  const flatness_mm = new Float64Array(plan.panelCount)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const nodes = [...plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1])]
    const [a, b, c] = threeNotInLine(plan, nodes)
    const [ux, uy, uz] = [plan.x[b]! - plan.x[a]!, plan.y[b]! - plan.y[a]!, heights[b]! - heights[a]!]
    const [vx, vy, vz] = [plan.x[c]! - plan.x[a]!, plan.y[c]! - plan.y[a]!, heights[c]! - heights[a]!]
    const det = ux * vy - uy * vx
    gradient[2 * p] = (uz * vy - uy * vz) / det
    gradient[2 * p + 1] = (ux * vz - uz * vx) / det
    const corners = nodes.map((n): Point3 => [plan.x[n]!, plan.y[n]!, written[n]!])
    const mm = metres[plan.unit] * 1000
    corner_mm[p] = cornerDeviation(corners) * mm
    flatness_mm[p] = minimumZone(corners) * mm
  }
  const stress = new Float64Array(plan.jointCount)
  for (let j = 0; j < plan.jointCount; j += 1) {
    const [from, to] = [plan.origin[2 * j]!, plan.origin[2 * j + 1]!]
    const [left, right] = [plan.panelOf[2 * j]!, plan.panelOf[2 * j + 1]!]
    const [dx, dy] = [plan.x[to]! - plan.x[from]!, plan.y[to]! - plan.y[from]!]
    const jx = gradient[2 * left]! - gradient[2 * right]!
    const jy = gradient[2 * left + 1]! - gradient[2 * right + 1]!
    stress[j] = (jx * -dy + jy * dx) / (dx * dx + dy * dy)
  }
  return {
    heights: Float64Array.from(heights),
    written,
    writtenX: plan.x,
    writtenY: plan.y,
    gradient,
    stress,
    corner_mm,
    flatness_mm,
    isNear: options.isNear ?? false,
  }
}

function threeNotInLine(plan: Plan, nodes: readonly number[]): [number, number, number] {
  let best: [number, number, number] = [0, 0, 0]
  let largest = -1
  for (const a of nodes) {
    for (const b of nodes) {
      for (const c of nodes) {
        const area = (plan.x[b]! - plan.x[a]!) * (plan.y[c]! - plan.y[a]!) - (plan.y[b]! - plan.y[a]!) * (plan.x[c]! - plan.x[a]!)
        if (area > largest) {
          largest = area
          best = [a, b, c]
        }
      }
    }
  }
  return best
}

type Parts = Partial<Omit<Summary, 'stress' | 'held' | 'roof'>> & {
  stress?: Partial<Summary['stress']>
  held?: Partial<Summary['held']>
  roof?: Partial<NonNullable<Summary['roof']>> | null
  conditions?: Answer['conditions']
  frozenHeld?: Uint8Array
  flatGroup?: Int32Array
}

/** An answer round a roof; every figure that a test cares about is given by the test. */
export function answerOf(plan: Plan, roof: Roof | null, parts: Parts = {}): Answer {
  const { stress, held, roof: roofParts, conditions, frozenHeld, flatGroup, ...rest } = parts
  const corner = roof === null ? 0 : Math.max(0, ...roof.corner_mm)
  const flatness = roof === null ? 0 : Math.max(0, ...roof.flatness_mm)
  const zs = roof === null ? [0] : [...roof.written]
  const summary: Summary = {
    version: '0.0.0',
    input: { name: 'plan.obj', sha256: '0'.repeat(64) },
    options: {},
    plan: {
      panels: plan.panelCount,
      joints: plan.jointCount,
      rimEdges: plan.edgeCount - plan.jointCount,
      nodes: plan.nodeCount,
      interiorNodes: interiorNodeCount(plan),
      voids: voidCount(plan),
      parts: plan.partCount,
      unit: plan.unit,
    },
    repairs: [],
    questions: [],
    leftOut: [],
    notices: [],
    stress: {
      freedom: 1,
      count: 1,
      freedomLeft: 4,
      gap: 0.01,
      residual: 1e-16,
      decided: true,
      frozenJoints: 0,
      flatGroups: plan.panelCount,
      ...stress,
    },
    held: { freedomLeft: 4, frozenJoints: 0, flatGroups: plan.panelCount, clashes: [], ...held },
    verdict: 'lifts',
    reason: null,
    reasonKind: null,
    roof:
      roof === null || roofParts === null
        ? null
        : {
            rise: Math.max(...zs) - Math.min(...zs),
            riseAsked: Math.max(...zs) - Math.min(...zs),
            rimVariation: 0,
            cornerMax_mm: corner,
            flatnessMax_mm: flatness,
            flatnessRms_mm: flatness / 2,
            exactFlatnessMax_mm: 1e-12,
            worstPanels: [],
            closingError: 1e-15,
            ...roofParts,
          },
    caution,
    ...rest,
  }
  return {
    summary,
    plan,
    frozenFree: new Uint8Array(plan.jointCount),
    frozenHeld: frozenHeld ?? new Uint8Array(plan.jointCount),
    flatGroup: flatGroup ?? Int32Array.from({ length: plan.panelCount }, (_, p) => p),
    conditions: conditions ?? [],
    roof,
  }
}
