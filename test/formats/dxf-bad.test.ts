import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { at, dxfText, face, insert, line, polyline, type Pairs, type Written } from './dxf-writer.ts'
import { drawingOf, sentenceOf } from './text-read.ts'

const good = line([0, 0], [1, 0])
const said = (...entities: Written[]): string => sentenceOf(dxfText({ units: null, entities }))
const entity = (kind: string, pairs: Pairs): Written => ({ kind, pairs: [[5, '2F'], ...pairs] })
const spline = (pairs: Pairs): string => said(entity('SPLINE', pairs))
const controls: Pairs = [
  [0, 0],
  [1, 1],
  [2, 0],
  [3, 1],
].flatMap(([x, y]) => at(10, x!, y!))
const knots = (...values: number[]): Pairs => values.map((value) => [40, value])

// Without units dxfText begins with 6 lines of an empty BLOCKS section and 4 lines up to ENTITIES: the first entity is line 11.
describe('one sentence with file, line, entity and cure', () => {
  test.each([
    [
      'a word for a number',
      said(
        entity('LINE', [
          [10, 'x'],
          [20, 0],
          [11, 1],
          [21, 0],
        ]),
      ),
      'plan.dxf, line 18, LINE 2F: "x" is not a number; export the file again.',
    ],
    [
      'not a number',
      said(
        entity('LINE', [
          [10, 0],
          [20, 'nan'],
          [11, 1],
          [21, 0],
        ]),
      ),
      'plan.dxf, line 20, LINE 2F: "nan" is not a number; export the file again.',
    ],
    [
      'as one runtime writes it',
      said(
        entity('LINE', [
          [10, 0],
          [20, '-1.#IND'],
          [11, 1],
          [21, 0],
        ]),
      ),
      'plan.dxf, line 20, LINE 2F: "-1.#IND" is not a number; export the file again.',
    ],
    [
      'far out',
      said(
        entity('LINE', [
          [10, '1e308'],
          [20, 0],
          [11, 1],
          [21, 0],
        ]),
      ),
      'plan.dxf, line 18, LINE 2F: the number "1e308" is beyond 1e12; move the drawing nearer to its origin.',
    ],
    [
      'no end point',
      said(entity('LINE', at(10, 0, 0))),
      'plan.dxf, line 11, LINE 2F: it has no point of codes 11 and 21; export the file again.',
    ],
    [
      'no y',
      said(
        entity('LWPOLYLINE', [
          [90, 2],
          [10, 0],
          [10, 1],
          [20, 1],
        ]),
      ),
      'plan.dxf, line 11, LWPOLYLINE 2F: a vertex has no y (code 20); export the file again.',
    ],
    [
      'one vertex',
      said(
        entity('LWPOLYLINE', [
          [90, 1],
          [10, 0],
          [20, 1],
        ]),
      ),
      'plan.dxf, line 11, LWPOLYLINE 2F: it has fewer than two vertices; leave it out or export the file again.',
    ],
    [
      'no radius',
      said(entity('CIRCLE', [...at(10, 0, 0), [40, 0]])),
      'plan.dxf, line 11, CIRCLE 2F: its radius (code 40) is not a positive number; leave it out.',
    ],
    [
      'a flat ellipse',
      said(entity('ELLIPSE', [...at(10, 0, 0), ...at(11, 1, 0), [40, 0]])),
      'plan.dxf, line 11, ELLIPSE 2F: it has an axis of no length; leave it out.',
    ],
    [
      'no SEQEND',
      said(
        {
          kind: 'POLYLINE',
          pairs: [
            [5, '2F'],
            [70, 0],
          ],
        },
        { kind: 'VERTEX', pairs: at(10, 0, 0) },
        good,
      ),
      'plan.dxf, line 29, LINE: POLYLINE 2F has no SEQEND before this; the file is damaged; export it again.',
    ],
    [
      'polyface index',
      said(
        entity('POLYLINE', [[70, 64]]),
        { kind: 'VERTEX', pairs: [...at(10, 0, 0), [70, 192]] },
        {
          kind: 'VERTEX',
          pairs: [
            [70, 128],
            [71, 1],
            [72, -2],
            [73, 1],
          ],
        },
        { kind: 'SEQEND' },
      ),
      'POLYLINE 2F has a face with vertex 2, but there are 1',
    ],
    [
      'mesh of rows too short',
      said(
        entity('POLYLINE', [
          [70, 16],
          [71, 3],
          [72, 3],
        ]),
        { kind: 'VERTEX', pairs: [...at(10, 0, 0), [70, 64]] },
        { kind: 'SEQEND' },
      ),
      'POLYLINE 2F states 3 x 3 vertices and has 1',
    ],
    [
      'MESH count',
      said(entity('MESH', [[92, 5], ...at(10, 0, 0), [93, 0]])),
      'MESH 2F: it states 5 vertices and has 1; export the file again.',
    ],
    [
      'MESH index',
      said(entity('MESH', [[92, 3], ...at(10, 0, 0), ...at(10, 1, 0), ...at(10, 1, 1), [93, 4], [90, 3], [90, 0], [90, 1], [90, 3]])),
      'a face names vertex 3, but there are 3 (counted from 0)',
    ],
    [
      'MESH cut short',
      said(entity('MESH', [[92, 3], ...at(10, 0, 0), ...at(10, 1, 0), ...at(10, 1, 1), [93, 1000000000], [90, 3], [90, 0]])),
      'its list of faces ends in the middle of a face',
    ],
    ['degree', spline([[71, 99], ...controls]), 'SPLINE 2F: its degree is 99; degrees 1 to 25 are read; draw it anew or leave it out.'],
    ['too few control points', spline([[71, 4], ...controls]), 'it has 4 control points; degree 4 takes at least 5'],
    [
      'too few knots',
      spline([[71, 3], [72, 1000000000], ...controls, ...knots(0, 0, 0, 0, 1, 1, 1)]),
      'it has 7 knots; 4 control points of degree 3 take 8',
    ],
    ['knots out of order', spline([[71, 3], ...controls, ...knots(0, 0, 0, 0, 1, 1, 0.5, 1)]), 'its knots are out of order'],
    ['knots all one', spline([[71, 3], ...controls, ...knots(1, 1, 1, 1, 1, 1, 1, 1)]), 'its knots leave it no length'],
    [
      'a weight of 0',
      spline([[71, 3], ...controls, ...knots(0, 0, 0, 0, 1, 1, 1, 1), [41, 1], [41, 0], [41, 1], [41, 1]]),
      'it has a weight that is not positive',
    ],
    ['no points at all', spline([[71, 3]]), 'it has neither control points nor two different fit points'],
    [
      'no group code',
      sentenceOf(dxfText({ entities: [good] }).replace('\n11\n', '\nGLASS\n')),
      '"GLASS" stands where a group code should be; the file is damaged; export it again.',
    ],
    [
      'a line lost',
      sentenceOf(dxfText({ entities: [good] }).replace('\n11\n1\n', '\n11\n')),
      'line 25, LINE: it has no point of codes 11 and 21; export the file again.',
    ],
    [
      'no section',
      sentenceOf('0\nSECTION\n2\nENTITIES\n0\nENDSEC\n0\nLINE\n0\nEOF\n'),
      'plan.dxf, line 7, LINE: it stands in no section; the file is damaged; export it again.',
    ],
    [
      'no entities section',
      sentenceOf('0\nSECTION\n2\nHEADER\n0\nENDSEC\n0\nEOF\n'),
      'plan.dxf: the file has no ENTITIES section; export the drawing again, with its entities.',
    ],
    [
      'nothing to read',
      said({ kind: 'TEXT', layer: 'Notes' }, { kind: 'HATCH' }),
      'to read, only 1 x TEXT on layer "Notes", 1 x HATCH on layer "0"; export the edges of the panels as lines or closed polylines.',
    ],
    [
      'nothing at all',
      said(),
      'plan.dxf: the file has no faces, outlines or lines to read; export the edges of the panels as lines or closed polylines.',
    ],
    ['markup for a kind', said({ kind: '<script>alert(1)</script>' }), 'only 1 x <SCRIPT>ALERT(1)</SCRIPT> on layer "0"'],
  ])('%s', (_, found, expected) => {
    expect(found).toContain(expected)
    expect(found.startsWith('plan.dxf')).toBe(true)
  })
})

