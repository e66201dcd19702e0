/** Drawings against what can be worked out by hand from the definition of each roof. */
import { expect, test } from 'vitest'
import { fallBearing, fallPoint, gradientAt, slopeOf } from '../../../src/paper/drawing/fall.ts'
import { hatchPolygon } from '../../../src/paper/drawing/hatch.ts'
import { joints, jointKinds } from '../../../src/paper/drawing/joint-kinds.ts'
import { readingNames } from '../../../src/paper/drawing/reading.ts'
import { readingOf } from '../../../src/paper/drawing/readings.ts'
import { planDrawing } from '../../../src/paper/drawing/plan-drawing.ts'
import { roofDrawing } from '../../../src/paper/drawing/roof-drawing.ts'
import { slopeChart, chartFit } from '../../../src/paper/drawing/slope-chart.ts'
import { projector, stockView } from '../../../src/paper/drawing/projection.ts'
import { escaped, toSvg } from '../../../src/paper/drawing/svg.ts'
import { themes } from '../../../src/paper/drawing/theme.ts'
import { figure, signed, slopeFigure, flatness } from '../../../src/paper/drawing/figures.ts'
import { fitted, toPlan, toSheet, zoomed } from '../../../src/paper/drawing/plan-window.ts'
import { pyramid, translated, withFrozen } from './answers.ts'

const limits = { leastSlope: 3, flat_mm: 1 }

test('a pyramid falls outwards: its chart lies the same way round as its plan (exact: worked out by hand)', () => {
  const { roof } = pyramid()
  // South, east, north, west panels of slope 45 degrees.
  expect([0, 1, 2, 3].map((p) => fallBearing(roof!.gradient, p))).toEqual([180, 90, 0, 270])
  for (let p = 0; p < 4; p += 1) expect(slopeOf(roof!.gradient, p)).toBeCloseTo(45, 10)
  const [x, y] = fallPoint(roof!.gradient, 1)
  expect([x, y]).toEqual([1, -0])
  expect(gradientAt(x, y).map((v) => v + 0)).toEqual([roof!.gradient[2], roof!.gradient[3]! + 0])
})

test('joints of a pyramid are ridges that fold by 60 degrees; turned upside down, valleys (exact: the normals (0,-1,1) and (1,0,1))', () => {
  const answer = pyramid()
  const up = joints(answer)
  expect(Array.from(up.kind, (k) => jointKinds[k])).toEqual(['ridge', 'ridge', 'ridge', 'ridge'])
  for (const fold of up.fold_deg) expect(fold).toBeCloseTo(60, 9)
  // The force is the jump of slope, |a_L - a_R| = sqrt 2.
  for (const force of up.force) expect(force).toBeCloseTo(Math.SQRT2, 12)
  const bowl = joints({ ...answer, roof: { ...answer.roof!, stress: answer.roof!.stress.map((s) => -s), gradient: answer.roof!.gradient.map((g) => -g) } })
  expect(bowl.counts).toEqual([0, 4, 0, 0])
  expect(joints(withFrozen(answer, [2])).counts).toEqual([3, 0, 0, 1])
})

test('every edge of the slope chart is perpendicular to its joint and as long as its force (Maxwell 1864)', () => {
  const answer = translated(7, 5)
  const { plan, roof } = answer
  const { force } = joints(answer)
  for (let j = 0; j < plan.jointCount; j += 1) {
    const a = fallPoint(roof!.gradient, plan.panelOf[2 * j]!)
    const b = fallPoint(roof!.gradient, plan.panelOf[2 * j + 1]!)
    const from = plan.origin[2 * j]!, to = plan.origin[2 * j + 1]!
    const dx = plan.x[to]! - plan.x[from]!, dy = plan.y[to]! - plan.y[from]!
    expect(Math.abs((b[0] - a[0]) * dx + (b[1] - a[1]) * dy)).toBeLessThan(1e-12)
    expect(Math.hypot(b[0] - a[0], b[1] - a[1])).toBeCloseTo(force[j]!, 12)
  }
})

