import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { dxf } from '../../src/formats/dxf.ts'
import { drawn } from './dxf-drawn.ts'
import { at, dxfText, face, line, polyline, type Written } from './dxf-writer.ts'
import { drawingOf, outlinesOf, pointAt, segmentsOf, usual, type Point } from './text-read.ts'

describe('units', () => {
  // DXF reference, HEADER section, $INSUNITS.
  test.each([
    [1, 'in'],
    [2, 'ft'],
    [4, 'mm'],
    [5, 'cm'],
    [6, 'm'],
    [0, null],
    [null, null],
  ] as const)('$INSUNITS %s is %s', (units, unit) => {
    expect(drawn([line([0, 0], [1, 0])], { units }).unit).toBe(unit)
  })

  test('a unit that is not read is refused, unless the user has said one', () => {
    const text = dxfText({ units: 21, entities: [line([0, 0], [1, 0])] })
    expect(() => drawingOf(text)).toThrow(
      "plan.dxf: the drawing's unit is US survey feet, which is not read; set it to mm, cm, m, in or ft, or say --unit.",
    )
    expect(drawingOf(text, 'plan.dxf', { metresPerUnit: 0.3048 }).unit).toBeNull()
  })
})

describe('straight entities', () => {
  test('LINE', () => {
    const drawing = drawn([line([1, 2], [3, 4], 'A'), line([1, 2, 0], [3, 4, 5], 'B')])
    expect(segmentsOf(drawing)).toEqual([
      [
        [1, 2, 0],
        [3, 4, 0],
      ],
      [
        [1, 2, 0],
        [3, 4, 5],
      ],
    ])
    expect([...drawing.segmentLayer]).toEqual([0, 1])
    expect(drawing.layers).toEqual(['A', 'B'])
  })

  test('LWPOLYLINE: closed, open, closed by its last point, with a point twice, with an elevation', () => {
    const drawing = drawn([
      polyline([
        [0, 0],
        [1, 0],
        [1, 1],
      ]),
      polyline(
        [
          [0, 0],
          [1, 0],
          [1, 1],
        ],
        false,
      ),
      polyline(
        [
          [5, 0],
          [6, 0],
          [6, 1],
          [5, 0],
        ],
        false,
      ),
      polyline([
        [0, 0],
        [1, 0],
        [1, 0],
        [1, 1],
        [0, 0],
      ]),
      polyline(
        [
          [0, 0],
          [2, 0],
        ],
        true,
      ),
      polyline(
        [
          [0, 0],
          [1, 0],
          [1, 1],
        ],
        true,
        '0',
        [[38, 7]],
      ),
    ])
    expect(outlinesOf(drawing)).toEqual([
      [
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
      ],
      [
        [5, 0, 0],
        [6, 0, 0],
        [6, 1, 0],
      ],
      [
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
      ],
      [
        [0, 0, 7],
        [1, 0, 7],
        [1, 1, 7],
      ],
    ])
    expect(segmentsOf(drawing)).toEqual([
      [
        [0, 0, 0],
        [1, 0, 0],
      ],
      [
        [1, 0, 0],
        [1, 1, 0],
      ],
      [
        [0, 0, 0],
        [2, 0, 0],
      ],
    ])
    expect([...drawing.hasHeight]).not.toContain(1)
    expect(drawing.repairs).toEqual([
      {
        code: 'flattened',
        state: 'applied',
        count: 1,
        where: [[0, 0]],
        message: '1 flat figure lies at another level than the rest; the plan takes x and y only',
      },
    ])
  })

  test('an outline drawn round to a last point off by rounding is closed; one off by more is open', () => {
    const [x, y] = [5.7e6, 4.1e5]
    const round = (gap: number): Written =>
      polyline(
        [
          [x, y],
          [x + 10, y],
          [x + 10, y + 10],
          [x + gap, y],
        ],
        false,
      )
    expect(outlinesOf(drawn([round(1e-9)]))).toHaveLength(1)
    expect(segmentsOf(drawn([round(1e-5)]))).toHaveLength(3)
  })

  test('POLYLINE, flat and in space', () => {
    const vertex = (x: number, y: number, z: number, flags: number): Written => ({
      kind: 'VERTEX',
      pairs: [...at(10, x, y, z), [70, flags]],
    })
    const drawing = drawn([
      { kind: 'POLYLINE', pairs: [[66, 1], ...at(10, 0, 0, 3), [70, 1]] },
      vertex(0, 0, 3, 0),
      vertex(1, 0, 3, 16),
      vertex(1, 0, 3, 0),
      vertex(1, 1, 3, 0),
      { kind: 'SEQEND' },
      {
        kind: 'POLYLINE',
        pairs: [
          [66, 1],
          [70, 8],
        ],
      },
      vertex(0, 0, 1, 32),
      vertex(1, 0, 2, 32),
      vertex(1, 1, 3, 32),
      { kind: 'SEQEND' },
    ])
    expect(outlinesOf(drawing)).toEqual([
      [
        [0, 0, 3],
        [1, 0, 3],
        [1, 1, 3],
      ],
    ])
    expect(segmentsOf(drawing)).toEqual([
      [
        [0, 0, 1],
        [1, 0, 2],
      ],
      [
        [1, 0, 2],
        [1, 1, 3],
      ],
    ])
    expect([...drawing.hasHeight]).toEqual([0, 0, 0, 1, 1, 1])
  })

  test('POINT is a mark with its height', () => {
    const drawing = drawn([{ kind: 'POINT', layer: 'LEVELS', pairs: at(10, 1, 2, 0) }])
    expect(pointAt(drawing, drawing.marks[0]!)).toEqual([1, 2, 0])
    expect([...drawing.hasHeight]).toEqual([1])
  })

  test('3DFACE: quad, triangle, a corner twice, upright', () => {
    const drawing = drawn([
      face([
        [0, 0, 0],
        [1, 0, 1],
        [1, 1, 2],
        [0, 1, 3],
      ]),
      face([
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
      ]),
      face([
        [0, 0, 0],
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
      ]),
      face(
        [
          [0, 0, 0],
          [1, 0, 0],
          [1, 0, 2],
          [0, 0, 2],
        ],
        0,
        'WALL',
      ),
    ])
    expect(outlinesOf(drawing)).toEqual([
      [
        [0, 0, 0],
        [1, 0, 1],
        [1, 1, 2],
        [0, 1, 3],
      ],
      [
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
      ],
      [
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
      ],
    ])
    expect(drawing.leftOut).toEqual([{ kind: '3DFACE face, upright or without area', layer: 'WALL', count: 1 }])
  })

  test('a line that stands upright, one of no length', () => {
    const drawing = drawn([line([0, 0], [1, 0]), line([1, 1, 0], [1, 1, 3]), line([2, 2], [2, 2])])
    expect(segmentsOf(drawing)).toHaveLength(1)
    expect(drawing.leftOut).toEqual([
      { kind: 'LINE, upright', layer: '0', count: 1 },
      { kind: 'LINE, no length', layer: '0', count: 1 },
    ])
  })
})