describe('cut off', () => {
  const text = dxfText({ entities: [{ ...good, pairs: [[5, '2F'], ...good.pairs!] }, good] })

  test('before EOF', () => {
    expect(sentenceOf(text.replace('0\nEOF\n', ''))).toMatch(
      /^plan.dxf, line \d+: the file ends before its EOF mark; it was cut off; export it again\.$/,
    )
  })

  test('in an entity', () => {
    expect(sentenceOf(text.slice(0, text.indexOf('\n11\n') + 4))).toMatch(
      /the file ends in the middle of LINE 2F; it was cut off; export it again\.$/,
    )
  })

  test('anywhere: every beginning of a file is refused with a sentence', () => {
    for (let length = 1; length < text.length - '\nEOF\n'.length; length += 1)
      expect(sentenceOf(text.slice(0, length))).toMatch(/^plan.dxf[,:].*; .*\.$/)
  })

  test('at any tenth of a file from another program', () => {
    const whole = readFileSync('test/corpus/dxf/cells-lines.dxf', 'latin1')
    for (let tenth = 1; tenth < 10; tenth += 1)
      expect(sentenceOf(whole.slice(0, (tenth * whole.length) / 10))).toMatch(/cut off|damaged|not a number/)
  })

  test('blank lines and a control Z after EOF are no fault', () => {
    expect(drawingOf(`${text}\n\n\u001a`).segmentLayer).toHaveLength(2)
  })
})

