/** Adjusting plans that almost lift, that lift already and that cannot. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../../src/base/random.ts'
import type { Plan } from '../../../../src/plan/plan.ts'
import type { Moved } from '../../../../src/roof/cures/move/move-nodes.ts'
import { hexagons, movedPlanOf, newlyReflex, outcome, rootMeanSquare, shifts } from '../../../make/adjust.ts'
import { jittered } from '../../../make/jittered.ts'
import { level, raise } from '../../../make/raise.ts'
import { cells, grid, plan as planOf } from '../../../make/plans.ts'

const rise = 0.07
/** Heights in spans that a function of the working coordinates gives. */
const heightsOf = (plan: Plan, height: (x: number, y: number) => number): Float64Array =>
  Float64Array.from({ length: plan.nodeCount }, (_, n) => height(plan.work[2 * n]!, plan.work[2 * n + 1]!))
/** Its tangent planes at Voronoi sites are a lift of Voronoi cells. */
const paraboloid = (x: number, y: number): number => rise * (1 - (x * x + y * y) / 0.36)

const honeycomb = (columns: number, rows: number): Plan => {
  const { points, faces } = hexagons(columns, rows)
  return planOf(points, faces)
}

describe('Voronoi cells moved at random, a paraboloid asked', () => {
  for (const count of [400, 2500]) {
    for (const share of [0.001, 0.01, 0.05]) {
      test(`${count} cells, ${100 * share} % of the panel size: back by no more than they were moved, flat, as high as asked`, () => {
        const { plan, rms } = jittered(cells(count, 11), share, 5)
        const target = heightsOf(plan, paraboloid)
        const moved = movedPlanOf(plan, { target })
        expect(rootMeanSquare(shifts(plan, moved.plan))).toBeLessThan(rms)
        expect(moved.adjustment.unflat).toBeLessThan(1e-13)
        expect(moved.heightError).toBeLessThan(0.05 * rise)
        expect(newlyReflex(plan, moved.plan)).toBe(0)
        const before = raise(plan, { target }), after = raise(moved.plan, { target: heightsOf(moved.plan, paraboloid), flat: 1e-9 })
        expect(before.verdict).not.toBe('lifts')
        expect(after.verdict).toBe('lifts')
        expect(after.free.freedom).toBeGreaterThanOrEqual(1)
        expect(after.roof!.residual).toBeLessThan(1e-12)
        const heights = after.roof!.heights
        expect(Math.max(...heights) - Math.min(...heights)).toBeGreaterThan(0.95 * (Math.max(...target) - Math.min(...target)))
      })
    }
  }
})

