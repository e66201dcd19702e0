import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { interiorPoints, type Curve } from '../../src/formats/chords.ts'
import { bezierPieces, cubicThrough } from '../../src/formats/chords-spline.ts'
import type { Drawing } from '../../src/plan/drawing.ts'
import { at, dxfText, insert, polyline, type Written } from './dxf-writer.ts'
import { distanceTo, drawingOf, outlinesOf, segmentsOf, type Point } from './text-read.ts'

const drawn = (entities: readonly Written[], sagitta: number): Drawing => drawingOf(dxfText({ entities }), 'plan.dxf', { sagitta })

/** All edges of a drawing, those of outlines too, optionally of one layer. */
function edgesOf(drawing: Drawing, layer?: string): [Point, Point][] {
  const wanted = layer === undefined ? null : drawing.layers.indexOf(layer)
  const open = segmentsOf(drawing).filter((_, i) => wanted === null || drawing.segmentLayer[i] === wanted)
  const closed = outlinesOf(drawing).filter((_, i) => wanted === null || drawing.outlines.layer[i] === wanted)
  return [...open, ...closed.flatMap((corners) => corners.map((corner, i): [Point, Point] => [corner, corners[(i + 1) % corners.length]!]))]
}

const middle = ([a, b]: readonly [Point, Point]): Point => [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2, (a[2] + b[2]) / 2]

