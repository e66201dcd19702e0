/** What is nearly regular: right angles, equal bays, symmetry, found with their misfit, taken on acceptance within the plan tolerance. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { finish } from '../../../src/base/steps.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import type { ReadPlan } from '../../../src/plan/read-plan.ts'
import { freeRim } from '../../../src/roof/stress/free-rim.ts'
import { cells, grid, honeycomb, plan } from '../../make/plans.ts'
import { bond, skewGrid } from '../../make/spoilt.ts'
import { read, type Point } from '../drawings.ts'

/** Outlines of a plan with every node moved by `shift`. */
const outlines = (p: Plan, shift: (x: number, y: number, node: number) => Point): Point[][] =>
  Array.from({ length: p.panelCount }, (_, k) => Array.from(p.corner.subarray(p.panelStart[k], p.panelStart[k + 1]), (n) => shift(p.x[n]!, p.y[n]!, n)))

const loose = (p: Plan, by: number, seed: number): Point[][] => {
  const next = random(seed)
  const shifts = Array.from({ length: 2 * p.nodeCount }, () => by * (2 * next() - 1))
  return outlines(p, (x, y, n) => [x + shifts[2 * n]!, y + shifts[2 * n + 1]!])
}

const words = (r: ReadPlan, code: string): string => r.repairs.filter((each) => each.code === code).map(({ state, message }) => `${state}: ${message}`).join(' ')
const codes = (r: ReadPlan): string[] => r.repairs.map(({ code }) => code)

/** Node of `got` nearest to each node of `clean`. */
const pairs = (clean: Plan, got: Plan): number[] => Array.from({ length: clean.nodeCount }, (_, n) => {
  let best = 0
  for (let m = 0; m < got.nodeCount; m += 1) if (Math.hypot(got.x[m]! - clean.x[n]!, got.y[m]! - clean.y[n]!) < Math.hypot(got.x[best]! - clean.x[n]!, got.y[best]! - clean.y[n]!)) best = m
  return best
})

/** Twice the area of each panel, by its definition: all positive when none is turned over. */
const areas = (p: Plan): number[] => Array.from({ length: p.panelCount }, (_, k) => {
  const ring = Array.from(p.corner.subarray(p.panelStart[k]!, p.panelStart[k + 1]!))
  return ring.reduce((sum, n, i) => {
    const m = ring[(i + 1) % ring.length]!
    return sum + p.x[n]! * p.y[m]! - p.y[n]! * p.x[m]!
  }, 0)
})

/** How far the plan is from what an affine map makes of the clean one, at most: 0 for a grid whose runs are straight, square and of equal bays. */
function offAffine(clean: Plan, got: Plan): number {
  const at = pairs(clean, got)
  const [o, i, j] = [0, 1, clean.nodeCount - 1]
  const det = (clean.x[i]! - clean.x[o]!) * (clean.y[j]! - clean.y[o]!) - (clean.y[i]! - clean.y[o]!) * (clean.x[j]! - clean.x[o]!)
  let most = 0
  for (let n = 0; n < clean.nodeCount; n += 1) {
    const [dx, dy] = [clean.x[n]! - clean.x[o]!, clean.y[n]! - clean.y[o]!]
    const a = (dx * (clean.y[j]! - clean.y[o]!) - dy * (clean.x[j]! - clean.x[o]!)) / det
    const b = ((clean.x[i]! - clean.x[o]!) * dy - (clean.y[i]! - clean.y[o]!) * dx) / det
    for (const xy of [got.x, got.y]) {
      const should = xy[at[o]!]! + a * (xy[at[i]!]! - xy[at[o]!]!) + b * (xy[at[j]!]! - xy[at[o]!]!)
      most = Math.max(most, Math.abs(should - xy[at[n]!]!))
    }
  }
  return most
}

