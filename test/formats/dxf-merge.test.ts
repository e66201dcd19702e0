import { describe, expect, test } from 'vitest'
import { drawn } from './dxf-drawn.ts'
import { face } from './dxf-writer.ts'
import { outlinesOf } from './text-read.ts'

describe('invisible edges', () => {
  const quad = [
    [0, 0, 0],
    [4, 0, 0],
    [4, 3, 0],
    [0, 3, 0],
  ]
  const roof = [
    [4, 3, 0],
    [2, 5, 0],
    [0, 3, 0],
  ]
  const pentagon = [
    [0, 0, 0],
    [4, 0, 0],
    [4, 3, 0],
    [2, 5, 0],
    [0, 3, 0],
  ]

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
    const rim = Array.from({ length: n }, (_, i) => [
      Math.round(1000 * Math.cos((2 * Math.PI * i) / n)),
      Math.round(1000 * Math.sin((2 * Math.PI * i) / n)),
      0,
    ])
    const fan = rim.map((corner, i) => face([[0, 0, 0], corner, rim[(i + 1) % n]!], 1 + 8))
    const outlines = outlinesOf(drawn(fan))
    expect(outlines).toHaveLength(1)
    expect(new Set(outlines[0]!.map(String))).toEqual(new Set(rim.map(String)))
  })

  test('a ring whose inner edges are hidden stays as drawn: no outline has a hole', () => {
    const faces = [0, 1, 2, 3].map((i) => {
      const corner = (k: number, r: number): number[] =>
        [
          [r, r, 0],
          [-r, r, 0],
          [-r, -r, 0],
          [r, -r, 0],
        ][k % 4]!
      return face([corner(i, 1), corner(i, 2), corner(i + 1, 2), corner(i + 1, 1)], 1 + 4)
    })
    expect(outlinesOf(drawn(faces))).toHaveLength(4)
  })

  test('every edge of a surface hidden: the faces stay as drawn', () => {
    const faces = [0, 1, 2].map((i) =>
      face(
        [
          [i, 0, 0],
          [i + 1, 0, 0],
          [i + 1, 1, 0],
          [i, 1, 0],
        ],
        15,
      ),
    )
    expect(outlinesOf(drawn(faces))).toHaveLength(3)
  })

  test('the order of the file is kept', () => {
    const first = face([
      [10, 0, 0],
      [11, 0, 0],
      [11, 1, 0],
    ])
    const last = face([
      [20, 0, 0],
      [21, 0, 0],
      [21, 1, 0],
    ])
    expect(outlinesOf(drawn([first, face(quad, 4), last, face(roof, 8)])).map((outline) => outline[0]![0])).toEqual([10, 0, 20])
  })
})