test('the counts of every legend add up to the panels or the joints that fold', () => {
  const answer = withFrozen(translated(9, 6, 2, [[3, 2], [4, 2]]), [3, 12])
  const j = joints(answer)
  for (const name of readingNames) {
    const reading = readingOf(name, answer, j, limits)
    const total = (list: readonly { count: number }[]): number => list.reduce((sum, entry) => sum + entry.count, 0)
    if (reading.panelClass !== null && name !== 'group') expect(total(reading.panelClasses)).toBe(answer.plan.panelCount)
    if (reading.jointClass !== null) expect(total(reading.jointClasses)).toBe(j.counts[0] + j.counts[1])
  }
})

test('a panel under the least slope is flagged whatever it is, one exactly on the tolerance is within it', () => {
  const answer = translated(8, 8, 1)
  const slopes = readingOf('slope', answer, joints(answer), { leastSlope: 7, flat_mm: 1 })
  const under = Array.from(slopes.value).filter((slope) => slope < 7).length
  expect(under).toBeGreaterThan(0)
  expect(slopes.panelClasses[0]).toMatchObject({ flagged: true, count: under, upTo: 7 })
  const flat = new Float64Array(answer.plan.panelCount)
  flat[0] = 1
  flat[1] = 1.0001
  const flatnesses = readingOf('flatness', { ...answer, roof: { ...answer.roof!, flatness_mm: flat } }, joints(answer), limits)
  expect(flatnesses.panelClasses[flatnesses.panelClass![0]!]!.flagged).toBe(false)
  expect(flatnesses.panelClasses[flatnesses.panelClass![1]!]!.flagged).toBe(true)
})

test('hatching stays inside an L-shaped panel (exact: worked out by hand from the definition)', () => {
  const polygon = Float64Array.of(0, 0, 10, 0, 10, 4, 4, 4, 4, 10, 0, 10)
  const inside = (x: number, y: number): boolean => x >= -1e-9 && y >= -1e-9 && ((x <= 10 + 1e-9 && y <= 4 + 1e-9) || (x <= 4 + 1e-9 && y <= 10 + 1e-9))
  for (const hatch of [{ kind: 'batter', spacing: 1 }, { kind: 'water' }, { kind: 'cross', spacing: 1.3 }, { kind: 'double', spacing: 2 }, { kind: 'dots', spacing: 1 }] as const) {
    const strokes: number[] = []
    hatchPolygon(strokes, polygon, hatch, hatch.kind === 'water' ? 0.1 : 1, 0.3, -0.8)
    expect(strokes.length).toBeGreaterThan(8)
    for (let i = 0; i < strokes.length; i += 4) {
      const [x0, y0, x1, y1] = strokes.slice(i, i + 4) as [number, number, number, number]
      for (const t of [0, 0.25, 0.5, 0.75, 1]) expect(inside(x0 + t * (x1 - x0), y0 + t * (y1 - y0))).toBe(true)
    }
  }
})

test('batter strokes start at the upper edge and run down the fall', () => {
  const strokes: number[] = []
  // Rising to the north: water runs south, so strokes hang from y = 10.
  hatchPolygon(strokes, Float64Array.of(0, 0, 10, 0, 10, 10, 0, 10), { kind: 'batter', spacing: 2 }, 1, 0, 1)
  for (let i = 0; i < strokes.length; i += 4) {
    expect(strokes[i + 1]).toBeCloseTo(10, 12)
    expect(strokes[i + 3]!).toBeLessThan(10)
    expect(strokes[i]).toBeCloseTo(strokes[i + 2]!, 12)
  }
})

