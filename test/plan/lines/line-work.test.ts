import { Delaunay } from 'd3-delaunay'
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { interiorNodeCount, voidCount, type Plan } from '../../../src/plan/plan.ts'
import { drawing, plainly, problemOf, read, throughLines, type Point, type Segment } from '../drawings.ts'
import { finish } from '../../../src/base/steps.ts'
import { planFromDrawing } from '../../../src/plan/reading/from-drawing.ts'

const counts = (plan: Plan): number[] => [plan.panelCount, plan.nodeCount, plan.jointCount, plan.edgeCount, voidCount(plan), plan.partCount, interiorNodeCount(plan)]

/** Area of each panel by the shoelace formula about its first corner, in panel order. */
function areas(plan: Plan): number[] {
  return Array.from({ length: plan.panelCount }, (_, p) => {
    const nodes = Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]))
    const [x0, y0] = [plan.x[nodes[0]!]!, plan.y[nodes[0]!]!]
    return nodes.reduce((sum, n, k) => {
      const m = nodes[(k + 1) % nodes.length]!
      return sum + ((plan.x[n]! - x0) * (plan.y[m]! - y0) - (plan.y[n]! - y0) * (plan.x[m]! - x0)) / 2
    }, 0)
  })
}

const total = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0)

/** Edges of a Voronoi diagram clipped to a rectangle w x h, each once, with the cells' count: an outside program's plan. */
function voronoi(n: number, seed: number, w = 18, h = 12): { lines: Segment[]; cells: number; cellAreas: number[] } {
  const next = random(seed)
  const sites = Array.from({ length: n }, () => [w * next(), h * next()] as [number, number])
  const diagram = Delaunay.from(sites).voronoi([0, 0, w, h])
  const seen = new Map<string, Segment>()
  const cellAreas: number[] = []
  const key = (p: Point): string => `${p[0].toFixed(7)} ${p[1].toFixed(7)}`
  for (const polygon of diagram.cellPolygons()) {
    let twice = 0
    for (let k = 0; k + 1 < polygon.length; k += 1) {
      const [p, q] = [polygon[k] as Point, polygon[k + 1] as Point]
      twice += p[0] * q[1] - p[1] * q[0]
      if (key(p) === key(q)) continue
      seen.set([key(p), key(q)].sort().join(' / '), [p, q])
    }
    cellAreas.push(Math.abs(twice) / 2)
  }
  return { lines: [...seen.values()], cells: n, cellAreas: cellAreas.sort((a, b) => a - b) }
}

/** The first diagram from this seed on whose edges are all longer than `shortest`: noise must not blur what is drawn. */
function coarseVoronoi(n: number, seed: number, shortest: number): ReturnType<typeof voronoi> {
  for (let at = seed; ; at += 1000) {
    const diagram = voronoi(n, at)
    if (diagram.lines.every(([p, q]) => Math.hypot(q[0] - p[0], q[1] - p[1]) > shortest)) return diagram
  }
}

const turned = (lines: readonly Segment[], angle: number, dx = 0, dy = 0): Segment[] => {
  const [c, s] = [Math.cos(angle), Math.sin(angle)]
  const at = ([x, y]: Point): Point => [c * x - s * y + dx, s * x + c * y + dy]
  return lines.map(([p, q]) => [at(p), at(q)])
}

const shuffled = (lines: readonly Segment[], seed: number): Segment[] => {
  const next = random(seed)
  return lines.map((l) => [next(), next() < 0.5 ? l : ([l[1], l[0]] as Segment)] as const).sort((a, b) => a[0] - b[0]).map(([, l]) => l)
}

