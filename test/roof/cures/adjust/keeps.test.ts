/** What a plan keeps while it is adjusted, if asked: equal bays, symmetry, building axes, panels' shapes. Exact: from the definition. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../../src/base/random.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import { hexagons, movedPlanOf, shifts } from '../../../make/adjust.ts'
import { plan as planOf } from '../../../make/plans.ts'

const heightsOf = (plan: Plan, height: (x: number, y: number) => number): Float64Array =>
  Float64Array.from({ length: plan.nodeCount }, (_, n) => height(plan.work[2 * n]!, plan.work[2 * n + 1]!))
/** As much on one side as on the other. */
const vault = (_: number, y: number): number => 0.1 * (1 - 4 * y * y)
/** More on one side. */
const lopsided = (x: number, y: number): number => 0.1 * (1 - 3 * y * y - 2 * (x - 0.13) ** 2)

/** 8 x 6 bays of 1.5 m by 1.2 m, named by (column, row); `off`: where a node lies off its place, m. */
function bays(off: (i: number, j: number) => readonly [number, number]): { plan: Plan; at: (i: number, j: number) => number } {
  const points: [number, number][] = []
  for (let j = 0; j <= 6; j += 1) for (let i = 0; i <= 8; i += 1) points.push([1.5 * i + off(i, j)[0], 1.2 * j + off(i, j)[1]])
  const faces = Array.from({ length: 48 }, (_, k) => {
    const a = Math.floor(k / 8) * 9 + (k % 8)
    return [a, a + 1, a + 10, a + 9]
  })
  const plan = planOf(points, faces)
  const at = (i: number, j: number): number => {
    const [x, y] = points[9 * j + i]!
    return [...plan.x.keys()].find((n) => plan.x[n] === x && plan.y[n] === y)!
  }
  return { plan, at }
}

/** The middle row of joints is as drawn straight and evenly divided, all other inner nodes are 20 mm off at most. */
function roughButForOneRow(): ReturnType<typeof bays> {
  const next = random(3)
  const off = Array.from({ length: 63 }, (_, k) => [k % 9 === 0 || k % 9 === 8 ? 0 : 0.04 * (next() - 0.5), 0.04 * (next() - 0.5)] as const)
  return bays((i, j) => (j === 0 || j === 3 || j === 6 ? [0, 0] : off[9 * j + i]!))
}

describe('equal bays', () => {
  /** Largest difference of two bays beside one another along the middle row. */
  const uneven = ({ at }: ReturnType<typeof bays>, moved: Plan): number => {
    const x = Array.from({ length: 9 }, (_, i) => moved.x[at(i, 3)]!)
    return Math.max(...x.slice(1, -1).map((middle, k) => Math.abs(x[k]! - 2 * middle + x[k + 2]!)))
  }
  const drawn = roughButForOneRow()
  const asked = { target: heightsOf(drawn.plan, lopsided) }

  test('differ when nobody asks, stay equal when asked', () => {
    expect(uneven(drawn, movedPlanOf(drawn.plan, asked).plan)).toBeGreaterThan(1e-5)
    const kept = movedPlanOf(drawn.plan, asked, { bays: true })
    expect(kept.adjustment.bayCount).toBeGreaterThanOrEqual(7)
    expect(uneven(drawn, kept.plan)).toBeLessThan(1e-9)
    expect(kept.adjustment.unflat).toBeLessThan(1e-13)
    expect(Math.max(...shifts(drawn.plan, kept.plan))).toBeGreaterThan(1e-5)
  })
})

