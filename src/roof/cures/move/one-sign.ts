/**
 * Where interior nodes have three joints and convex corners, the three forces at a node balance only with one sign; nodes that
 * hang together through joints pass it on. So such a part of a plan has domes or bowls for lifts and nothing else, wherever
 * its nodes are moved to. A target that curves upwards here and downwards there is none of them: it is refused before any
 * step is made, with the place.
 *
 * The target's curvature is that of a quadratic fitted by least squares to a panel's corners and its neighbours'.
 */
import type { Plan } from '../../../plan/plan.ts'

export interface SignClash {
  /** A panel where the target curves upwards and a panel where it curves downwards, side by side where there are such. */
  readonly panels: readonly [valley: number, ridge: number]
  /** How many panels curve each way more than the threshold, among those of one sign. */
  readonly valleys: number
  readonly ridges: number
  /** Panels of the part. */
  readonly of: number
}

/** A curvature counts when it is above this share of the larger one of its panel .. */
const localShare = 0.15
/** .. and of the median of the larger ones of all panels. */
const globalShare = 0.05
/** A panel's smaller curvature below this share of its larger one is none. */
const straightBelow = 0.05
/** Each sign has to be found on this share of the panels of the part, so that a rough target does not trip the rule. */
const leastShare = 0.02

/** The first part of the plan whose one sign the target contradicts; null: none. `heights` in spans (length nodeCount). */
export function signClash(plan: Plan, heights: Float64Array): SignClash | null {
  const part = oneSignParts(plan)
  const curvature = principalCurvatures(plan, heights)
  const larger = Float64Array.from({ length: plan.panelCount }, (_, p) => Math.max(Math.abs(curvature[2 * p]), Math.abs(curvature[2 * p + 1])))
  const median = larger.slice().sort()[plan.panelCount >> 1]
  const least = (p: number): number => Math.max(localShare * larger[p], globalShare * median)
  const isValley = (p: number): boolean => curvature[2 * p + 1] > least(p)
  const isRidge = (p: number): boolean => curvature[2 * p] < -least(p)
  const panels = new Map<number, number[]>()
  for (let p = 0; p < plan.panelCount; p += 1) {
    if (part[p] < 0) continue
    const list = panels.get(part[p])
    if (list === undefined) panels.set(part[p], [p])
    else list.push(p)
  }
  for (const list of panels.values()) {
    const valleys = list.filter(isValley), ridges = list.filter(isRidge)
    const enough = Math.max(2, leastShare * list.length)
    if (valleys.length < enough || ridges.length < enough) continue
    return { panels: sideBySide(plan, valleys, ridges), valleys: valleys.length, ridges: ridges.length, of: list.length }
  }
  return null
}

/**
 * Share of the panels of one-sign parts over which the target is straight one way (0 to 1): barrels and cones are limits of
 * domes, approached by ever longer panels and never reached.
 */
export function straightShare(plan: Plan, heights: Float64Array): number {
  const part = oneSignParts(plan)
  const curvature = principalCurvatures(plan, heights)
  let straight = 0, of = 0
  for (let p = 0; p < plan.panelCount; p += 1) {
    const [a, b] = [Math.abs(curvature[2 * p]), Math.abs(curvature[2 * p + 1])]
    if (part[p] < 0 || Math.max(a, b) === 0) continue
    of += 1
    if (Math.min(a, b) < straightBelow * Math.max(a, b)) straight += 1
  }
  return of === 0 ? 0 : straight / of
}

/** One of each, the same panel or neighbours where possible. */
function sideBySide(plan: Plan, valleys: readonly number[], ridges: readonly number[]): readonly [number, number] {
  const isRidge = new Set(ridges)
  const both = valleys.find((p) => isRidge.has(p))
  if (both !== undefined) return [both, both]
  for (const p of valleys) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const other = plan.panelOf[plan.cornerHalf[c] ^ 1]
      if (isRidge.has(other)) return [p, other]
    }
  }
  return [valleys[0], ridges[0]]
}

/**
 * Part of each panel in which all joints have one sign, -1: not in any (length panelCount). Joints are joined at interior
 * nodes with exactly three of them and every angle below 180 degrees.
 */
