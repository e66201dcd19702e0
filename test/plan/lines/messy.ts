/** Messy input for property tests, and what must hold of whatever is made of it. */
import fc from 'fast-check'
import { expect } from 'vitest'
import type { Plan } from '../../../src/plan/plan.ts'
import { exactTurn } from '../../base/geometry/exact.ts'
import { reading, type Point, type Segment } from '../drawings.ts'

/** Faults of a plan's geometry, found by comparing all edges with all in exact arithmetic; shares no code with the reader. */
export function faults(plan: Plan): string[] {
  const found: string[] = []
  const at = (n: number): [number, number] => [plan.x[n]!, plan.y[n]!]
  const ends = Array.from({ length: plan.edgeCount }, (_, e) => [plan.origin[2 * e]!, plan.origin[2 * e + 1]!] as const)
  for (let e = 0; e < ends.length; e += 1) {
    const [a, b] = ends[e]!
    for (let n = 0; n < plan.nodeCount; n += 1) {
      const [ax, ay] = at(a), [bx, by] = at(b), [x, y] = at(n)
      if (n === a || n === b || x < Math.min(ax, bx) || x > Math.max(ax, bx) || y < Math.min(ay, by) || y > Math.max(ay, by)) continue
      if (exactTurn(...at(a), ...at(b), ...at(n)) === 0) found.push(`node ${n} on edge ${e}`)
    }
    for (let f = 0; f < e; f += 1) {
      const [c, d] = ends[f]!
      if (exactTurn(...at(a), ...at(b), ...at(c)) * exactTurn(...at(a), ...at(b), ...at(d)) < 0 &&
        exactTurn(...at(c), ...at(d), ...at(a)) * exactTurn(...at(c), ...at(d), ...at(b)) < 0) found.push(`edges ${e} and ${f} cross`)
    }
  }
  return found
}

/** Panels that hold the point, by winding. */
function panelsAt(plan: Plan, x: number, y: number): number {
  let count = 0
  for (let p = 0; p < plan.panelCount; p += 1) {
    let winding = 0
    for (let k = plan.panelStart[p]!; k < plan.panelStart[p + 1]!; k += 1) {
      const a = plan.corner[k]!, b = plan.corner[k + 1 < plan.panelStart[p + 1]! ? k + 1 : plan.panelStart[p]!]!
      const left = (plan.x[b]! - plan.x[a]!) * (y - plan.y[a]!) - (plan.y[b]! - plan.y[a]!) * (x - plan.x[a]!)
      if (plan.y[a]! <= y && plan.y[b]! > y && left > 0) winding += 1
      if (plan.y[a]! > y && plan.y[b]! <= y && left < 0) winding -= 1
    }
    if (winding !== 0) count += 1
  }
  return count
}

/** Lines on a 6 x 6 lattice, with wobbles round the snap distance: nearly repeated, nearly touching, nearly concurrent. */
const wobble = fc.constantFrom(0, 0, 0, 2e-4, -4e-4, 7e-4, -9e-4, 1.2e-3, 1e-9, -3e-10)
const end = fc.tuple(fc.integer({ min: 0, max: 5 }), fc.integer({ min: 0, max: 5 }), wobble, wobble).map(([i, j, u, v]): Point => [i + u, j + v])
const segment = fc.tuple(end, end).map(([p, q]): Segment => [p, q])

const outline = fc.tuple(fc.integer({ min: 0, max: 3 }), fc.integer({ min: 0, max: 3 }), fc.integer({ min: 1, max: 2 }), fc.integer({ min: 1, max: 2 }), wobble, fc.boolean())
  .map(([i, j, w, h, u, skew]): Point[] => [[i + u, j], [i + w, j + u], [i + w - (skew ? 0.5 : 0), j + h], [i, j + h - u]])

/** Reads messy lines moved by (dx, dy); every plan must be a subdivision. Returns how many plans there were. */
export function messyLines(seed: number, numRuns: number, dx: number, dy: number): number {
  let plans = 0
  fc.assert(
    fc.property(fc.array(segment, { minLength: 3, maxLength: 28 }), (lines) => {
      const moved = lines.map((l) => l.map(([x, y]) => [x + dx, y + dy]) as unknown as Segment)
      const result = reading({ lines: moved })
      if (!result.ok) {
        expect(['no-panels', 'island', 'corner-twice', 'no-extent']).toContain(result.problem.code)
        return
      }
      plans += 1
      expect(faults(result.value.plan)).toEqual([])
    }),
    { seed, numRuns },
  )
  return plans
}

/** Reads messy outlines; every plan must be a subdivision without overlap. Returns how often each outcome came. */
export function messyOutlines(seed: number, numRuns: number): Map<string, number> {
  const outcomes = new Map<string, number>()
  fc.assert(
    fc.property(fc.array(outline, { minLength: 2, maxLength: 5 }), fc.constantFrom('DXF', 'OBJ'), (outlines, format) => {
      const result = reading({ outlines, format })
      const outcome = result.ok ? 'read' : result.problem.code
      outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1)
      if (!result.ok) {
        expect(['panels-overlap', 'panel-twice', 'three-panels', 'island', 'corner-twice']).toContain(result.problem.code)
        return
      }
      const { plan } = result.value
      expect(faults(plan)).toEqual([])
      for (let k = 0; k < 60; k += 1) {
        const [x, y] = [0.137 + 0.61 * (k % 8), 0.141 + 0.59 * Math.floor(k / 8)]
        expect(panelsAt(plan, x, y)).toBeLessThan(2)
      }
    }),
    { seed, numRuns },
  )
  return outcomes
}