describe('regions of straight lines', () => {
  test.each([1, 2, 3, 4, 5, 6])('n chords of a square bound 1 + n + crossings regions (exact: Euler), seed %i', (seed) => {
    const next = random(seed)
    const n = 3 + 4 * seed
    const side = (t: number): Point => [[4 * t, 0], [1, 4 * t - 1], [3 - 4 * t, 1], [0, 4 - 4 * t]][Math.floor(4 * t)] as unknown as Point
    const chords: Segment[] = []
    while (chords.length < n) {
      const [t, u] = [next(), next()]
      if (Math.floor(4 * t) !== Math.floor(4 * u)) chords.push([side(t), side(u)])
    }
    // Twin path: every pair, by the parameters of the 2 x 2 system.
    let inner = 0
    chords.forEach(([a, b], i) => chords.slice(i + 1).forEach(([c, d]) => {
      const det = (b[0] - a[0]) * (d[1] - c[1]) - (b[1] - a[1]) * (d[0] - c[0])
      const s = ((c[0] - a[0]) * (d[1] - c[1]) - (c[1] - a[1]) * (d[0] - c[0])) / det
      const t = ((c[0] - a[0]) * (b[1] - a[1]) - (c[1] - a[1]) * (b[0] - a[0])) / det
      if (s > 0 && s < 1 && t > 0 && t < 1) inner += 1
    }))
    const frame: Segment[] = [[[0, 0], [1, 0]], [[1, 0], [1, 1]], [[1, 1], [0, 1]], [[0, 1], [0, 0]]]
    const { plan, repairs } = read({ lines: [...frame, ...chords] }, { snap_mm: 0 })
    expect(plan.panelCount).toBe(1 + n + inner)
    expect(interiorNodeCount(plan)).toBe(inner)
    expect(plan.nodeCount - plan.edgeCount + plan.panelCount).toBe(1)
    expect(total(areas(plan))).toBeCloseTo(1, 12)
    expect(repairs.map(({ code, count }) => [code, count])).toEqual([['split', inner + 2 * n]])
  })

  test('long lines that cross without a node: 4 x 3 panels', () => {
    const { plan, repairs } = read({ lines: throughLines(4, 3, 1.5) })
    expect(counts(plan)).toEqual([12, 20, 17, 31, 0, 1, 6])
    expect(repairs[0]!.where).toHaveLength(16)
    expect(repairs[0]!.message).toBe('Lines are divided at 6 crossings and 10 points where one line ends on another.')
    // Lines along the axes give crossings on round numbers.
    for (const v of [...plan.x, ...plan.y]) expect(v % 1.5).toBe(0)
  })

  test('three lines that meet within the snap distance share one node', () => {
    const frame: Segment[] = [[[-2, -2], [2, -2]], [[2, -2], [2, 2]], [[2, 2], [-2, 2]], [[-2, 2], [-2, -2]]]
    const star: Segment[] = [[[-2, 0], [2, 0]], [[0, -2], [0, 2]], [[-2, -1.9994], [2, 2.0003]]]
    const { plan } = read({ lines: [...frame, ...star] })
    expect([plan.panelCount, interiorNodeCount(plan)]).toEqual([6, 1])
    // Without snapping there is a small triangle between them: 1 + 3 lines + 3 crossings (exact: Euler).
    expect(read({ lines: [...frame, ...star] }, { snap_mm: 0 }).plan.panelCount).toBe(7)
  })
})

