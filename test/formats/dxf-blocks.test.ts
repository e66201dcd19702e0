import { describe, expect, test } from 'vitest'
import { drawn } from './dxf-drawn.ts'
import { dxfText, insert, line, polyline } from './dxf-writer.ts'
import { drawingOf, outlinesOf, segmentsOf } from './text-read.ts'

/** Equal to 1e-12 of the size of the numbers. */
function near(found: readonly (readonly number[])[], expected: readonly (readonly number[])[]): void {
  expect(found.length).toBe(expected.length)
  found.forEach((point, i) =>
    point.forEach((value, k) => {
      if (!(Math.abs(value - expected[i]![k]!) <= 1e-12 * Math.max(1, Math.abs(value))))
        throw new Error(`point ${i}: ${point.join(' ')} is not ${expected[i]!.join(' ')}`)
    }),
  )
}

describe('blocks', () => {
  const unit = { ARROW: [line([0, 0], [2, 0]), line([2, 0], [2, 1], 'OWN')] }

  test('base point, scale, turn and layer 0', () => {
    const drawing = drawn(
      [
        insert(
          'ARROW',
          10,
          20,
          [
            [41, 3],
            [42, 0.5],
            [50, 90],
          ],
          'SET',
        ),
      ],
      { blocks: unit, base: [2, 0, 0] },
    )
    near(segmentsOf(drawing).flat(), [
      [10, 14, 0],
      [10, 20, 0],
      [10, 20, 0],
      [9.5, 20, 0],
    ])
    expect(drawing.layers).toEqual(['SET', 'OWN'])
  })

  test('at quarter turns at survey coordinates no digit is lost', () => {
    for (const [degrees, end] of [
      [0, [2, 0]],
      [90, [0, 2]],
      [180, [-2, 0]],
      [270, [0, -2]],
      [-90, [0, -2]],
      [450, [0, 2]],
    ] as const) {
      const drawing = drawn([insert('ARROW', 5700000.125, 4000000.5, [[50, degrees]])], { blocks: unit })
      expect(segmentsOf(drawing)[0]).toEqual([
        [5700000.125, 4000000.5, 0],
        [5700000.125 + end[0], 4000000.5 + end[1], 0],
      ])
    }
  })

  test('mirrored: an outline turns the other way', () => {
    const drawing = drawn([insert('TRI', 0, 0, [[41, -1]])], {
      blocks: {
        TRI: [
          polyline([
            [0, 0],
            [2, 0],
            [2, 1],
          ]),
        ],
      },
    })
    near(outlinesOf(drawing)[0]!, [
      [0, 0, 0],
      [-2, 0, 0],
      [-2, 1, 0],
    ])
  })

  test('columns and rows, turned with the insert, not scaled', () => {
    const drawing = drawn(
      [
        insert('ARROW', 0, 0, [
          [41, 0.5],
          [50, 90],
          [70, 3],
          [71, 2],
          [44, 10],
          [45, 20],
        ]),
      ],
      { blocks: { ARROW: [line([0, 0], [2, 0])] } },
    )
    near(
      segmentsOf(drawing).map(([a]) => a),
      [
        [0, 0, 0],
        [0, 10, 0],
        [0, 20, 0],
        [-20, 0, 0],
        [-20, 10, 0],
        [-20, 20, 0],
      ],
    )
    near(
      segmentsOf(drawing).map(([, b]) => b),
      [
        [0, 1, 0],
        [0, 11, 0],
        [0, 21, 0],
        [-20, 1, 0],
        [-20, 11, 0],
        [-20, 21, 0],
      ],
    )
  })

  test('blocks that follow the entities, and layers too', () => {
    const text = dxfText({ blocks: unit, entities: [insert('ARROW', 0, 0)] })
    const blocks = /0\nSECTION\n2\nBLOCKS\n[\s\S]*?0\nENDSEC\n/.exec(text)![0]
    expect(segmentsOf(drawingOf(text.replace(blocks, '').replace('0\nEOF', `${blocks}0\nEOF`)))).toHaveLength(2)
  })

  test('a model that stands in its block instead of ENTITIES', () => {
    expect(segmentsOf(drawn([], { blocks: { '*Model_Space': unit.ARROW } }))).toHaveLength(2)
    const both = drawn([line([0, 0], [1, 0])], { blocks: { '*Model_Space': unit.ARROW } })
    expect(both.leftOut.map(({ kind, count }) => [kind, count])).toEqual([
      ['LINE, in the block *Model_Space', 1],
      ['LINE, in the block *Model_Space', 1],
    ])
  })

  test('an insert on a frozen layer hides all of its block, one on a layer that is off only what is on layer 0', () => {
    const layers = [
      { name: 'F', frozen: true },
      { name: 'O', off: true },
    ]
    const drawing = drawn([insert('ARROW', 0, 0, [], 'F'), insert('ARROW', 0, 0, [], 'O')], { blocks: unit, layers })
    expect(drawing.leftOut).toEqual([
      { kind: 'INSERT, layer frozen', layer: 'F', count: 1 },
      { kind: 'LINE, layer off', layer: 'O', count: 1 },
    ])
    expect(segmentsOf(drawing)).toHaveLength(1)
  })

  test('a block that is not there, or in another file, is counted', () => {
    const text = dxfText({
      blocks: { OUTSIDE: [] },
      entities: [line([0, 0], [1, 0]), insert('NOWHERE', 0, 0), insert('OUTSIDE', 0, 0)],
    }).replace('OUTSIDE\n70\n0', 'OUTSIDE\n70\n4')
    expect(drawingOf(text).leftOut.map(({ kind }) => kind)).toEqual([
      'INSERT, its block is not in the file',
      'INSERT, its block is in another file',
    ])
  })

  test('an insert that is tilted gives heights', () => {
    const drawing = drawn(
      [
        insert('TRI', 0, 0, [
          [210, 0],
          [220, -1],
          [230, 1],
        ]),
      ],
      {
        blocks: {
          TRI: [
            polyline([
              [0, 0],
              [2, 0],
              [2, 1],
            ]),
          ],
        },
      },
    )
    expect([...drawing.hasHeight]).toEqual([1, 1, 1])
    const half = Math.SQRT1_2
    near(outlinesOf(drawing)[0]!, [
      [0, 0, 0],
      [2, 0, 0],
      [2, half, half],
    ])
  })
})