describe('equal bays', () => {
  test('one node that slipped along its run goes back to the last digit, and is named with its run', () => {
    const slipped = outlines(plan([...Array.from({ length: 9 }, (_, i) => [1.5 * i, 0] as const), ...Array.from({ length: 9 }, (_, i) => [1.5 * i, 2] as const)],
      Array.from({ length: 8 }, (_, i) => [i, i + 1, i + 10, i + 9])), (x, y) => (x === 6 && y === 0 ? [6.0007, 0] : [x, y]))
    const r = read({ outlines: slipped })
    expect(words(r, 'equalise')).toBe('proposed: 8 bays of the run N1 to N17 differ by up to 1.4 mm; equalising moves 1 node by up to 0.7 mm.')
    expect(r.questions).toEqual([])
    const taken = read({ outlines: slipped }, { accept: ['equalise'] })
    expect(words(taken, 'equalise')).toBe('accepted: 8 bays of the run N1 to N17 differ by up to 1.4 mm; equalised, which moves 1 node by up to 0.7 mm.')
    for (const x of taken.plan.x) expect(Math.abs(x - 1.5 * Math.round(x / 1.5))).toBeLessThan(1e-14)
  })

  test('stay as drawn where nodes would move by more than the plan tolerance', () => {
    const slipped = outlines(grid(8, 2), (x, y) => (x === 4 && y === 0 ? [4.004, 0] : [x, y]))
    expect(words(read({ outlines: slipped }, { accept: ['all'] }), 'equalise')).toMatch(/^proposed: 8 bays .* differ by up to 8 mm; those of 1 run stay as drawn, since nodes would move by more than the plan tolerance of 1 mm/)
    expect(words(read({ outlines: slipped }, { accept: ['all'], planTolerance_mm: 6 }), 'equalise')).toMatch(/^accepted: /)
  })

  test('a pace that changes, two sorts of bays and free plans are meant', () => {
    const paced = (xs: readonly number[]): Plan => plan([...xs.map((x) => [x, 0] as const), ...xs.map((x) => [x, 1] as const)],
      xs.slice(1).map((_, i) => [i, i + 1, i + 1 + xs.length, i + xs.length]))
    const sums = (bays: readonly number[]): number[] => bays.reduce((xs, bay) => [...xs, xs[xs.length - 1]! + bay], [0])
    for (const p of [paced(sums([1, 1.002, 1.004, 1.006, 1.008])), paced(sums([1, 1, 1, 1.03, 1.03, 1.03])), cells(14, 2), skewGrid(5, 4, 35), bond(4, 4)]) {
      expect(codes(read({ outlines: outlines(p, (x, y) => [x, y]) }))).not.toContain('equalise')
    }
  })

  test('stems of a bond at thirds, which meet a run from both sides: each side has its own pace', () => {
    // Rows of 1.5 m bays, every second row shifted by 0.5 m; the rows above and below a run share no node on it.
    const rows = 4
    const cuts = (row: number): number[] => [0, ...Array.from({ length: 7 }, (_, i) => 1.5 * i + (row % 2 === 0 ? 1 : 1.5)).filter((x) => x < 9.9), 10]
    const next = random(4)
    const nodes = new Map<string, number>()
    const points: [number, number][] = []
    const node = (x: number, row: number): number => {
      const key = `${x} ${row}`
      const known = nodes.get(key) ?? points.push([x + (x === 0 || x === 10 ? 0 : 2e-4 * (2 * next() - 1)), row]) - 1
      nodes.set(key, known)
      return known
    }
    const faces: number[][] = []
    for (let row = 0; row < rows; row += 1) {
      const own = cuts(row)
      for (let k = 0; k + 1 < own.length; k += 1) {
        const between = (other: number, at: number): number[] => (other < 0 || other >= rows ? [] : cuts(other).filter((x) => x > own[k]! && x < own[k + 1]!).map((x) => node(x, at)))
        faces.push([node(own[k]!, row), ...between(row - 1, row), node(own[k + 1]!, row), node(own[k + 1]!, row + 1), ...between(row + 1, row + 1).reverse(), node(own[k]!, row + 1)])
      }
    }
    const r = read({ outlines: outlines(plan(points, faces), (x, y) => [x, y]) }, { accept: ['equalise'] })
    expect(words(r, 'equalise')).toMatch(/^accepted: Bays that are nearly equal differ by up to 0\.\d+ mm in \d+ runs/)
    const inner = Array.from(r.plan.x.keys()).filter((n) => Math.abs(r.plan.y[n]! - 2) < 0.1)
    for (const start of [1, 1.5]) {
      const xs = inner.map((n) => r.plan.x[n]!).filter((x) => x > 0.9 && x < 9.9 && Math.abs((x - start) / 1.5 - Math.round((x - start) / 1.5)) < 0.01).sort((a, b) => a - b)
      for (let k = 0; k + 2 < xs.length; k += 1) expect(Math.abs(xs[k]! - 2 * xs[k + 1]! + xs[k + 2]!)).toBeLessThan(1e-9)
    }
  })
})

describe('right angles', () => {
  /** A grid whose columns lean by `lean` over its height, and only half of them. */
  const leaning = (lean: number): Point[][] => outlines(grid(6, 4, { bay: 1.5 }), (x, y) => [x === 4.5 || x === 6 ? x + (lean * y) / 6 : x, y])

  test('are found with how far the ends are off, and made', () => {
    expect(words(read({ outlines: leaning(0.0008) }), 'square')).toBe('proposed: 2 runs are off a right angle by up to 0.4 mm; squaring moves 8 nodes by up to 0.4 mm.')
    const taken = read({ outlines: leaning(0.0008) }, { accept: ['square'] })
    expect(words(taken, 'square')).toMatch(/^accepted: /)
    for (const p of [taken.plan]) for (let h = 0; h < p.origin.length; h += 2) {
      const [dx, dy] = [p.x[p.origin[h]!]! - p.x[p.origin[h + 1]!]!, p.y[p.origin[h]!]! - p.y[p.origin[h + 1]!]!]
      expect(Math.min(Math.abs(dx), Math.abs(dy))).toBeLessThan(1e-12)
    }
  })

  test('a lean beyond that is meant, and so is a fan', () => {
    expect(codes(read({ outlines: leaning(0.03) }))).not.toContain('square')
    const fan = outlines(grid(12, 3), (x, y) => [x * (1 + y / 60), y])
    expect(codes(read({ outlines: fan }))).not.toContain('square')
  })
})

