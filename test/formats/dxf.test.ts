import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { dxf } from '../../src/formats/dxf.ts'
import { at, dxfText, face, insert, line, polyline, type Content, type Written } from './dxf-writer.ts'
import { drawingOf, outlinesOf, pointAt, segmentsOf, usual, type Point } from './text-read.ts'

const drawn = (entities: readonly Written[], content: Partial<Content> = {}, options = {}): ReturnType<typeof drawingOf> =>
  drawingOf(dxfText({ ...content, entities }), 'plan.dxf', options)

/** Equal to 1e-12 of the size of the numbers. */
function near(found: readonly (readonly number[])[], expected: readonly (readonly number[])[]): void {
  expect(found.length).toBe(expected.length)
  found.forEach((point, i) => point.forEach((value, k) => {
    if (!(Math.abs(value - expected[i]![k]!) <= 1e-12 * Math.max(1, Math.abs(value)))) throw new Error(`point ${i}: ${point.join(' ')} is not ${expected[i]!.join(' ')}`)
  }))
}

describe('units', () => {
  // DXF reference, HEADER section, $INSUNITS.
  test.each([[1, 'in'], [2, 'ft'], [4, 'mm'], [5, 'cm'], [6, 'm'], [0, null], [null, null]] as const)('$INSUNITS %s is %s', (units, unit) => {
    expect(drawn([line([0, 0], [1, 0])], { units }).unit).toBe(unit)
  })

  test('a unit that is not read is refused, unless the user has said one', () => {
    const text = dxfText({ units: 21, entities: [line([0, 0], [1, 0])] })
    expect(() => drawingOf(text)).toThrow("plan.dxf: the drawing's unit is US survey feet, which is not read; set it to mm, cm, m, in or ft, or say --unit.")
    expect(drawingOf(text, 'plan.dxf', { metresPerUnit: 0.3048 }).unit).toBeNull()
  })
})