describe('hexagons', () => {
  test('on a dome: they lift as they are, so nothing moves', () => {
    const plan = honeycomb(12, 10)
    const moved = movedPlanOf(plan, { target: heightsOf(plan, paraboloid) }, { rim: 'free' })
    expect(Math.max(...shifts(plan, moved.plan))).toBeLessThan(1e-9)
  })

  test('a dome with mild waves of positive curvature is reached', () => {
    const plan = honeycomb(12, 10)
    const target = heightsOf(plan, (x, y) => paraboloid(x, y) + 0.0015 * Math.sin(9 * x) * Math.cos(8 * y))
    const moved = movedPlanOf(plan, { target }, { rim: 'free' })
    expect(raise(moved.plan, {}).verdict).toBe('lifts')
    expect(moved.heightError).toBeLessThan(0.05 * rise)
    expect(newlyReflex(plan, moved.plan)).toBe(0)
  })

  for (const [name, height] of [
    ['a saddle', (x: number, y: number) => rise * (x * x - y * y) * 4],
    ['waves with hollows', (x: number, y: number) => 0.3 * paraboloid(x, y) + 0.01 * Math.sin(12 * x) * Math.cos(10 * y)],
  ] as const) {
    test(`${name}: refused before any step, by the one-sign rule, with the place`, () => {
      const plan = honeycomb(12, 10)
      const found = outcome(plan, { target: heightsOf(plan, height) }, { rim: 'free' })
      expect(found.kind).toBe('refused')
      if (found.kind !== 'refused') return
      expect(found.refusal.code).toBe('one-sign')
      expect(found.refusal.message).toMatch(/three joints meet at every node .*P\d+ \(/)
    })
  }

  for (const [name, height] of [
    ['a barrel', (_: number, y: number) => rise * (1 - 6 * y * y)],
    ['a cone', (x: number, y: number) => rise * (1 - 2 * Math.hypot(x, y))],
  ] as const) {
    test(`${name}, curved one way only: comes within the height bound, or fails naming the zero curvature`, () => {
      const plan = honeycomb(12, 10)
      const found = outcome(plan, { target: heightsOf(plan, height) }, { rim: 'free' })
      if (found.kind !== 'moved') {
        expect(found.kind === 'failed' && found.message).toMatch(/zero curvature/)
        return
      }
      expect(found.moved.adjustment.unflat).toBeLessThan(1e-9)
      expect(found.moved.heightError).toBeLessThan(0.05 * found.moved.targetRange)
      expect(newlyReflex(plan, found.moved.plan)).toBe(0)
    })
  }
})

describe('refused or failed', () => {
  test('quads within a level rim: level wherever nodes are moved to', () => {
    const found = outcome(grid(6, 4, { loose: 0.1 }), { conditions: [level('rim', { rim: 'outer' })] })
    expect(found.kind).toBe('refused')
    if (found.kind === 'refused') expect(found.refusal.message).toMatch(/24 panels level, wherever the nodes are moved to/)
  })

  test('a plan with every node fixed: fails, and says how far out of flat it stays', () => {
    const { plan } = jittered(cells(60, 4), 0.05, 2)
    const found = outcome(plan, { target: heightsOf(plan, paraboloid) }, { fixed: [...plan.x.keys()] })
    expect(found.kind).toBe('failed')
    if (found.kind === 'failed') expect(found.message).toMatch(/out of flat|another roof/)
  })

  test('a soft target that ends in another roof: cells whose nodes stay lift to their own dome and to no steeper-sided one', () => {
    const plan = cells(60, 4)
    const found = outcome(plan, { target: heightsOf(plan, (x, y) => rise * (1 - (x * x + y * y) ** 2 / 0.1)) }, { fixed: [...plan.x.keys()] })
    expect(found.kind).toBe('failed')
    if (found.kind === 'failed') expect(found.message).toMatch(/another roof: it misses the asked heights by \d+/)
  })

  test('nodes that may not move as far as they would have to', () => {
    const { plan } = jittered(cells(60, 4), 0.05, 2)
    const free = movedPlanOf(plan, { target: heightsOf(plan, paraboloid) })
    const far = Math.max(...shifts(plan, free.plan)) / plan.frame.span
    const held = outcome(plan, { target: heightsOf(plan, paraboloid) }, { largestShift: far * 0.8 })
    // Either all moves are within the bound, or no plan is given out.
    if (held.kind === 'moved') expect(Math.max(...shifts(plan, held.moved.plan))).toBeLessThan(far * 0.81 * plan.frame.span)
    else expect(held.kind).toBe('failed')
    const tiny = outcome(plan, { target: heightsOf(plan, paraboloid) }, { largestShift: far * 0.05 })
    expect(tiny.kind).toBe('failed')
  })
})

describe('what is kept', () => {
  const drawn = jittered(cells(120, 8), 0.02, 3).plan
  const target = heightsOf(drawn, paraboloid)

  test('fixed nodes stay to the last digit, rim nodes stay on the sides, corners stay', () => {
    const fixed = [5, 17, 40]
    const { plan } = movedPlanOf(drawn, { target }, { fixed })
    for (const n of fixed) expect([plan.x[n], plan.y[n]]).toEqual([drawn.x[n], drawn.y[n]])
    const onSide = (of: Plan, n: number): string => [Math.min(...of.x), Math.max(...of.x)].map((x) => Math.abs(of.x[n]! - x) < 1e-12)
      .concat([Math.min(...of.y), Math.max(...of.y)].map((y) => Math.abs(of.y[n]! - y) < 1e-12)).join()
    for (let n = 0; n < drawn.nodeCount; n += 1) if (drawn.rimPasses[n]! > 0) expect(onSide(plan, n)).toBe(onSide(drawn, n))
  })

  test('levels are met to the last digit', () => {
    const nodes = ['N9', 'N31', 'N77']
    const conditions = [level('three nodes', { nodes }, 0.05 * drawn.frame.span)]
    const found = movedPlanOf(drawn, { target, conditions })
    for (const name of nodes) expect(found.adjustment.state.heights[Number(name.slice(1)) - 1]).toBe(0.05)
    const after = raise(found.plan, { target, conditions })
    expect(after.verdict).toBe('lifts')
  })

  test('edges keep the length asked for', () => {
    const { plan } = movedPlanOf(drawn, { target }, { leastEdge: 0.004 })
    const length = (of: Plan, e: number): number => {
      const [a, b] = [of.origin[2 * e]!, of.origin[2 * e + 1]!]
      return Math.hypot(of.x[a]! - of.x[b]!, of.y[a]! - of.y[b]!) / drawn.frame.span
    }
    for (let e = 0; e < drawn.edgeCount; e += 1) expect(length(plan, e)).toBeGreaterThan(0.98 * Math.min(0.004, length(drawn, e)))
  })

  test('no corner gets sharper than asked, unless it was', () => {
    const sharpest = 50
    const { plan } = movedPlanOf(drawn, { target }, { leastAngle: (sharpest * Math.PI) / 180 })
    const corners = (of: Plan): number[] => Array.from({ length: of.panelCount }, (_, p) => {
      const nodes = [...of.corner.subarray(of.panelStart[p], of.panelStart[p + 1])]
      return nodes.map((node, k) => {
        const [a, b] = [nodes[(k + nodes.length - 1) % nodes.length]!, nodes[(k + 1) % nodes.length]!]
        const [ax, ay, bx, by] = [of.x[a]! - of.x[node]!, of.y[a]! - of.y[node]!, of.x[b]! - of.x[node]!, of.y[b]! - of.y[node]!]
        return (Math.abs(Math.atan2(ax * by - ay * bx, ax * bx + ay * by)) * 180) / Math.PI
      })
    }).flat()
    const before = corners(drawn)
    corners(plan).forEach((angle, k) => expect(angle).toBeGreaterThan(Math.min(sharpest, before[k]!) - 0.5))
  })

  test('straight joint runs stay straight: a T-junction, and a line across the plan', () => {
    // Two rows of bricks: each head joint ends on the bed joint, which runs straight through; voids none.
    const plan = planOf(
      [[0, 0], [3, 0.02], [6, 0], [9, 0], [0, 2], [1.5, 2], [3, 2], [4.6, 2], [6, 2], [7.5, 2], [9, 2], [0, 4], [1.5, 4.1], [4.5, 4], [7.4, 4], [9, 4]],
      [[0, 1, 6, 5, 4], [1, 2, 8, 7, 6], [2, 3, 10, 9, 8], [4, 5, 12, 11], [5, 6, 7, 13, 12], [7, 8, 9, 14, 13], [9, 10, 15, 14]],
    )
    const found = outcome(plan, { target: heightsOf(plan, (_, y) => 0.1 * (1 - 4 * y * y)) }, { rim: 'free' })
    if (found.kind !== 'moved') throw new Error(JSON.stringify(found))
    const { x, y } = found.moved.plan
    const bed = [...plan.x.keys()].filter((n) => plan.y[n] === 2).sort((a, b) => plan.x[a]! - plan.x[b]!)
    const [a, b] = [bed[0]!, bed[bed.length - 1]!]
    for (const n of bed) expect(Math.abs((x[n]! - x[a]!) * (y[b]! - y[a]!) - (y[n]! - y[a]!) * (x[b]! - x[a]!))).toBeLessThan(1e-9)
  })
})

describe('voids, parts, pinch nodes', () => {
  const asked = (plan: Plan): Moved => movedPlanOf(plan, { target: heightsOf(plan, paraboloid) })
  /** Every fourth cell of a Voronoi plan with its nodes moved is left out. */
  const withoutPanels = (plan: Plan, out: (p: number) => boolean): Plan => {
    const faces = Array.from({ length: plan.panelCount }, (_, p) => [...plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1])]).filter((_, p) => !out(p))
    return planOf(Array.from(plan.x, (x, n) => [x, plan.y[n]!] as const), faces)
  }

  test('voids and pinch nodes where panels are missing', () => {
    const plan = withoutPanels(jittered(cells(150, 6), 0.01, 4).plan, (p) => p % 11 === 5)
    expect(plan.rimIsVoid.reduce((sum, is) => sum + is, 0)).toBeGreaterThan(3)
    const moved = asked(plan)
    expect(moved.adjustment.unflat).toBeLessThan(1e-13)
    expect(newlyReflex(plan, moved.plan)).toBe(0)
  })

  test('two parts, each with its own tilt', () => {
    const { plan: all } = jittered(cells(150, 6), 0.01, 4)
    const middle = (p: number): number => {
      const nodes = [...all.corner.slice(all.panelStart[p], all.panelStart[p + 1])]
      return nodes.reduce((sum, n) => sum + all.work[2 * n]!, 0) / nodes.length
    }
    const plan = withoutPanels(all, (p) => Math.abs(middle(p)) < 0.06)
    expect(plan.partCount).toBe(2)
    expect(asked(plan).adjustment.unflat).toBeLessThan(1e-13)
  })
})