describe('symmetry', () => {
  test.each([['hexagons', honeycomb(4, 3), 1], ['a grid with a void', grid(7, 4, { voids: [[3, 1], [3, 2]] }), 2], ['square', grid(5, 5), 4]] as const)('%s: mirrored to rounding once accepted', (_, clean, lines) => {
    for (const seed of [1, 2]) {
      const sketch = { outlines: loose(clean, 0.0003, seed) }
      expect(words(read(sketch), 'symmetric')).toMatch(new RegExp(`^proposed: \\d+ nodes are off their mirror images by up to 0\\.\\d+ mm${lines > 1 ? `, about ${lines} lines` : ''}; making`))
      const { plan: got } = read(sketch, { accept: ['symmetric'] })
      const at = pairs(clean, got)
      const middle = (xy: Float64Array): number => (Math.max(...xy) + Math.min(...xy)) / 2
      const [mx, my] = [middle(clean.x), middle(clean.y)]
      // Hexagons in three rows mirror about the level line, the others about both.
      const mirror = (x: number, y: number, upright: boolean): number => Array.from(clean.x.keys()).find((n) =>
        Math.hypot(clean.x[n]! - (upright ? 2 * mx - x : x), clean.y[n]! - (upright ? y : 2 * my - y)) < 1e-9)!
      for (const upright of lines === 1 ? [false] : [true, false]) {
        // The sum of a node and its image along the normal is the same for all nodes, whatever the line's exact angle.
        const gaps = Array.from(clean.x.keys(), (n) => {
          const m = mirror(clean.x[n]!, clean.y[n]!, upright)
          return [(got.x[at[n]!]! + got.x[at[m]!]!) / 2, (got.y[at[n]!]! + got.y[at[m]!]!) / 2] as const
        })
        // Midpoints of pairs lie on one line.
        const far = gaps.reduce((best, g) => (Math.hypot(g[0] - gaps[0]![0], g[1] - gaps[0]![1]) > Math.hypot(best[0] - gaps[0]![0], best[1] - gaps[0]![1]) ? g : best), gaps[0]!)
        for (const g of gaps) {
          const cross = (far[0] - gaps[0]![0]) * (g[1] - gaps[0]![1]) - (far[1] - gaps[0]![1]) * (g[0] - gaps[0]![0])
          expect(Math.abs(cross)).toBeLessThan(1e-9)
        }
      }
      expect(codes(read({ outlines: outlines(got, (x, y) => [x, y]) }))).not.toContain('symmetric')
    }
  })

  test('one node far off leaves the plan as it is', () => {
    expect(codes(read({ outlines: outlines(honeycomb(4, 3), (x, y, n) => (n === 7 ? [x + 0.05, y] : [x, y])) }))).not.toContain('symmetric')
  })
})

describe('crooked grids lift again', () => {
  test.each([[8, 5, 1.5], [12, 8, 1.2]])('%i x %i of %f m', (m, n, bay) => {
    const clean = grid(m, n, { bay })
    for (const seed of [1, 2]) {
      const sketch = { outlines: loose(clean, 0.0003, seed) }
      const frozen = (r: ReadPlan): number => finish(freeRim(r.plan)).frozen.reduce((sum, is) => sum + is, 0)
      const freedom = (r: ReadPlan): number => finish(freeRim(r.plan)).freedom
      const before = read(sketch)
      const after = read(sketch, { accept: ['straighten', 'equalise'] })
      // Every lift of a rectangular grid is f(x) + g(y): m + n - 2 without tilts. A quad grid with nodes anywhere keeps 2 (m + n) - 3 of its node heights less its quads at most.
      expect(freedom(after)).toBe(m + n - 2)
      expect(frozen(after)).toBe(0)
      expect(freedom(before)).toBeLessThan(m + n - 2 + 1)
      expect(finish(freeRim(before.plan)).gap).not.toBeNull()
      expect(offAffine(clean, read(sketch, { accept: ['straighten', 'square', 'equalise'] }).plan)).toBeLessThan(1e-9)
      for (const r of [after, read(sketch, { accept: ['all'] })]) {
        expect(Math.min(...areas(r.plan))).toBeGreaterThan(0)
        for (let k = 0; k < r.plan.nodeCount; k += 1) expect(Math.hypot(r.plan.x[k]! - before.plan.x[k]!, r.plan.y[k]! - before.plan.y[k]!)).toBeLessThanOrEqual(0.001)
      }
    }
  })
})

test('panels narrower than the tolerance are not turned over', () => {
  // Two nodes 0.6 mm apart across a run: straightening both onto it would leave no panel between them.
  const sliver: Point[][] = [[[0, 0], [1, 0.0004], [2, 0], [2, -1], [0, -1]], [[0, 0], [1, 0.0004], [2, 0], [1, 0.001]], [[0, 0], [1, 0.001], [2, 0], [2, 1], [0, 1]]]
  const r = read({ outlines: sliver }, { accept: ['all'], snap_mm: 0.01 })
  expect(Math.min(...areas(r.plan))).toBeGreaterThan(0)
  expect(r.plan.panelCount).toBe(3)
})
