import { describe, expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import { random } from '../../../src/base/random.ts'
import { planFromDrawing } from '../../../src/plan/reading/from-drawing.ts'
import { voidCount } from '../../../src/plan/plan.ts'
import { drawing, plainly, problemOf, quads, read, reading, throughLines, type Point, type Segment } from '../drawings.ts'

const square = (x: number, y: number, size = 1): Point[] => [[x, y], [x + size, y], [x + size, y + size], [x, y + size]]
const codes = (r: ReturnType<typeof read>): string[] => r.repairs.map(({ code, count }) => `${code} ${count}`)

describe('outlines are the panels', () => {
  test('in file order, from the corner that the file begins with, counter-clockwise either way round', () => {
    const { plan } = read({ outlines: [square(1, 0), [...square(0, 0)].reverse()] })
    const corners = (p: number): number[][] => Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (n) => [plan.x[n]!, plan.y[n]!])
    expect(corners(0)).toEqual(square(1, 0))
    expect(corners(1)).toEqual([[0, 1], [0, 0], [1, 0], [1, 1]])
  })

  test('a corner on a neighbour\'s edge is inserted there, in silence when it lies on it', () => {
    const stack = [[[0, 0], [2, 0], [2, 1], [0, 1]], square(0, 1), square(1, 1)] as Point[][]
    const r = read({ outlines: stack })
    expect(codes(r)).toEqual([])
    expect(Array.from(r.plan.panelStart)).toEqual([0, 5, 9, 13])
    expect(r.plan.jointCount).toBe(3)
  })

  test('off the edge by half a millimetre it is inserted, counted and named, and keeps its place', () => {
    const r = read({ outlines: [[[0, 0], [2, 0], [2, 1], [0, 1]], [[0, 1], [1, 1.0005], [1, 2], [0, 2]], [[1, 1.0005], [2, 1], [2, 2], [1, 2]]] })
    expect(codes(r)).toEqual(['split 1', 'straighten 3', 'square 3'])
    expect(r.repairs[0]!.message).toContain('0.5 mm')
    expect(r.repairs[0]!.where).toEqual([[1, 1.0005]])
    expect(r.plan.jointCount).toBe(3)
  })

  test('corners that miss by less than the snap distance are joined, counted and named', () => {
    const next = random(3)
    const noisy = quads(6, 5, 1.5).map((quad) => quad.map(([x, y]) => [x + 6e-4 * (next() - 0.5), y + 6e-4 * (next() - 0.5)] as Point))
    const r = read({ outlines: noisy })
    expect([r.plan.panelCount, r.plan.nodeCount, r.plan.jointCount]).toEqual([30, 42, 49])
    expect(codes(r)).toEqual(['joined 38', 'straighten 42', 'square 42', 'equalise 41', 'symmetric 42'])
    expect(r.repairs[0]!.message).toMatch(/up to 0\.\d+ mm/)
  })

  test('differences of rounding are joined in silence, also far from the origin', () => {
    const far = quads(3, 3).map((quad, i) => quad.map(([x, y]) => [5_700_000 + x + (i % 3) * 9.3e-10, 4_000_000 + y] as Point))
    const r = read({ outlines: far })
    expect([r.plan.nodeCount, codes(r)]).toEqual([16, []])
  })

  test('an outline drawn twice counts once, whatever its direction and first corner', () => {
    const again = [...square(1, 0)].reverse()
    const r = read({ outlines: [square(0, 0), square(1, 0), [again[2]!, again[3]!, again[0]!, again[1]!]] })
    expect([r.plan.panelCount, codes(r)]).toEqual([2, ['repeat 1']])
    expect(reading({ format: 'OBJ', outlines: [square(0, 0), square(1, 0), square(1, 0)] }))
      .toMatchObject({ ok: false, problem: { code: 'panel-twice', where: { line: 12, names: ['P2', 'P3'], at: [1, 0] } } })
  })

  test('an outline narrower than the snap distance is dropped and its neighbours meet', () => {
    const r = read({ outlines: [square(0, 0), [[1, 0], [1.0006, 0], [1.0006, 1], [1, 1]], [[1.0006, 0], [2, 0], [2, 1], [1.0006, 1]]] })
    expect([r.plan.panelCount, r.plan.jointCount]).toEqual([2, 1])
    expect(r.repairs.find(({ code }) => code === 'tiny-face')).toMatchObject({ count: 1 })
  })

  test('regions that no outline covers are voids; a void point makes one of a panel', () => {
    const ring = quads(5, 3).filter((_, i) => i !== 6)
    expect(voidCount(read({ outlines: ring }).plan)).toBe(1)
    const r = read({ outlines: ring }, { voids: [[3.5, 1.5], [1.5, 1.5]] })
    expect([r.plan.panelCount, voidCount(r.plan)]).toEqual([13, 2])
    expect(problemOf({ outlines: ring }, { voids: [[9, 9]] })).toBe('void-nowhere')
  })

  test('gaps between outlines are named', () => {
    const gap = [square(0, 0), square(1.005, 0), [[0, 0], [2.005, 0], [2.005, -1], [0, -1]], [[0, 1], [2.005, 1], [2.005, 3], [0, 3]]] as Point[][]
    const r = read({ outlines: gap })
    expect([r.plan.panelCount, voidCount(r.plan)]).toEqual([4, 1])
    expect(r.notices).toEqual([expect.stringMatching(/^1 gap between panels, up to 5 mm wide, counts as a void/)])
    const closed = read({ outlines: gap }, { snap_mm: 6 })
    expect([closed.plan.panelCount, voidCount(closed.plan), closed.notices]).toEqual([4, 0, []])
  })

  test('lines along and outside the outlines do not matter, and those outside are named', () => {
    const r = read({ outlines: quads(2, 2), lines: [[[0, 0], [2, 0]], [[1, 0], [1, 2]], [[5, 5], [6, 6]]] })
    expect([r.plan.panelCount, codes(r)]).toEqual([4, ['left-out 1']])
    expect(r.repairs[0]!.where).toEqual([[5, 5]])
  })

  test('a line across an uncovered region leaves it a void', () => {
    const r = read({ outlines: quads(3, 3).filter((_, i) => i !== 4), lines: [[[1, 1], [2, 2]]] })
    expect([r.plan.panelCount, voidCount(r.plan)]).toEqual([8, 1])
  })
})