describe('cells of a Voronoi diagram as loose lines', () => {
  test.each([11, 12, 13, 14])('ends that miss by less than the snap distance give the same panels, seed %i', (seed) => {
    const { lines, cells, cellAreas } = coarseVoronoi(60, seed, 0.005)
    const next = random(100 + seed)
    const noisy = lines.map(([p, q]) => [p, q].map(([x, y]) => [x + 6e-4 * (next() - 0.5), y + 6e-4 * (next() - 0.5)]) as unknown as Segment)
    const clean = read({ lines })
    const { plan, repairs } = read({ lines: noisy })
    expect(clean.plan.panelCount).toBe(cells)
    expect(counts(plan)).toEqual(counts(clean.plan))
    const joined = repairs.find(({ code }) => code === 'joined')!
    expect(joined.count).toBeGreaterThan(plan.nodeCount / 2)
    expect(joined.message).toMatch(/up to 0\.\d+ mm/)
    areas(plan).sort((a, b) => a - b).forEach((area, k) => expect(Math.abs(area - cellAreas[k]!)).toBeLessThan(0.02))
    expect(total(areas(plan))).toBeCloseTo(18 * 12, 1)
  })

  test.each([21, 22, 23])('turned, shifted to survey coordinates, renumbered: the same panels, seed %i', (seed) => {
    const { lines, cellAreas } = voronoi(80, seed)
    const plain = read({ lines }).plan
    for (const changed of [turned(lines, 0.4), turned(lines, 0, 5_700_000, 4_000_000), turned(lines, 2.1, 5_700_000, 4_000_000), shuffled(lines, seed)]) {
      const { plan, repairs } = read({ lines: changed })
      expect(counts(plan)).toEqual(counts(plain))
      expect(repairs).toEqual([])
      areas(plan).sort((a, b) => a - b).forEach((area, k) => expect(Math.abs(area - cellAreas[k]!)).toBeLessThan(1e-6))
    }
    // Moved without turning, and renumbered, also the order of the panels is the same.
    for (const changed of [turned(lines, 0, 5_700_000, 4_000_000), shuffled(lines, seed)]) {
      const { plan } = read({ lines: changed })
      const before = areas(plain)
      areas(plan).forEach((area, k) => expect(area).toBeCloseTo(before[k]!, 6))
    }
  })

  test('an edge shorter than the snap distance stays when it is drawn', () => {
    // The diagram of seed 22 has one of 0.76 mm.
    const { lines } = voronoi(80, 22)
    const short = lines.filter(([p, q]) => Math.hypot(q[0] - p[0], q[1] - p[1]) < 1e-3)
    expect(short).toHaveLength(1)
    const { plan, repairs } = read({ lines })
    const lengths = Array.from({ length: plan.edgeCount }, (_, e) => {
      const a = plan.origin[2 * e]!, b = plan.origin[2 * e + 1]!
      return Math.hypot(plan.x[a]! - plan.x[b]!, plan.y[a]! - plan.y[b]!)
    })
    expect(lengths.filter((l) => l < 1e-3)).toHaveLength(1)
    expect(repairs).toEqual([])
  })

  test('in millimetres at survey coordinates nodes are written back as they were drawn', () => {
    const { lines } = voronoi(30, 31)
    const mm = lines.map(([p, q]) => [p, q].map(([x, y]) => [5_700_000_000 + 1000 * x, 4_000_000_000 + 1000 * y]) as unknown as Segment)
    const { plan } = read({ lines: mm, unit: 'mm' })
    const drawn = new Set(mm.flat().map(([x, y]) => `${x} ${y}`))
    expect(plan.panelCount).toBe(30)
    for (let n = 0; n < plan.nodeCount; n += 1) expect(drawn.has(`${plan.x[n]} ${plan.y[n]}`)).toBe(true)
  })
})