describe('straight entities', () => {
  test('LINE', () => {
    const drawing = drawn([line([1, 2], [3, 4], 'A'), line([1, 2, 0], [3, 4, 5], 'B')])
    expect(segmentsOf(drawing)).toEqual([[[1, 2, 0], [3, 4, 0]], [[1, 2, 0], [3, 4, 5]]])
    expect([...drawing.segmentLayer]).toEqual([0, 1])
    expect(drawing.layers).toEqual(['A', 'B'])
  })

  test('LWPOLYLINE: closed, open, closed by its last point, with a point twice, with an elevation', () => {
    const drawing = drawn([
      polyline([[0, 0], [1, 0], [1, 1]]),
      polyline([[0, 0], [1, 0], [1, 1]], false),
      polyline([[5, 0], [6, 0], [6, 1], [5, 0]], false),
      polyline([[0, 0], [1, 0], [1, 0], [1, 1], [0, 0]]),
      polyline([[0, 0], [2, 0]], true),
      polyline([[0, 0], [1, 0], [1, 1]], true, '0', [[38, 7]]),
    ])
    expect(outlinesOf(drawing)).toEqual([
      [[0, 0, 0], [1, 0, 0], [1, 1, 0]], [[5, 0, 0], [6, 0, 0], [6, 1, 0]], [[0, 0, 0], [1, 0, 0], [1, 1, 0]], [[0, 0, 7], [1, 0, 7], [1, 1, 7]],
    ])
    expect(segmentsOf(drawing)).toEqual([[[0, 0, 0], [1, 0, 0]], [[1, 0, 0], [1, 1, 0]], [[0, 0, 0], [2, 0, 0]]])
    expect([...drawing.hasHeight]).not.toContain(1)
    expect(drawing.repairs).toEqual([{
      code: 'flattened', state: 'applied', count: 1, where: [[0, 0]], message: '1 flat figure lies at another level than the rest; the plan takes x and y only',
    }])
  })

  test('an outline drawn round to a last point off by rounding is closed; one off by more is open', () => {
    const [x, y] = [5.7e6, 4.1e5]
    const round = (gap: number): Written => polyline([[x, y], [x + 10, y], [x + 10, y + 10], [x + gap, y]], false)
    expect(outlinesOf(drawn([round(1e-9)]))).toHaveLength(1)
    expect(segmentsOf(drawn([round(1e-5)]))).toHaveLength(3)
  })

  test('POLYLINE, flat and in space', () => {
    const vertex = (x: number, y: number, z: number, flags: number): Written => ({ kind: 'VERTEX', pairs: [...at(10, x, y, z), [70, flags]] })
    const drawing = drawn([
      { kind: 'POLYLINE', pairs: [[66, 1], ...at(10, 0, 0, 3), [70, 1]] }, vertex(0, 0, 3, 0), vertex(1, 0, 3, 16), vertex(1, 0, 3, 0), vertex(1, 1, 3, 0), { kind: 'SEQEND' },
      { kind: 'POLYLINE', pairs: [[66, 1], [70, 8]] }, vertex(0, 0, 1, 32), vertex(1, 0, 2, 32), vertex(1, 1, 3, 32), { kind: 'SEQEND' },
    ])
    expect(outlinesOf(drawing)).toEqual([[[0, 0, 3], [1, 0, 3], [1, 1, 3]]])
    expect(segmentsOf(drawing)).toEqual([[[0, 0, 1], [1, 0, 2]], [[1, 0, 2], [1, 1, 3]]])
    expect([...drawing.hasHeight]).toEqual([0, 0, 0, 1, 1, 1])
  })

  test('POINT is a mark with its height', () => {
    const drawing = drawn([{ kind: 'POINT', layer: 'LEVELS', pairs: at(10, 1, 2, 0) }])
    expect(pointAt(drawing, drawing.marks[0]!)).toEqual([1, 2, 0])
    expect([...drawing.hasHeight]).toEqual([1])
  })

  test('3DFACE: quad, triangle, a corner twice, upright', () => {
    const drawing = drawn([
      face([[0, 0, 0], [1, 0, 1], [1, 1, 2], [0, 1, 3]]), face([[0, 0, 0], [1, 0, 0], [1, 1, 0]]), face([[0, 0, 0], [0, 0, 0], [1, 0, 0], [1, 1, 0]]),
      face([[0, 0, 0], [1, 0, 0], [1, 0, 2], [0, 0, 2]], 0, 'WALL'),
    ])
    expect(outlinesOf(drawing)).toEqual([
      [[0, 0, 0], [1, 0, 1], [1, 1, 2], [0, 1, 3]], [[0, 0, 0], [1, 0, 0], [1, 1, 0]], [[0, 0, 0], [1, 0, 0], [1, 1, 0]],
    ])
    expect(drawing.leftOut).toEqual([{ kind: '3DFACE face, upright or without area', layer: 'WALL', count: 1 }])
  })

  test('a line that stands upright, one of no length', () => {
    const drawing = drawn([line([0, 0], [1, 0]), line([1, 1, 0], [1, 1, 3]), line([2, 2], [2, 2])])
    expect(segmentsOf(drawing)).toHaveLength(1)
    expect(drawing.leftOut).toEqual([{ kind: 'LINE, upright', layer: '0', count: 1 }, { kind: 'LINE, no length', layer: '0', count: 1 }])
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

describe('invisible edges', () => {
  const quad = [[0, 0, 0], [4, 0, 0], [4, 3, 0], [0, 3, 0]]
  const roof = [[4, 3, 0], [2, 5, 0], [0, 3, 0]]
  const pentagon = [[0, 0, 0], [4, 0, 0], [4, 3, 0], [2, 5, 0], [0, 3, 0]]

  test('hidden in both faces: one panel of five corners', () => {
    expect(outlinesOf(drawn([face(quad, 4), face(roof, 8)]))).toEqual([pentagon])
  })

  test('the other way round, the panel is the same', () => {
    expect(outlinesOf(drawn([face(quad, 4), face([...roof].reverse(), 8)]))).toEqual([pentagon])
  })

  test('hidden in one only: the other draws it', () => {
    expect(outlinesOf(drawn([face(quad, 4), face(roof)]))).toHaveLength(2)
  })

  test('on two layers: no panel reaches over both', () => {
    expect(outlinesOf(drawn([face(quad, 4, 'A'), face(roof, 8, 'B')]))).toHaveLength(2)
  })

  test('a fan of triangles about a point is its outline', () => {
    const n = 7
    const rim = Array.from({ length: n }, (_, i) => [Math.round(1000 * Math.cos((2 * Math.PI * i) / n)), Math.round(1000 * Math.sin((2 * Math.PI * i) / n)), 0])
    const fan = rim.map((corner, i) => face([[0, 0, 0], corner, rim[(i + 1) % n]!], 1 + 8))
    const outlines = outlinesOf(drawn(fan))
    expect(outlines).toHaveLength(1)
    expect(new Set(outlines[0]!.map(String))).toEqual(new Set(rim.map(String)))
  })

  test('a ring whose inner edges are hidden stays as drawn: no outline has a hole', () => {
    const faces = [0, 1, 2, 3].map((i) => {
      const corner = (k: number, r: number): number[] => [[r, r, 0], [-r, r, 0], [-r, -r, 0], [r, -r, 0]][k % 4]!
      return face([corner(i, 1), corner(i, 2), corner(i + 1, 2), corner(i + 1, 1)], 1 + 4)
    })
    expect(outlinesOf(drawn(faces))).toHaveLength(4)
  })

  test('every edge of a surface hidden: the faces stay as drawn', () => {
    const faces = [0, 1, 2].map((i) => face([[i, 0, 0], [i + 1, 0, 0], [i + 1, 1, 0], [i, 1, 0]], 15))
    expect(outlinesOf(drawn(faces))).toHaveLength(3)
  })

  test('the order of the file is kept', () => {
    const first = face([[10, 0, 0], [11, 0, 0], [11, 1, 0]])
    const last = face([[20, 0, 0], [21, 0, 0], [21, 1, 0]])
    expect(outlinesOf(drawn([first, face(quad, 4), last, face(roof, 8)])).map((outline) => outline[0]![0])).toEqual([10, 0, 20])
  })
})

describe('layers', () => {
  const layers = [{ name: 'Glass' }, { name: 'Frozen', frozen: true }, { name: 'Off', off: true }]
  const lines = [line([0, 0], [1, 0], 'GLASS'), line([0, 1], [1, 1], 'frozen'), line([0, 2], [1, 2], 'OFF'), line([0, 3], [1, 3], 'Notes')]

  test('frozen and off are not taken, and counted', () => {
    const drawing = drawn(lines, { layers })
    expect(segmentsOf(drawing).map(([a]) => a[1])).toEqual([0, 3])
    expect(drawing.leftOut).toEqual([{ kind: 'LINE, layer frozen', layer: 'frozen', count: 1 }, { kind: 'LINE, layer off', layer: 'OFF', count: 1 }])
  })

  test('chosen by name without case; one that is named is taken even when off', () => {
    const drawing = drawn(lines, { layers }, { layers: ['glass', 'off'] })
    expect(segmentsOf(drawing).map(([a]) => a[1])).toEqual([0, 2])
    expect(drawing.leftOut).toEqual([{ kind: 'LINE, layer not chosen', layer: 'frozen', count: 1 }, { kind: 'LINE, layer not chosen', layer: 'Notes', count: 1 }])
  })

  test('one that is not there', () => {
    expect(() => drawn(lines, { layers }, { layers: ['Steel'] })).toThrow('plan.dxf: there is no layer "Steel"; the file has "Frozen", "Glass", "Notes", "Off".')
  })

  test('names with escapes', () => {
    expect(drawn([line([0, 0], [1, 0], 'Tr\\U+00E4ger 90%%d %%c8 %%p1 %%37 100%%%')]).layers).toEqual(['Träger 90° ⌀8 ±1 %%37 100%'])
  })

  test('spelt in two ways is one layer', () => {
    expect(drawn([line([0, 0], [1, 0], 'Glass'), line([0, 0], [1, 0], 'GLASS')]).layers).toEqual(['Glass'])
  })

  test('paper space and invisible entities are counted', () => {
    const drawing = drawn([line([0, 0], [1, 0]), { ...line([0, 0], [1, 0]), pairs: [[67, 1], ...at(10, 0, 0), ...at(11, 1, 0)] }, { ...line([0, 0], [1, 0]), pairs: [[60, 1], ...at(10, 0, 0), ...at(11, 1, 0)] }])
    expect(drawing.leftOut.map(({ kind }) => kind)).toEqual(['LINE, paper space', 'LINE, invisible'])
  })
})

describe('blocks', () => {
  const unit = { ARROW: [line([0, 0], [2, 0]), line([2, 0], [2, 1], 'OWN')] }

  test('base point, scale, turn and layer 0', () => {
    const drawing = drawn([insert('ARROW', 10, 20, [[41, 3], [42, 0.5], [50, 90]], 'SET')], { blocks: unit, base: [2, 0, 0] })
    near(segmentsOf(drawing).flat(), [[10, 14, 0], [10, 20, 0], [10, 20, 0], [9.5, 20, 0]])
    expect(drawing.layers).toEqual(['SET', 'OWN'])
  })

  test('at quarter turns at survey coordinates no digit is lost', () => {
    for (const [degrees, end] of [[0, [2, 0]], [90, [0, 2]], [180, [-2, 0]], [270, [0, -2]], [-90, [0, -2]], [450, [0, 2]]] as const) {
      const drawing = drawn([insert('ARROW', 5700000.125, 4000000.5, [[50, degrees]])], { blocks: unit })
      expect(segmentsOf(drawing)[0]).toEqual([[5700000.125, 4000000.5, 0], [5700000.125 + end[0], 4000000.5 + end[1], 0]])
    }
  })

  test('mirrored: an outline turns the other way', () => {
    const drawing = drawn([insert('TRI', 0, 0, [[41, -1]])], { blocks: { TRI: [polyline([[0, 0], [2, 0], [2, 1]])] } })
    near(outlinesOf(drawing)[0]!, [[0, 0, 0], [-2, 0, 0], [-2, 1, 0]])
  })

  test('columns and rows, turned with the insert, not scaled', () => {
    const drawing = drawn([insert('ARROW', 0, 0, [[41, 0.5], [50, 90], [70, 3], [71, 2], [44, 10], [45, 20]])], { blocks: { ARROW: [line([0, 0], [2, 0])] } })
    near(segmentsOf(drawing).map(([a]) => a), [[0, 0, 0], [0, 10, 0], [0, 20, 0], [-20, 0, 0], [-20, 10, 0], [-20, 20, 0]])
    near(segmentsOf(drawing).map(([, b]) => b), [[0, 1, 0], [0, 11, 0], [0, 21, 0], [-20, 1, 0], [-20, 11, 0], [-20, 21, 0]])
  })

  test('blocks that follow the entities, and layers too', () => {
    const text = dxfText({ blocks: unit, entities: [insert('ARROW', 0, 0)] })
    const blocks = /0\nSECTION\n2\nBLOCKS\n[\s\S]*?0\nENDSEC\n/.exec(text)![0]
    expect(segmentsOf(drawingOf(text.replace(blocks, '').replace('0\nEOF', `${blocks}0\nEOF`)))).toHaveLength(2)
  })

  test('a model that stands in its block instead of ENTITIES', () => {
    expect(segmentsOf(drawn([], { blocks: { '*Model_Space': unit.ARROW } }))).toHaveLength(2)
    const both = drawn([line([0, 0], [1, 0])], { blocks: { '*Model_Space': unit.ARROW } })
    expect(both.leftOut.map(({ kind, count }) => [kind, count])).toEqual([['LINE, in the block *Model_Space', 1], ['LINE, in the block *Model_Space', 1]])
  })

  test('an insert on a frozen layer hides all of its block, one on a layer that is off only what is on layer 0', () => {
    const layers = [{ name: 'F', frozen: true }, { name: 'O', off: true }]
    const drawing = drawn([insert('ARROW', 0, 0, [], 'F'), insert('ARROW', 0, 0, [], 'O')], { blocks: unit, layers })
    expect(drawing.leftOut).toEqual([{ kind: 'INSERT, layer frozen', layer: 'F', count: 1 }, { kind: 'LINE, layer off', layer: 'O', count: 1 }])
    expect(segmentsOf(drawing)).toHaveLength(1)
  })

  test('a block that is not there, or in another file, is counted', () => {
    const text = dxfText({ blocks: { OUTSIDE: [] }, entities: [line([0, 0], [1, 0]), insert('NOWHERE', 0, 0), insert('OUTSIDE', 0, 0)] }).replace('OUTSIDE\n70\n0', 'OUTSIDE\n70\n4')
    expect(drawingOf(text).leftOut.map(({ kind }) => kind)).toEqual(['INSERT, its block is not in the file', 'INSERT, its block is in another file'])
  })

  test('an insert that is tilted gives heights', () => {
    const drawing = drawn([insert('TRI', 0, 0, [[210, 0], [220, -1], [230, 1]])], { blocks: { TRI: [polyline([[0, 0], [2, 0], [2, 1]])] } })
    expect([...drawing.hasHeight]).toEqual([1, 1, 1])
    const half = Math.SQRT1_2
    near(outlinesOf(drawing)[0]!, [[0, 0, 0], [2, 0, 0], [2, half, half]])
  })
})

// Twin road: what was written, from the numbers that wrote it.
test('random line work and outlines read back to the last digit (seed 3)', () => {
  const next = random(3)
  const value = (): number => (next() - 0.5) * 10 ** Math.floor(12 * next() - 4)
  const lines = Array.from({ length: 300 }, (): [Point, Point] => [[value(), value(), value()], [value(), value(), value()]])
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
