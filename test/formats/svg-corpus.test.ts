/**
 * Drawings in test/corpus/svg, written by a plotting library and a text template. What must come out is what was put in:
 * 18 x 12 m in 24 panels at 1:100, as stated with the drawings.
 */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import { geojson } from '../../src/formats/geojson.ts'
import { svg } from '../../src/formats/svg.ts'
import { planFromDrawing } from '../../src/plan/reading/from-drawing.ts'
import { voidCount } from '../../src/plan/plan.ts'
import { area, drawingOf, outlines, segments, type Point } from './svg-reading.ts'

const corpus = join(import.meta.dirname, '..', 'corpus', 'svg')
const text = (name: string): string => readFileSync(join(corpus, name), 'utf8')

/** Points within a thousandth of a mm of one another are one place. */
function places(points: readonly Point[]): { count: number; of: (point: Point) => number } {
  const known: Point[] = []
  const of = ([x, y]: Point): number => known.findIndex(([u, v]) => Math.hypot(u - x, v - y) < 1e-3)
  for (const point of points) if (of(point) === -1) known.push(point)
  return { count: known.length, of }
}

test('cells.svg: 24 outlines with the areas that their relative coordinates give, in all the whole sheet', () => {
  const markup = text('cells.svg')
  const drawing = drawingOf(svg, markup)
  const loops = outlines(drawing)
  expect(loops).toHaveLength(24)
  expect([drawing.segmentLayer.length, drawing.holes.layer.length, drawing.leftOut, drawing.repairs]).toEqual([0, 0, [], []])
  // A second route to each area: the sums of the relative steps, without any of the reader's code; 10 mm a unit.
  const steps = [...markup.matchAll(/d="m([^"]*) z"/g)].map(([, d]) =>
    d!.split('l').map((pair) => pair.trim().split(' ').map(Number) as Point),
  )
  expect(steps).toHaveLength(24)
  steps.forEach(([, ...moves], i) => {
    let [x, y, twice] = [0, 0, 0]
    for (const [dx, dy] of moves) {
      twice += x * (y + dy) - (x + dx) * y
      x += dx
      y += dy
    }
    expect(Math.abs(area(loops[i]!) - 50 * twice)).toBeLessThan(1e-9 * 100 * Math.abs(twice))
  })
  // The mirror in the file and the y axis of the paper cancel: counter-clockwise stays so, and the sheet is 180 x 120 mm.
  for (const loop of loops) expect(area(loop)).toBeGreaterThan(0)
  expect(loops.reduce((sum, loop) => sum + area(loop), 0)).toBeCloseTo(180 * 120, 4)
  const all = loops.flat()
  expect(Math.min(...all.map(([x]) => x))).toBeCloseTo(0, 6)
  expect(Math.min(...all.map(([, y]) => y))).toBeCloseTo(0, 6)
  expect(Math.max(...all.map(([x]) => x))).toBeCloseTo(180, 6)
})

test('cells-plot.svg: 73 lines that bound 24 faces of the same shapes, and a background left out', () => {
  const drawing = drawingOf(svg, text('cells-plot.svg'))
  const lines = segments(drawing)
  expect(lines).toHaveLength(73)
  expect(drawing.outlines.layer.length).toBe(0)
  expect(drawing.leftOut).toEqual([{ kind: 'page background', layer: 'patch_1', count: 1 }])
  expect(drawing.repairs).toEqual([])
  // Euler: faces = lines - nodes + parts, for one connected net.
  expect(lines.length - places(lines.flat()).count + 1).toBe(24)
  // The same net as cells.svg: its 73 sides have the same lengths, in the plot's own scale.
  const sides = new Map<string, number>()
  const loops = outlines(drawingOf(svg, text('cells.svg')))
  const { of } = places(loops.flat())
  for (const loop of loops) {
    loop.forEach((from, i) => {
      const to = loop[(i + 1) % loop.length]!
      sides.set([of(from), of(to)].sort((a, b) => a - b).join(' '), Math.hypot(to[0] - from[0], to[1] - from[1]))
    })
  }
  expect(sides.size).toBe(73)
  const sorted = (values: Iterable<number>): number[] => [...values].sort((a, b) => a - b)
  const plotted = sorted(lines.map(([[x, y], [u, v]]) => Math.hypot(u - x, v - y)))
  const drawn = sorted(sides.values())
  // 11.545... mm a metre: the axes are 589.09 pt wide for 18 m.
  const scale = (((618.545455 - 29.454545) / 72) * 25.4) / 180
  plotted.forEach((length, i) => expect(Math.abs(length - scale * drawn[i]!)).toBeLessThan(2e-4))
})

test('both are plans of 24 panels and 50 nodes, cells.svg of 18 x 12 m', () => {
  for (const name of ['cells.svg', 'cells-plot.svg']) {
    const read = finish(planFromDrawing(drawingOf(svg, text(name)), { unit: null, scale: 100, snap_mm: null, voids: [], accept: [] }))
    if (!read.ok) throw new Error(JSON.stringify(read.problem))
    const { plan } = read.value
    expect([plan.panelCount, plan.nodeCount, plan.edgeCount, plan.partCount, plan.unit], name).toEqual([24, 50, 73, 1, 'm'])
    if (name === 'cells.svg') expect(Math.max(...plan.x)).toBeCloseTo(18, 7)
  }
})

test('the samples of Tern Yard: a hall of 52 panels with an arc for a gable, a ring of 36 panels round a court', () => {
  const sample = (name: string, scale: number | null) => {
    const markup = readFileSync(join(import.meta.dirname, '..', '..', 'samples', name), 'utf8')
    expect(markup.length).toBeLessThan(30_000)
    const drawing = drawingOf(name.endsWith('.svg') ? svg : geojson, markup, scale === null ? {} : { metresPerUnit: scale / 1000 })
    const read = finish(planFromDrawing(drawing, { unit: null, scale, snap_mm: null, voids: [], accept: [] }))
    if (!read.ok) throw new Error(JSON.stringify(read.problem))
    return read.value
  }
  const hall = sample('tern-yard-hall.svg', 100)
  expect([hall.plan.panelCount, voidCount(hall.plan), hall.plan.partCount]).toEqual([52, 0, 1])
  expect(hall.leftOut.map(({ kind, count }) => `${count} ${kind}`)).toEqual(['3 text', '1 line, hidden', '1 page background'])
  // Six arcs of 30 degrees and 6 m radius: n chords leave an arc by r (1 - cos(pi / 12 / n)); 7 are the fewest within 5 mm.
  const leaves = (n: number): number => 6000 * (1 - Math.cos(Math.PI / 12 / n))
  expect([leaves(6) > 5, leaves(7) <= 5]).toEqual([true, true])
  expect(hall.repairs).toMatchObject([{ code: 'chords', count: 6, message: expect.stringContaining('became 42 chords') }])
  const court = sample('tern-yard-court.geojson', null)
  expect([court.plan.panelCount, court.plan.jointCount, voidCount(court.plan), court.plan.partCount]).toEqual([36, 54, 1, 1])
})