describe('faults of drawings', () => {
  const grid = throughLines(3, 2, 1.5)

  test('repeated lines count once and are named', () => {
    const again: Segment[] = [grid[1]!, [[3, 0.2], [3, 1.2]], [[4.5, 3], [0, 3]]]
    const { plan, repairs } = read({ lines: [...grid, ...again] })
    expect(plan.panelCount).toBe(6)
    expect(repairs.find(({ code }) => code === 'repeat')).toMatchObject({ state: 'applied', count: 3 })
  })

  test('loose lines and ends are trimmed and named with their length', () => {
    const loose: Segment[] = [[[10, 10], [10.5, 10]], [[1.5, 3], [1.5, 3.25]], [[1.5, 3.25], [1.8, 3.25]]]
    const { plan, repairs } = read({ lines: [...grid, ...loose] })
    expect(plan.panelCount).toBe(6)
    expect(plan.nodeCount).toBe(12)
    const repair = repairs.find(({ code }) => code === 'loose-end')!
    expect(repair.count).toBe(2)
    expect(repair.message).toContain('550 mm')
    expect(repair.where).toContainEqual([10, 10])
  })

  test('overshoots within the snap distance become nodes on the line, in the direction of their own line', () => {
    // The stem ends 0.6 mm behind and 0.4 mm before the two long lines, at an angle.
    const frame: Segment[] = [[[0, 0], [4, 0]], [[4, 0], [4, 3]], [[4, 3], [0, 3]], [[0, 3], [0, 0]]]
    const slope = 1 / 3
    const stem: Segment = [[1 - 6e-4 * slope, -6e-4], [2 - 4e-4 * slope, 3 - 4e-4]]
    const { plan, repairs } = read({ lines: [...frame, stem] })
    expect(counts(plan).slice(0, 3)).toEqual([2, 6, 1])
    const ends = Array.from(plan.x, (x, n) => [x, plan.y[n]!] as const).filter(([x]) => x > 0.5 && x < 3.5)
    expect(ends.map(([, y]) => y).sort()).toEqual([0, 3])
    for (const [x, y] of ends) expect(x).toBeCloseTo(y === 0 ? 1 : 2, 12)
    expect(repairs.find(({ code }) => code === 'joined')).toMatchObject({ count: 2, message: expect.stringContaining('0.6 mm') as string })
    expect(repairs.some(({ code }) => code === 'loose-end')).toBe(false)
  })

  test('an overshoot of 20 mm is cut off, a gap of 20 mm stays open', () => {
    const cut: Segment[] = [...throughLines(1, 1, 3), [[1, -0.02], [1, 3.02]]]
    const over = read({ lines: cut })
    expect([over.plan.panelCount, over.plan.nodeCount]).toEqual([2, 6])
    expect(over.repairs.find(({ code }) => code === 'loose-end')).toMatchObject({ count: 2, message: expect.stringContaining('20 mm') as string })
    const gap = read({ lines: [...throughLines(1, 1, 3), [[1, 0.02], [1, 3]]] })
    expect(gap.plan.panelCount).toBe(1)
    expect(gap.repairs.find(({ code }) => code === 'loose-end')!.count).toBe(1)
    expect(read({ lines: [...throughLines(1, 1, 3), [[1, 0.02], [1, 3]]] }, { snap_mm: 25 }).plan.panelCount).toBe(2)
  })

  test('lines that only link two figures are taken out', () => {
    const two: Segment[] = [...throughLines(1, 1), ...turned(throughLines(1, 1), 0, 3, 0), [[1, 0.5], [3, 0.5]]]
    const { plan, repairs } = read({ lines: two })
    expect([plan.panelCount, plan.partCount, plan.nodeCount]).toEqual([2, 2, 10])
    expect(repairs.find(({ code }) => code === 'loose-end')!.count).toBe(1)
  })

  test('a T-junction: three panels, the node at the stem is a corner of the straight one', () => {
    const { plan } = read({ lines: [[[0, 0], [8, 0]], [[8, 0], [8, 8]], [[8, 8], [0, 8]], [[0, 8], [0, 0]], [[0, 4], [8, 4]], [[4, 0], [4, 4]]] })
    const sizes = Array.from({ length: 3 }, (_, p) => plan.panelStart[p + 1]! - plan.panelStart[p]!)
    expect(plan.panelCount).toBe(3)
    // The panel above has a corner of 180 degrees where the stem ends; the lower ones have none but at the rim.
    expect(sizes).toEqual([5, 4, 4])
  })

  test('lines drawn twice a hair apart leave no sliver', () => {
    const twin: Segment[] = [...throughLines(2, 1, 2), [[2.0004, 0], [2.0008, 2]], [[2.0008, 0], [1.9993, 2]]]
    const { plan } = read({ lines: twin })
    expect([plan.panelCount, plan.nodeCount]).toEqual([2, 6])
  })
})