describe('outlines that are line work', () => {
  test('a perimeter with lines inside', () => {
    const r = read({ outlines: [[[0, 0], [4, 0], [4, 3], [0, 3]]], lines: throughLines(4, 3).slice(1, 4) })
    expect(r.plan.panelCount).toBe(4)
    expect(r.notices[0]).toMatch(/^A line runs inside a closed outline \(at .*\), so everything is read as line work\.$/)
  })

  test('a perimeter round its panels, and zones at several depths', () => {
    const zones: Point[][] = [square(0, 0, 4), square(0, 0, 2), [[2, 0], [4, 0], [4, 2], [2, 2]]]
    const r = read({ outlines: [...zones, ...quads(4, 4)] })
    expect([r.plan.panelCount, r.plan.jointCount]).toEqual([16, 24])
    expect(r.notices[0]).toContain('inside another')
    // The panels are named in rows from the top left.
    expect([r.plan.x[r.plan.corner[0]!], r.plan.y[r.plan.corner[0]!]]).toEqual([0, 4])
  })

  test('a loose line inside one outline only costs that line', () => {
    const r = read({ outlines: quads(2, 1), lines: [[[0.2, 0.5], [0.7, 0.5]]] })
    expect([r.plan.panelCount, codes(r)]).toEqual([2, ['loose-end 1']])
  })
})

describe('interior rings', () => {
  const outer = square(0, 0, 3), hole = square(1, 1, 1)
  const spokes: Segment[] = [[[0, 0], [1, 1]], [[3, 0], [2, 1]], [[3, 3], [2, 2]], [[0, 3], [1, 2]]]

  test('are voids among lines, whether or not something is drawn in them', () => {
    const r = read({ outlines: [outer], holes: [hole], lines: spokes })
    expect([r.plan.panelCount, voidCount(r.plan)]).toEqual([4, 1])
    const crossed = read({ outlines: [outer], holes: [hole], lines: [...spokes, [[1, 1], [2, 2]]] })
    expect([crossed.plan.panelCount, voidCount(crossed.plan)]).toEqual([4, 1])
  })

  test('an outline inside one is a panel', () => {
    const r = read({ outlines: [outer, square(1.25, 1.25, 0.5)], holes: [hole], lines: spokes })
    expect([r.plan.panelCount, voidCount(r.plan), r.plan.partCount]).toEqual([5, 1, 2])
  })

  test('a panel all round one is refused with its place', () => {
    // In a map the rest is read: the region is a void round its enclave, and that is said.
    const map = reading({ format: 'GeoJSON', outlines: [outer, hole, [[4, 0], [8, 0], [8, 4], [4, 4]]], holes: [hole] })
    expect(map.ok && [map.value.plan.panelCount, map.value.notices.filter((each) => each.includes('all round a hole')).join('')]).toEqual([
      2, '1 region runs all round a hole, which a panel cannot: left out, so that it counts as a void (line 10, at 1, 1). Divide it by a joint from its rim to the hole to make panels of it.',
    ])
    expect(reading({ outlines: [outer], holes: [hole] })).toMatchObject({ ok: false, problem: { code: 'panel-round-hole', where: { line: 10, at: [1, 1] } } })
  })

  test('between outlines they change nothing', () => {
    const r = read({ outlines: quads(3, 3).filter((_, i) => i !== 4), holes: [hole] })
    expect([r.plan.panelCount, voidCount(r.plan)]).toEqual([8, 1])
  })
})