describe('what would fill the memory is refused, with its limit', () => {
  test('a billion copies', () => {
    const blocks = { A: [good] }
    expect(
      sentenceOf(
        dxfText({
          blocks,
          entities: [
            insert('A', 0, 0, [
              [70, 30000],
              [71, 30000],
            ]),
          ],
        }),
      ),
    ).toContain('more than 1000000 entities; export only the panels')
    expect(sentenceOf(dxfText({ blocks, entities: [insert('A', 0, 0, [[70, 1000000000]])] }))).toContain('copies, more than 32767 a side')
  })

  test('a billion copies of an empty block', () => {
    expect(
      sentenceOf(
        dxfText({
          blocks: { A: [] },
          entities: [
            insert('A', 0, 0, [
              [70, 990],
              [71, 990],
            ]),
            insert('A', 0, 0, [
              [70, 990],
              [71, 990],
            ]),
          ],
        }),
      ),
    ).toContain('more than 1000000 entities')
  })

  test('blocks of ten blocks of ten blocks', () => {
    const blocks: Record<string, Written[]> = { B0: [good] }
    for (let i = 1; i < 12; i += 1) blocks[`B${i}`] = Array.from({ length: 10 }, () => insert(`B${i - 1}`, 0, 0))
    expect(sentenceOf(dxfText({ blocks, entities: [insert('B11', 0, 0)] }))).toContain(
      'with its blocks unfolded the drawing has more than 1000000 entities',
    )
  })

  test('a block in itself, at once and round a corner', () => {
    expect(sentenceOf(dxfText({ blocks: { A: [insert('a', 1, 0)] }, entities: [insert('A', 0, 0)] }))).toContain(
      'its block contains itself; explode the block or leave it out',
    )
    expect(sentenceOf(dxfText({ blocks: { A: [insert('B', 1, 0)], B: [insert('A', 0, 1)] }, entities: [insert('A', 0, 0)] }))).toContain(
      'its block contains itself',
    )
  })

  test('a thousand blocks deep', () => {
    const blocks: Record<string, Written[]> = { B0: [good] }
    for (let i = 1; i < 1000; i += 1) blocks[`B${i}`] = [insert(`B${i - 1}`, 0, 0)]
    expect(sentenceOf(dxfText({ blocks, entities: [insert('B999', 0, 0)] }))).toContain('its block is nested more than 32 deep')
  })

  test('scales that multiply beyond all bounds', () => {
    const blocks = {
      A: [good],
      B: [
        insert('A', 0, 0, [
          [41, 1e11],
          [42, 1e11],
        ]),
      ],
    }
    expect(
      sentenceOf(
        dxfText({
          blocks,
          entities: [
            insert('B', 0, 0, [
              [41, 1e11],
              [42, 1e11],
            ]),
          ],
        }),
      ),
    ).toContain('a coordinate comes out beyond 1e12; check the scale of its block')
  })

  test('a circle of a million kilometres', () => {
    expect(said(entity('CIRCLE', [...at(10, 0, 0), [40, 1e12]]))).toContain(
      'CIRCLE 2F: it would take more than 100000 chords; allow a larger sagitta (--sagitta) or check the unit',
    )
    expect(
      spline([[71, 3], ...controls.map(([code, v]) => [code, Number(v) * 1e11] as const), ...knots(0, 0, 0, 0, 1, 1, 1, 1)]),
    ).toContain('more than 100000 chords')
  })
})

test('entities of another program that state nothing wrong are counted, not judged', () => {
  const drawing = drawingOf(
    dxfText({
      entities: [
        face([
          [0, 0],
          [1, 0],
          [1, 1],
        ]),
        polyline([
          [0, 0],
          [1, 0],
          [1, 1],
        ]),
        entity('TEXT', [
          [10, 'here'],
          [40, 'tall'],
        ]),
      ],
    }),
  )
  expect(drawing.leftOut).toEqual([{ kind: 'TEXT', layer: '0', count: 1 }])
})