describe('figures inside figures', () => {
  const outer = throughLines(1, 1, 6)
  const inner: Segment[] = turned(throughLines(1, 1, 2), 0, 2, 2)

  test('a loop joined to nothing inside a panel is refused with its place', () => {
    const result = finish(planFromDrawing(drawing({ lines: [...outer, ...inner] }), plainly))
    expect(result).toMatchObject({ ok: false, problem: { code: 'island', where: { at: [2, 2] } } })
  })

  test('it is a part of its own when the space round it is a void', () => {
    const { plan } = read({ lines: [...throughLines(3, 3, 2), ...turned(throughLines(2, 1, 0.5), 0, 2.5, 2.5)] }, { voids: [[2.1, 2.1]] })
    expect([plan.panelCount, voidCount(plan), plan.partCount]).toEqual([10, 1, 2])
  })

  test('joined by joints it is a plan, and a void where a void point lies', () => {
    const spokes: Segment[] = [[[0, 0], [2, 2]], [[6, 0], [4, 2]], [[6, 6], [4, 4]], [[0, 6], [2, 4]]]
    expect(read({ lines: [...outer, ...inner, ...spokes] }).plan.panelCount).toBe(5)
    const { plan } = read({ lines: [...outer, ...inner, ...spokes] }, { voids: [[3, 3]] })
    expect([plan.panelCount, voidCount(plan)]).toEqual([4, 1])
  })

  test('a void point outside or on a line is refused with its place', () => {
    expect(problemOf({ lines: outer }, { voids: [[7, 7]] })).toBe('void-nowhere')
    expect(problemOf({ lines: outer }, { voids: [[6, 3]] })).toBe('void-nowhere')
    expect(problemOf({ lines: outer }, { voids: [[3, 3]] })).toBe('no-panels')
  })

  test('figures side by side and one in another at every depth, each in a void, are all found', () => {
    const nests: Segment[] = []
    const voids: Point[] = []
    for (let i = 0; i < 5; i += 1) {
      for (let depth = 0; depth < 4; depth += 1) {
        nests.push(...turned(throughLines(1, 1, 16 - 4 * depth), 0, 20 * i + 2 * depth, 2 * depth))
        if (depth % 2 === 0) voids.push([20 * i + 2 * depth + 1, 2 * depth + 1])
      }
      // Rings 0 to 1 and 2 to 3 are void; ring 1 to 2 would be a panel round a hole.
    }
    expect(problemOf({ lines: nests }, { voids })).toBe('island')
    const cut = Array.from({ length: 5 }, (_, i) => [[20 * i + 2, 3], [20 * i + 4, 5]] as Segment)
    const again = Array.from({ length: 5 }, (_, i) => [[20 * i + 14, 13], [20 * i + 12, 11]] as Segment)
    const { plan } = read({ lines: [...nests, ...cut, ...again] }, { voids })
    expect([plan.panelCount, plan.partCount, voidCount(plan)]).toEqual([15, 10, 5])
  })
})

describe('what cannot be a plan', () => {
  test('numbers that are none, lie beyond the world or on one point', () => {
    expect(problemOf({ lines: [...throughLines(2, 2), [[0, NaN], [1, 1]]] })).toBe('not-a-number')
    expect(problemOf({ lines: [...throughLines(2, 2), [[0, Infinity], [1, 1]]] })).toBe('not-a-number')
    expect(problemOf({ lines: [...throughLines(2, 2), [[0, 1e308], [1, 1]]] })).toBe('too-far')
    expect(problemOf({ lines: [[[1, 1], [1, 1]]] })).toBe('no-extent')
    expect(problemOf({ lines: [[[0, 0], [4, 0]], [[4, 0], [4, 4]]] })).toBe('no-panels')
    expect(problemOf({ lines: throughLines(2, 2) }, { snap_mm: -1 })).toBe('bad-snap')
    const result = finish(planFromDrawing(drawing({ lines: [...throughLines(2, 2), [[0, NaN], [1, 1]]] }), plainly))
    expect(result).toMatchObject({ problem: { where: { line: 1006 } } })
  })
})