describe('symmetry', () => {
  /** Hexagons drawn out of shape by waves, evenly about the line along their middle, so that they do not lift. */
  const cells = (): Plan => {
    const { points, faces } = hexagons(7, 7)
    const middle = (axis: 0 | 1): number => (Math.min(...points.map((p) => p[axis])) + Math.max(...points.map((p) => p[axis]))) / 2
    const [mx, my] = [middle(0), middle(1)]
    return planOf(points.map(([x, y]): [number, number] => [
      x + 0.03 * Math.cos(1.9 * (y - my)) * Math.cos(1.3 * (x - mx)), y + 0.03 * Math.sin(1.1 * (y - my)) * Math.cos(0.9 * (x - mx)),
    ]), faces)
  }
  const plan = cells()
  /** Largest distance of a node's place from the mirror image, about the line y = middle, of its image's place. */
  const skew = (moved: Plan): number => {
    const middle = (Math.min(...plan.y) + Math.max(...plan.y)) / 2
    let most = 0
    for (let n = 0; n < plan.nodeCount; n += 1) {
      const image = [...plan.x.keys()].find((m) => Math.hypot(plan.x[m]! - plan.x[n]!, plan.y[m]! - (2 * middle - plan.y[n]!)) < 1e-6)!
      most = Math.max(most, Math.hypot(moved.x[image]! - moved.x[n]!, moved.y[image]! - (2 * middle - moved.y[n]!)))
    }
    return most
  }
  const target = heightsOf(plan, (x, y) => 0.1 * (1 - 3 * x * x - 2 * (y - 0.13) ** 2 - y * y * y))

  test('is lost to a target that has none, and kept when asked', () => {
    expect(skew(plan)).toBeLessThan(1e-6)
    expect(skew(movedPlanOf(plan, { target }).plan)).toBeGreaterThan(1e-4)
    const kept = movedPlanOf(plan, { target }, { symmetry: true })
    expect(kept.adjustment.mirrorCount).toBe(1)
    expect(skew(kept.plan)).toBeLessThan(1e-6)
    expect(kept.adjustment.unflat).toBeLessThan(1e-13)
  })

  test('a symmetric target on a symmetric plan gives the same with and without', () => {
    const even = heightsOf(plan, (x, y) => 0.1 * (1 - 3 * x * x - 3 * y * y))
    const [free, kept] = [movedPlanOf(plan, { target: even }), movedPlanOf(plan, { target: even }, { symmetry: true })]
    const apart = shifts(free.plan, kept.plan).reduce((most, value) => Math.max(most, value), 0)
    expect(apart).toBeLessThan(1e-3 * Math.max(...shifts(plan, free.plan)))
  })
})

describe('building axes', () => {
  test('nodes on one axis slide along it, nodes where two cross stay, nodes on none are free', () => {
    // One bay in three is cut by a joint that is on no axis: its nodes lie on the sides of the bay.
    const { plan, at } = bays((i, j) => (i === 3 && j === 2 ? [0.004, 0] : [0, 0]))
    const moved = movedPlanOf(plan, { target: heightsOf(plan, lopsided) }, { axes: true }).plan
    const off = at(3, 2)
    for (let n = 0; n < plan.nodeCount; n += 1) if (n !== off) expect(shifts(plan, moved)[n]).toBeLessThan(1e-12)
  })
})

describe('panels that keep their shape', () => {
  test('no side and no diagonal changes, though the panel moves', () => {
    const { plan } = roughButForOneRow()
    const panel = 20
    const nodes = [...plan.corner.slice(plan.panelStart[panel], plan.panelStart[panel + 1])]
    const distances = ({ x, y }: Plan): number[] => nodes.flatMap((a, i) => nodes.slice(i + 1).map((b) => Math.hypot(x[a]! - x[b]!, y[a]! - y[b]!)))
    const change = (moved: Plan): number => Math.max(...distances(moved).map((length, k) => Math.abs(length - distances(plan)[k]!)))
    const asked = { target: heightsOf(plan, vault) }
    expect(change(movedPlanOf(plan, asked).plan)).toBeGreaterThan(1e-5)
    const kept = movedPlanOf(plan, asked, { shapes: [panel] })
    expect(change(kept.plan)).toBeLessThan(1e-9)
    expect(Math.max(...nodes.map((n) => shifts(plan, kept.plan)[n]!))).toBeGreaterThan(1e-6)
  })
})