function oneSignParts(plan: Plan): Int32Array {
  const { jointCount, nodeCount, origin, rimPasses, work, panelOf, panelCount } = plan
  const root = Int32Array.from({ length: jointCount }, (_, j) => j)
  const find = (j: number): number => {
    let r = j
    while (root[r] !== r) {
      root[r] = root[root[r]]
      r = root[r]
    }
    return r
  }
  const degree = new Int32Array(nodeCount)
  const halves = new Int32Array(3 * nodeCount).fill(-1)
  for (let h = 0; h < origin.length; h += 1) {
    const n = origin[h]
    if (degree[n] < 3) halves[3 * n + degree[n]] = h
    degree[n] += 1
  }
  const isJoined = new Uint8Array(jointCount)
  for (let n = 0; n < nodeCount; n += 1) {
    if (degree[n] !== 3 || rimPasses[n] > 0) continue
    const [a, b, c] = [halves[3 * n], halves[3 * n + 1], halves[3 * n + 2]]
    const turn = (h: number, g: number): number => {
      const i = origin[h ^ 1], j = origin[g ^ 1]
      return (work[2 * i] - work[2 * n]) * (work[2 * j + 1] - work[2 * n + 1]) - (work[2 * i + 1] - work[2 * n + 1]) * (work[2 * j] - work[2 * n])
    }
    // Three directions balance with one sign when they are not in a half-plane: all turns go the same way round.
    const turns = [turn(a, b), turn(b, c), turn(c, a)]
    if (!(turns.every((t) => t > 0) || turns.every((t) => t < 0))) continue
    for (const h of [a, b, c]) {
      isJoined[h >> 1] = 1
      root[find(h >> 1)] = find(a >> 1)
    }
  }
  const part = new Int32Array(panelCount).fill(-1)
  for (let j = 0; j < jointCount; j += 1) {
    if (isJoined[j] === 0) continue
    for (const p of [panelOf[2 * j], panelOf[2 * j + 1]]) if (part[p] < 0) part[p] = find(j)
  }
  return part
}

/** Smaller and larger principal curvature of the heights at each panel (length 2 * panelCount); 0 0 where too few nodes tell. */
function principalCurvatures(plan: Plan, heights: Float64Array): Float64Array {
  const out = new Float64Array(2 * plan.panelCount)
  const seenBy = new Int32Array(plan.nodeCount).fill(-1)
  for (let p = 0; p < plan.panelCount; p += 1) {
    const nodes: number[] = []
    const take = (panel: number): void => {
      for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
        const n = plan.corner[c]
        if (seenBy[n] === p) continue
        seenBy[n] = p
        nodes.push(n)
      }
    }
    take(p)
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const other = plan.panelOf[plan.cornerHalf[c] ^ 1]
      if (other >= 0) take(other)
    }
    const found = quadraticAt(plan, heights, nodes)
    if (found === null) continue
    const [xx, xy, yy] = found
    const mean = (xx + yy) / 2, spread = Math.hypot((xx - yy) / 2, xy)
    out[2 * p] = mean - spread
    out[2 * p + 1] = mean + spread
  }
  return out
}

/** Second derivatives xx, xy, yy of the least-squares quadratic through the nodes; null where they do not settle one. */
function quadraticAt(plan: Plan, heights: Float64Array, nodes: readonly number[]): readonly [number, number, number] | null {
  if (nodes.length < 7) return null
  const { work } = plan
  const x0 = work[2 * nodes[0]], y0 = work[2 * nodes[0] + 1]
  let reach = 0
  for (const n of nodes) reach = Math.max(reach, Math.abs(work[2 * n] - x0), Math.abs(work[2 * n + 1] - y0))
  const a = new Float64Array(42)
  for (const n of nodes) {
    const x = (work[2 * n] - x0) / reach, y = (work[2 * n + 1] - y0) / reach
    const row = [1, x, y, x * x, x * y, y * y, heights[n] - heights[nodes[0]]]
    for (let i = 0; i < 6; i += 1) for (let j = 0; j < 7; j += 1) a[7 * i + j] += row[i] * row[j]
  }
  // Gauss with the largest pivot on the 6 x 7 normal equations; scaled to reach 1, they are well enough conditioned.
  for (let k = 0; k < 6; k += 1) {
    let best = k
    for (let i = k + 1; i < 6; i += 1) if (Math.abs(a[7 * i + k]) > Math.abs(a[7 * best + k])) best = i
    if (!(Math.abs(a[7 * best + k]) > 1e-9 * nodes.length)) return null
    for (let j = 0; j < 7; j += 1) {
      const keep = a[7 * k + j]
      a[7 * k + j] = a[7 * best + j]
      a[7 * best + j] = keep
    }
    for (let i = 0; i < 6; i += 1) {
      if (i === k) continue
      const share = a[7 * i + k] / a[7 * k + k]
      for (let j = k; j < 7; j += 1) a[7 * i + j] -= share * a[7 * k + j]
    }
  }
  const scale = reach * reach
  return [(2 * a[27]) / a[24] / scale, a[34] / a[32] / scale, (2 * a[41]) / a[40] / scale]
}