describe('which heights are stated', () => {
  test('lines at z = 0 where most lines leave the ground, and not else', () => {
    const wire = drawn([line([0, 0, 0], [1, 0, 0]), line([1, 0, 0], [1, 1, 2]), line([1, 1, 2], [0, 0, 0])])
    expect([...wire.hasHeight]).toEqual([1, 1, 1, 1, 1, 1])
    const plan = drawn([line([0, 0, 0], [1, 0, 0]), line([1, 0, 0], [1, 1, 0]), line([1, 1, 2], [0, 0, 0])])
    expect([...plan.hasHeight]).toEqual([0, 0, 0, 0, 1, 1])
  })
})

// Twin road: what was written, from the numbers that wrote it.

test('random line work and outlines read back to the last digit (seed 3)', () => {
  const next = random(3)
  const value = (): number => (next() - 0.5) * 10 ** Math.floor(12 * next() - 4)
  const lines = Array.from({ length: 300 }, (): [Point, Point] => [
    [value(), value(), value()],
    [value(), value(), value()],
  ])
  const outlines = Array.from({ length: 300 }, () => Array.from({ length: 3 + Math.floor(5 * next()) }, (): Point => [value(), value(), 0]))
  const drawing = drawn([...lines.map(([a, b]) => line(a, b)), ...outlines.map((corners) => polyline(corners.map(([x, y]) => [x, y])))])
  expect(segmentsOf(drawing)).toEqual(lines)
  expect(outlinesOf(drawing)).toEqual(outlines)
})

test('a long file gives turns', () => {
  const text = dxfText({ entities: Array.from({ length: 50_000 }, (_, i) => line([i, 0], [i, 1])) })
  const steps = dxf.read(text, { name: 'a.dxf', bytes: new Uint8Array(0) }, usual)
  let count = 0
  for (let step = steps.next(); step.done !== true; step = steps.next()) count += 1
  expect(count).toBeGreaterThan(30)
})