describe('outlines that are no panels', () => {
  const place = (sketch: Parameters<typeof drawing>[0]): unknown => {
    const result = finish(planFromDrawing(drawing(sketch), plainly))
    return result.ok ? null : { code: result.problem.code, ...result.problem.where }
  }

  test('each is refused with its line, name and place', () => {
    expect(place({ outlines: [square(5, 5), [[0, 0], [2, 2], [2, 0], [0, 2]]] })).toEqual({ code: 'self-crossing', line: 11, names: ['P2'], at: [1, 1] })
    expect(place({ outlines: [square(5, 5), [[0, 0], [1, 0], [2, 0]]] })).toEqual({ code: 'no-area', line: 11, names: ['P2'], at: [0, 0] })
    expect(place({ outlines: [[[0, 0], [1, 0], [2, 1], [1, 1], [1, 0], [0, 1]]] })).toMatchObject({ code: 'corner-twice', line: 10, at: [1, 0] })
    expect(place({ outlines: [square(0, 0, 2), square(1, 1, 2)] })).toMatchObject({ code: 'panels-overlap', names: ['P1', 'P2'] })
    expect(place({ format: 'OBJ', outlines: [square(0, 0, 2), square(0.5, 0.5)] })).toMatchObject({ code: 'panels-overlap', names: ['P1', 'P2'], at: [0.5, 0.5] })
    expect(place({ format: 'OBJ', outlines: [square(0, 0), square(1, 0), [[1, 0], [3, 0.5], [1, 1]]] })).toMatchObject({ code: 'three-panels' })
    expect(place({ format: 'OBJ', outlines: [square(0, 0), [[0, 0], [1, 0], [1, 1]], [[0, 0], [1, 1], [0, 1]]] })).toMatchObject({ code: 'panels-overlap' })
    expect(place({ outlines: [square(0, 0), [[1, 0], [NaN, 0], [2, 1]]] })).toMatchObject({ code: 'not-a-number', line: 11 })
  })

  test('overlap by more than the snap distance is found, by less it is absorbed', () => {
    const lap = (by: number): Point[][] => [square(0, 0, 2), [[2 - by, 0], [4, 0], [4, 2], [2 - by, 2]]]
    expect(problemOf({ outlines: lap(0.03) })).toBe('panels-overlap')
    expect(codes(read({ outlines: lap(0.0006) }))).toEqual(['joined 2'])
  })

  test.each([1, 2, 3, 4, 5, 6, 7, 8])('one quad of many moved by half a bay overlaps wherever it is, seed %i', (seed) => {
    const next = random(seed)
    const faces = quads(12, 9)
    const which = Math.floor(next() * faces.length)
    faces[which] = faces[which]!.map(([x, y]) => [x + 0.5, y + 0.3] as Point)
    // Only the last quad of a corner of the grid has nobody to overlap in that direction.
    expect(problemOf({ format: 'OBJ', outlines: faces })).toBe(which === faces.length - 1 ? 'read' : 'panels-overlap')
    expect(problemOf({ outlines: faces })).toBe(which === faces.length - 1 ? 'read' : 'panels-overlap')
  })

  test('a panel far larger than its neighbours, and one that floats inside it', () => {
    expect(problemOf({ format: 'OBJ', outlines: [square(0, 0, 100), square(100, 0), square(40, 40)] })).toBe('panels-overlap')
    expect(read({ format: 'OBJ', outlines: [square(0, 0, 100), square(100, 0), square(101, 40)] }).plan.panelCount).toBe(3)
  })
})