describe('circular curves: exact, from the circle itself', () => {
  // Worked out by hand: a chord over the angle d on radius r leaves the arc by r (1 - cos(d/2)).
  test.each([
    [5, 0, 135, 0.005],
    [5, 300, 75, 0.005],
    [1200, 10, 11, 0.005],
    [0.004, 0, 90, 0.005],
    [30, 359, 1, 1e-6],
  ])('ARC of radius %s from %s to %s', (radius, from, to, sagitta) => {
    const edges = edgesOf(drawn([{ kind: 'ARC', pairs: [...at(10, 3, -2), [40, radius], [50, from], [51, to]] }], sagitta))
    const sweep = (((to - from + 360) % 360) * Math.PI) / 180
    const least = Math.ceil(sweep / Math.min(Math.PI / 2, 2 * Math.acos(Math.max(0, 1 - sagitta / radius))) - 1e-9)
    expect(edges).toHaveLength(least)
    for (const edge of edges) {
      for (const [x, y] of edge) expect(Math.abs(Math.hypot(x - 3, y + 2) - radius)).toBeLessThan(1e-14 * radius + 1e-15)
      const [x, y] = middle(edge)
      if (radius > sagitta) expect(radius - Math.hypot(x - 3, y + 2)).toBeLessThanOrEqual(sagitta * (1 + 1e-9) + 1e-15 * radius)
    }
    const ends = [edges[0]![0], edges[edges.length - 1]![1]]
    const angles = ends.map(([x, y]) => (Math.atan2(y + 2, x - 3) * 180) / Math.PI)
    expect(Math.cos(((angles[0]! - from) * Math.PI) / 180)).toBeCloseTo(1, 12)
    expect(Math.cos(((angles[1]! - to) * Math.PI) / 180)).toBeCloseTo(1, 12)
  })

  test('CIRCLE keeps its four extremes and is one outline', () => {
    const corners = outlinesOf(drawn([{ kind: 'CIRCLE', pairs: [...at(10, 3, -2), [40, 5]] }], 0.005))
    expect(corners).toHaveLength(1)
    for (const extreme of [
      [8, -2, 0],
      [3, 3, 0],
      [-2, -2, 0],
      [3, -7, 0],
    ])
      expect(corners[0]).toContainEqual(extreme)
    expect(corners[0]!.length % 4).toBe(0)
  })

  // bulge = tan(sweep / 4) (DXF reference); centre from chord and angle, worked out by hand.
  test.each([1, -1, 0.5, -0.25, Math.tan(Math.PI / 16), 3, 1e-3])('bulge %s', (bulge) => {
    const edges = edgesOf(
      drawn(
        [
          polyline(
            [
              [1, 1, bulge],
              [7, 4],
            ],
            false,
          ),
        ],
        0.001,
      ),
    )
    const sweep = 4 * Math.atan(bulge)
    const chord = Math.hypot(6, 3)
    const radius = chord / (2 * Math.abs(Math.sin(sweep / 2)))
    const off = chord / 2 / Math.tan(sweep / 2)
    const centre = [4 - (3 / chord) * off, 2.5 + (6 / chord) * off]
    for (const edge of edges) {
      for (const [x, y] of edge) expect(Math.abs(Math.hypot(x - centre[0]!, y - centre[1]!) - radius)).toBeLessThan(1e-12 * radius)
      const [x, y] = middle(edge)
      expect(radius - Math.hypot(x - centre[0]!, y - centre[1]!)).toBeLessThanOrEqual(0.001 * (1 + 1e-6))
    }
    expect(edges[0]![0]).toEqual([1, 1, 0])
    expect(edges[edges.length - 1]![1]).toEqual([7, 4, 0])
    const turned = edges.reduce((sum, [a, b]) => {
      const [p, q] = [
        [a[0] - centre[0]!, a[1] - centre[1]!],
        [b[0] - centre[0]!, b[1] - centre[1]!],
      ]
      return sum + Math.atan2(p[0]! * q[1]! - p[1]! * q[0]!, p[0]! * q[0]! + p[1]! * q[1]!)
    }, 0)
    expect(turned).toBeCloseTo(sweep, 9)
  })

  test('two half circles as a closed polyline of two corners are an outline', () => {
    const drawing = drawn(
      [
        polyline([
          [0, 0, 1],
          [2, 0, 1],
        ]),
      ],
      0.001,
    )
    const [corners] = outlinesOf(drawing)
    for (const [x, y] of corners!) expect(Math.hypot(x - 1, y)).toBeCloseTo(1, 14)
    expect(drawing.repairs).toEqual([
      {
        code: 'chords',
        state: 'applied',
        count: 1,
        where: [[expect.closeTo(2, 12), expect.closeTo(0, 12)]],
        message: `Curves of 1 entity became ${corners!.length} chords; no curve leaves its chord by more than 1 mm`,
      },
    ])
  })

  // Ellipse with axes 6 and 1.5: |x/6|^2 + |y/1.5|^2 = 1.
  test('a circle in a block scaled unevenly is an ellipse within the sagitta', () => {
    const text = dxfText({
      blocks: { ROUND: [{ kind: 'CIRCLE', pairs: [...at(10, 0, 0), [40, 3]] }] },
      entities: [
        insert('ROUND', 0, 0, [
          [41, 2],
          [42, 0.5],
        ]),
      ],
    })
    const drawing = drawingOf(text, 'plan.dxf', { sagitta: 0.01 })
    const edges = edgesOf(drawing)
    for (const [[x, y]] of edges) expect((x / 6) ** 2 + (y / 1.5) ** 2).toBeCloseTo(1, 12)
    for (let i = 0; i < 720; i += 1) {
      const p: Point = [6 * Math.cos((i * Math.PI) / 360), 1.5 * Math.sin((i * Math.PI) / 360), 0]
      expect(Math.min(...edges.map((edge) => distanceTo(p, edge)))).toBeLessThanOrEqual(0.01)
    }
  })

  test('a block scaled by a thousand keeps the sagitta of the drawing, not of the block', () => {
    const block = { ROUND: [{ kind: 'ARC', pairs: [...at(10, 0, 0), [40, 0.003], [50, 0], [51, 90]] as const }] }
    const small = drawingOf(
      dxfText({
        blocks: block,
        entities: [
          insert('ROUND', 0, 0, [
            [41, 1000],
            [42, 1000],
          ]),
        ],
      }),
      'plan.dxf',
      { sagitta: 0.005 },
    )
    const large = drawn([{ kind: 'ARC', pairs: [...at(10, 0, 0), [40, 3], [50, 0], [51, 90]] }], 0.005)
    expect(small.segmentLayer.length).toBe(large.segmentLayer.length)
  })

  test('the sagitta is converted by the unit of the drawing, or what the user says it is', () => {
    const arc = (units: number | null, radius: number): string =>
      dxfText({ units, entities: [{ kind: 'ARC', pairs: [...at(10, 0, 0), [40, radius], [50, 0], [51, 90]] }] })
    const counts = [
      [6, 3, null],
      [4, 3000, null],
      [5, 300, null],
      [1, 3 / 0.0254, null],
      [null, 3000, 0.001],
      [4, 3, 1],
    ] as const
    expect(
      counts.map(([units, radius, metresPerUnit]) => drawingOf(arc(units, radius), 'a.dxf', { metresPerUnit }).segmentLayer.length),
    ).toEqual(Array(6).fill(14))
  })
})