test('seen from the south the roof keeps the x of the plan; from above it is the plan', () => {
  const south = projector(stockView('south', 1.6), 10)
  const above = projector(stockView('above', 1.6), 10)
  expect(south(3, 2, 1)[0]).toBeCloseTo(3, 12)
  // 35 degrees above: up = cos 35 z + sin 35 y.
  expect(south(3, 2, 1)[1]).toBeCloseTo(Math.cos((35 * Math.PI) / 180) + 2 * Math.sin((35 * Math.PI) / 180), 12)
  expect(above(3, 2, 1)[0]).toBeCloseTo(3, 12)
  expect(above(3, 2, 1)[1]).toBeCloseTo(2, 12)
  expect(projector(stockView('east', 1.6), 10)(0, 3, 0)[0]).toBeCloseTo(3, 12)
})

test('a window takes sheet points back to the plan, and zooming keeps the point under the hand', () => {
  const window = fitted(translated(6, 4).plan, { left: 10, top: 20, right: 400, bottom: 300 })
  const [px, py] = toSheet(window, 2.5, 1.25)
  const [x, y] = toPlan(window, px, py)
  expect([x, y]).toEqual([expect.closeTo(2.5, 12), expect.closeTo(1.25, 12)])
  const near = toSheet(zoomed(window, 3, px, py), 2.5, 1.25)
  expect(near).toEqual([expect.closeTo(px, 9), expect.closeTo(py, 9)])
})

test('SVG: the same bytes twice, every panel named once, words escaped', () => {
  const answer = { ...translated(5, 4), conditions: [{ name: '<script>&"\'', kind: 'level', soft: false, nodes: Int32Array.of(0, 1) }] }
  const j = joints(answer)
  const reading = readingOf('slope', answer, j, limits)
  const list = planDrawing(answer, { width: 500, height: 400, reading, joints: j, window: null, selection: null, furniture: true })
  const svg = toSvg(list, themes.day)
  expect(toSvg(list, themes.day)).toBe(svg)
  for (let p = 1; p <= 20; p += 1) expect(svg.split(`id="P${p}"`).length).toBe(2)
  expect(svg).not.toContain('<script>')
  expect(svg).toContain('&lt;script&gt;&amp;&quot;&#39;')
  expect(escaped('a\u0000b\ud800c')).toBe('abc')
  expect(svg).not.toMatch(/NaN|Infinity|undefined/)
})

test('all six readings, three drawings, 400 and 10,000 panels: nothing undefined, a dozen batches', () => {
  for (const n of [20, 100]) {
    const answer = translated(n, n)
    const j = joints(answer)
    for (const name of readingNames) {
      const reading = readingOf(name, answer, j, limits)
      const plan = planDrawing(answer, { width: 572, height: 436, reading, joints: j, window: null, selection: { kind: 'panel', index: 3 }, furniture: true })
      const roof = roofDrawing(answer, { width: 572, height: 300, reading, joints: j, view: stockView('south', 1.6), exaggeration: 1, scale: null, selection: null })
      for (const list of [plan, roof]) expect(toSvg(list, themes.night)).not.toMatch(/NaN|Infinity|undefined/)
      if (n === 100) expect(plan.items.length).toBeLessThan(120)
    }
    const chart = slopeChart(answer, { width: 380, height: 436, joints: j, leastSlope: 3, unit: 'ratio', window: chartFit(answer, 380, 436), selection: null, before: answer.roof!.gradient, tones: null })
    expect(toSvg(chart, themes.day)).not.toMatch(/NaN|Infinity|undefined/)
  }
})

test('figures: thin spaces, true minus, never minus nought', () => {
  expect(figure(1234567.891, 1)).toBe('1\u202f234\u202f567.9')
  expect(figure(-0.004, 2)).toBe('0.00')
  expect(signed(-12)).toBe('\u221212')
  expect(signed(1895)).toBe('+1\u202f895')
  expect(flatness(0.0004)).toBe('better than 0.01 mm')
  // tan 5 degrees = 0.0874887 (any table).
  expect(slopeFigure(5, 'percent')).toBe('8.7\u202f%')
  expect(slopeFigure(5, 'ratio')).toBe('1:11.4')
})