describe('quads', () => {
  test('a grid drawn a few millimetres off, both long sides level: reaches a surface curved along and across', () => {
    const next = random(4)
    const points: [number, number][] = []
    for (let j = 0; j <= 8; j += 1) {
      for (let i = 0; i <= 12; i += 1) {
        const inside = i > 0 && i < 12 && j > 0 && j < 8
        points.push([1.5 * i + (inside ? 0.02 * (next() - 0.5) : 0), 1.5 * j + (inside ? 0.02 * (next() - 0.5) : 0)])
      }
    }
    const faces = Array.from({ length: 96 }, (_, k) => {
      const a = Math.floor(k / 12) * 13 + (k % 12)
      return [a, a + 1, a + 14, a + 13]
    })
    const plan = planOf(points, faces)
    const height = (x: number, y: number): number => 0.13 * (1 - (y / (1 / 3)) ** 2) * (1 + 0 * x)
    const target = heightsOf(plan, height)
    const conditions = [level('south', { run: [[0, 0], [18, 0]] }), level('north', { run: [[0, 12], [18, 12]] })]
    const found = movedPlanOf(plan, { target, conditions })
    const after = raise(found.plan, { target: heightsOf(found.plan, height), conditions })
    expect(['lifts', 'lifts in part']).toContain(after.verdict)
    expect(found.heightError).toBeLessThan(0.05 * 0.13)
    expect(rootMeanSquare(shifts(plan, found.plan))).toBeLessThan(0.01)
  })
})