describe('splines', () => {
  test('a full circle as a rational spline of degree 2 lies on its circle', () => {
    // Nine control points on a square with weights 1 and 1/sqrt 2: exactly the unit circle
    // (L. Piegl and W. Tiller, The NURBS book, 1997, section 7.5).
    const corners = [
      [1, 0],
      [1, 1],
      [0, 1],
      [-1, 1],
      [-1, 0],
      [-1, -1],
      [0, -1],
      [1, -1],
      [1, 0],
    ]
    const knots = [0, 0, 0, 1, 1, 2, 2, 3, 3, 4, 4, 4]
    const drawing = drawn(
      [
        {
          kind: 'SPLINE',
          pairs: [
            [70, 4],
            [71, 2],
            ...knots.map((k) => [40, k] as const),
            ...corners.map((_, i) => [41, i % 2 === 0 ? 1 : Math.SQRT1_2] as const),
            ...corners.flatMap(([x, y]) => at(10, x!, y!)),
          ],
        },
      ],
      0.001,
    )
    const [outline] = outlinesOf(drawing)
    for (const [x, y] of outline!) expect(Math.hypot(x, y)).toBeCloseTo(1, 14)
    for (const edge of edgesOf(drawing)) expect(1 - Math.hypot(...middle(edge))).toBeLessThanOrEqual(0.001)
    // The circle itself takes 4 ceil((pi/2) / (2 acos 0.999)) = 72; the bound on a rational curve may be half as many again.
    expect(outline!.length).toBeLessThanOrEqual(108)
  })

  // A cubic through points of a parabola with the parabola's own end directions is no parabola in general, but through points of a
  // straight line it is the line, and it is symmetric for symmetric points.
  test('fit points only: through the points, symmetric, a line through points of a line', () => {
    const spline = (points: readonly number[][], more: readonly (readonly [number, number])[] = []): Written => ({
      kind: 'SPLINE',
      pairs: [[70, 0], [71, 3], ...more, ...points.flatMap(([x, y]) => at(11, x!, y!))],
    })
    const bow = [
      [0, 0],
      [2, 1.5],
      [5, 2],
      [8, 1.5],
      [10, 0],
    ]
    const drawing = drawn([spline(bow)], 0.001)
    const corners = [...segmentsOf(drawing).map(([a]) => a), segmentsOf(drawing).at(-1)![1]]
    for (const [x, y] of bow) expect(Math.min(...corners.map((p) => Math.hypot(p[0] - x!, p[1] - y!)))).toBeLessThan(1e-15)
    corners.forEach(([x, y], i) => {
      const other = corners[corners.length - 1 - i]!
      expect(Math.hypot(10 - x - other[0], y - other[1])).toBeLessThan(1e-14)
    })
    expect(
      drawn(
        [
          spline([
            [0, 0],
            [1, 2],
            [3, 6],
            [4, 8],
          ]),
        ],
        0.001,
      ).segmentLayer,
    ).toHaveLength(3)
  })

  // Hermite form of a cubic with slopes given at both ends: with two points and unit directions at 45 degrees it is known in closed form.
  test('ends with directions', () => {
    const [piece] = cubicThrough([0, 0, 0, 4, 0, 0], false, { start: [3, 3, 0], end: [2, -2, 0] })
    const h = 4
    const d = Math.SQRT1_2
    expect(piece!.points.map((v) => Number(v.toFixed(14)))).toEqual(
      [0, 0, 0, (h * d) / 3, (h * d) / 3, 0, h - (h * d) / 3, (h * d) / 3, 0, 4, 0, 0].map((v) => Number(v.toFixed(14))),
    )
  })

  // The middle of that curve stands at 3/8 of the sum of its inner control heights: 3/8 * 2 * 4 sqrt(1/2) / 3 = sqrt(1/2).
  test('fit points with directions at the ends (codes 12 and 13)', () => {
    const drawing = drawn([{ kind: 'SPLINE', pairs: [[71, 3], ...at(12, 3, 3), ...at(13, 2, -2), ...at(11, 0, 0), ...at(11, 4, 0)] }], 0.001)
    const heights = segmentsOf(drawing).map(([, end]) => end[1])
    expect(Math.max(...heights)).toBeLessThanOrEqual(Math.SQRT1_2 + 1e-15)
    expect(Math.max(...heights)).toBeGreaterThanOrEqual(Math.SQRT1_2 - 0.001)
  })

  test('closed fit points: slope and curvature go through every point, the first too (seed 4)', () => {
    const next = random(4)
    const points = Array.from({ length: 9 }, (_, i) => [10 * Math.cos(i / 1.5) + next(), 6 * Math.sin(i / 1.5) + next(), next()]).flat()
    const pieces = cubicThrough(points, true, { start: null, end: null })
    expect(pieces).toHaveLength(9)
    const part = (i: number, k: number, c: number): number => pieces[i]!.points[3 * k + c]!
    pieces.forEach((_, i) => {
      const j = (i + 1) % pieces.length
      const length = (n: number): number => Math.hypot(...[0, 1, 2].map((c) => part(n, 3, c) - part(n, 0, c)))
      for (let c = 0; c < 3; c += 1) {
        const [h, g] = [length(i), length(j)]
        expect((part(i, 3, c) - part(i, 2, c)) / h).toBeCloseTo((part(j, 1, c) - part(j, 0, c)) / g, 10)
        expect((part(i, 3, c) - 2 * part(i, 2, c) + part(i, 1, c)) / h ** 2).toBeCloseTo(
          (part(j, 2, c) - 2 * part(j, 1, c) + part(j, 0, c)) / g ** 2,
          10,
        )
      }
    })
  })

  // Twin road: the Cox-de Boor basis by its recursive definition, which shares nothing with polar forms.
  test('Bezier pieces are the B-spline of the definition (seed 9)', () => {
    const next = random(9)
    for (let round = 0; round < 40; round += 1) {
      const degree = 1 + Math.floor(6 * next())
      const count = degree + 1 + Math.floor(6 * next())
      const knots = Array.from({ length: count + degree + 1 }, () => Math.floor(8 * next())).sort((a, b) => a - b)
      if (!(knots[count]! > knots[degree]!)) continue
      const points = Array.from({ length: 3 * count }, () => next())
      const weights = Array.from({ length: count }, () => 0.2 + 3 * next())
      const basis = (i: number, d: number, u: number): number => {
        if (d === 0) return u >= knots[i]! && u < knots[i + 1]! ? 1 : 0
        const [left, right] = [knots[i + d]! - knots[i]!, knots[i + d + 1]! - knots[i + 1]!]
        return (
          (left > 0 ? ((u - knots[i]!) / left) * basis(i, d - 1, u) : 0) +
          (right > 0 ? ((knots[i + d + 1]! - u) / right) * basis(i + 1, d - 1, u) : 0)
        )
      }
      let piece = 0
      const pieces = bezierPieces(degree, knots, points, weights)
      for (let span = degree; span < count; span += 1) {
        const [s, t] = [knots[span]!, knots[span + 1]!]
        if (!(t > s)) continue
        const { points: controls, weights: own } = pieces[piece++]!
        for (const share of [0.1, 0.5, 0.9]) {
          const bernstein = Array.from(
            { length: degree + 1 },
            (_, j) => binomial(degree, j) * share ** j * (1 - share) ** (degree - j) * own![j]!,
          )
          const total = bernstein.reduce((sum, value) => sum + value, 0)
          const all = Array.from({ length: count }, (_, i) => basis(i, degree, s + share * (t - s)) * weights[i]!)
          const allTotal = all.reduce((sum, value) => sum + value, 0)
          for (let k = 0; k < 3; k += 1) {
            const mine = bernstein.reduce((sum, value, j) => sum + value * controls[3 * j + k]!, 0) / total
            const definition = all.reduce((sum, value, i) => sum + value * points[3 * i + k]!, 0) / allTotal
            expect(Math.abs(mine - definition)).toBeLessThan(1e-12)
          }
        }
      }
      expect(piece).toBe(pieces.length)
    }
  })

  test('random Bezier curves stay within the sagitta, with weights and without (seed 12)', () => {
    const next = random(12)
    for (let round = 0; round < 60; round += 1) {
      const degree = 2 + Math.floor(5 * next())
      const points = Array.from({ length: 3 * (degree + 1) }, (_, i) => 10 * next() + (i % 3 === 0 ? 5e5 : 0))
      const weights = round % 2 === 0 ? null : Array.from({ length: degree + 1 }, () => 0.1 + 4 * next())
      const sagitta = 10 ** -(1 + 3 * next())
      const curve: Curve = { kind: 'bezier', points, weights }
      const corners = [...points.slice(0, 3), ...interiorPoints(curve, sagitta)!, ...points.slice(-3)]
      const edges: [Point, Point][] = []
      for (let i = 0; i + 5 < corners.length; i += 3) edges.push([corners.slice(i, i + 3) as Point, corners.slice(i + 3, i + 6) as Point])
      let farthest = 0
      for (let i = 0; i <= 400; i += 1) {
        const t = i / 400
        const parts = Array.from(
          { length: degree + 1 },
          (_, j) => binomial(degree, j) * t ** j * (1 - t) ** (degree - j) * (weights === null ? 1 : weights[j]!),
        )
        const total = parts.reduce((sum, value) => sum + value, 0)
        const p = [0, 1, 2].map((k) => parts.reduce((sum, value, j) => sum + value * points[3 * j + k]!, 0) / total) as Point
        farthest = Math.max(farthest, Math.min(...edges.map((edge) => distanceTo(p, edge))))
      }
      expect(farthest).toBeLessThanOrEqual(sagitta * (1 + 1e-6) + 1e-9)
    }
  })
})

const binomial = (n: number, k: number): number => (k === 0 ? 1 : (binomial(n, k - 1) * (n - k + 1)) / k)

// Outside values: points that the DXF library which wrote the file finds on its own curves (test/corpus/dxf/write.py).
describe('curves of all kinds, as another program sees them', () => {
  const expected = (JSON.parse(readFileSync('test/corpus/dxf/expected.json', 'utf8')) as Record<string, Record<string, Point[]>>)[
    'curves-of-all-kinds.dxf'
  ]!
  const drawing = drawingOf(readFileSync('test/corpus/dxf/curves-of-all-kinds.dxf'), 'curves.dxf', { sagitta: 0.002 })

  test.each(Object.keys(expected))('%s', (name) => {
    const edges = edgesOf(drawing, name)
    const points = expected[name]!
    expect(edges.length).toBeGreaterThan(5)
    for (const point of points) expect(Math.min(...edges.map((edge) => distanceTo(point, edge)))).toBeLessThanOrEqual(0.002 + 1e-9)
    // And not longer than the curve: every corner lies near a point of it.
    const gap = Math.max(...points.slice(1).map((point, i) => Math.hypot(...point.map((value, k) => value - points[i]![k]!))))
    for (const [corner] of edges)
      expect(Math.min(...points.map((point) => Math.hypot(...point.map((value, k) => value - corner[k]!))))).toBeLessThanOrEqual(gap)
  })
})
