import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { obj } from '../../src/formats/obj.ts'
import { drawingOf, outlinesOf, segmentsOf, sentenceOf, usual } from './text-read.ts'

const read = (text: string, options = {}): ReturnType<typeof drawingOf> => drawingOf(text, 'a.obj', options)
const square = 'v 0 0 0\nv 1 0 0\nv 1 1 0\nv 0 1 0\n'

describe('faces, lines and points', () => {
  test.each([
    ['plain', 'f 1 2 3 4'],
    ['texture points', 'f 1/1 2/2 3/3 4/4'],
    ['normals', 'f 1//1 2//1 3//1 4//1'],
    ['both', 'f 1/1/1 2/2/1 3/3/1 4/4/1'],
    ['from the end', 'f -4 -3 -2 -1'],
    ['continued', 'f 1 2 \\\n3 \\\n 4'],
    ['a comment behind', 'f 1 2 3 4 # P1'],
    ['a corner twice', 'f 1 2 2 3 4 1'],
    ['tabs and blanks', '\tf  1\t2   3 4  '],
  ])('a face, %s', (_, statement) => {
    expect(outlinesOf(read(`${square}${statement}\n`))).toEqual([
      [
        [0, 0, 0],
        [1, 0, 0],
        [1, 1, 0],
        [0, 1, 0],
      ],
    ])
  })

  test('a face before its vertices', () => {
    expect(outlinesOf(read(`f 1 2 3\n${square}`))).toHaveLength(1)
  })

  test('line elements become segments, point elements marks', () => {
    const drawing = read(`${square}l 1 2 3\nl 3/1 4/2\np 2 4\n`)
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
        [1, 1, 0],
        [0, 1, 0],
      ],
    ])
    expect([...drawing.segmentLine]).toEqual([5, 5, 6])
    expect([...drawing.marks]).toEqual([1, 3])
  })

  test('a height is stated where the vertex has a third number', () => {
    expect([...read('v 0 0 0\nv 1 0\nv 1 1 2.5 1\nv 0 1 3 0.1 0.2 0.3\nf 1 2 3 4\n').hasHeight]).toEqual([1, 0, 1, 1])
  })

  test('no unit, not on paper, lines of the file kept', () => {
    const drawing = read(`# head\n\n${square}f 1 2 3\n\nf 1 3 4\n`)
    expect(drawing.unit).toBeNull()
    expect(drawing.onPaper).toBe(false)
    expect([...drawing.outlines.line]).toEqual([7, 9])
  })

  test('the line of a continued face is its first', () => {
    expect([...read(`${square}f 1 \\\n2 \\\n3\nf 1 2 3\n`).outlines.line]).toEqual([5, 8])
  })

  test('a comment that ends in a backslash swallows nothing', () => {
    expect(outlinesOf(read(`# C:\\plans\\\n${square}f 1 2 3\n`))).toHaveLength(1)
  })
})

describe('groups are layers', () => {
  const groups = `${square}g south\nf 1 2 3\ng North side\nf 1 3 4\no roof\nl 1 3\n`

  test('by name', () => {
    const drawing = read(groups)
    expect(drawing.layers).toEqual(['', 'south', 'North side', 'roof'])
    expect([...drawing.outlines.layer]).toEqual([1, 2])
    expect([...drawing.segmentLayer]).toEqual([3])
  })

  test('chosen without regard to case, the rest counted', () => {
    const drawing = read(groups, { layers: ['NORTH SIDE'] })
    expect(outlinesOf(drawing)).toEqual([
      [
        [0, 0, 0],
        [1, 1, 0],
        [0, 1, 0],
      ],
    ])
    expect(drawing.leftOut).toEqual([
      { kind: 'face, layer not chosen', layer: 'south', count: 1 },
      { kind: 'line, layer not chosen', layer: '', count: 1 },
    ])
  })

  test('one that is not there', () => {
    expect(sentenceOf(groups, 'a.obj', { layers: ['west'] })).toBe(
      'a.obj: there is no layer "west"; the file has "North side", "roof", "south".',
    )
  })
})

test('statements that are not read are counted, those without geometry are not', () => {
  const drawing = read(
    `mtllib a.mtl\n${square}vt 0 0\nvn 0 0 1\ns off\nusemtl glass\nf 1 2 3\ncstype bezier\ndeg 3\n${'curv 0 1 1 2 3 4\nend\n'.repeat(2)}`,
  )
  expect(drawing.leftOut).toEqual([{ kind: 'statement "curv"', layer: '', count: 2 }])
})

describe('bad input: one sentence with the line and the cure', () => {
  test.each([
    ['a word for a number', `${square}v 1 two 3`, 'a.obj, line 5: "two" is not a number; export the file again.'],
    ['not a number', `v 0 nan 0`, 'a.obj, line 1: "nan" is not a number; export the file again.'],
    ['infinity', `v 0 0 -inf`, 'a.obj, line 1: "-inf" is not a number; export the file again.'],
    ['overflow', `v 1e999 0 0`, 'a.obj, line 1: "1e999" is not a number; export the file again.'],
    ['far out', `v 0 1e308 0`, 'a.obj, line 1: the coordinate "1e308" is beyond 1e12; move the drawing nearer to its origin.'],
    ['a decimal comma', `v 0,5 1 0`, 'a.obj, line 1: "0,5" is not a number; write decimals with a point.'],
    ['one coordinate', `v 1`, 'a.obj, line 1: a vertex has fewer than two coordinates; give x, y and z.'],
    ['an index too high', `${square}f 1 2 5`, 'a.obj, line 5: vertex 5 is named, but there are 4 vertices; export the file again.'],
    ['an index too low', `${square}f 1 2 -5`, 'a.obj, line 5: vertex -5 is named, but there are 4 vertices; export the file again.'],
    ['index zero', `${square}f 0 1 2`, 'a.obj, line 5: vertex 0 is named, but there are 4 vertices; export the file again.'],
    ['a huge index', `${square}f 1 2 99999999999`, 'a.obj, line 5: "99999999999" is not a number; export the file again.'],
    ['a word for an index', `${square}f 1 2 x`, 'a.obj, line 5: "x" is not a number; export the file again.'],
    ['too many slashes', `${square}f 1/1/1/1 2 3`, 'a.obj, line 5: "1/1/1/1" is not a number; export the file again.'],
    [
      'two corners',
      `${square}f 1 2`,
      'a.obj, line 5: a face has fewer than three different corners; give it three or more, or leave it out.',
    ],
    [
      'one point three times',
      `${square}f 1 1 1`,
      'a.obj, line 5: a face has fewer than three different corners; give it three or more, or leave it out.',
    ],
    [
      'a line to itself',
      `${square}l 2 2`,
      'a.obj, line 5: a line has fewer than two different points; give it two or more, or leave it out.',
    ],
    ['no faces', square, 'a.obj: the file has no faces (f) and no lines (l); export the panels as faces or their edges as lines.'],
    [
      'cut off in a face',
      `${square}f 1 2`,
      'a.obj, line 5: a face has fewer than three different corners; give it three or more, or leave it out.',
    ],
  ])('%s', (_, text, expected) => {
    expect(sentenceOf(text, 'a.obj')).toBe(expected)
  })
})

// Twin road: the same faces from the numbers that wrote them.
test('a random mesh, renumbered and turned, reads back to the last digit (seed 11)', () => {
  const next = random(11)
  const points = Array.from({ length: 500 }, () => [1e7 * (next() - 0.5), 4e6 + next(), 1000 * next()])
  const faces = Array.from({ length: 300 }, () => {
    const corners = new Set<number>()
    while (corners.size < 3 + Math.floor(5 * next())) corners.add(Math.floor(500 * next()))
    return [...corners]
  })
  const index = (i: number): number => (next() < 0.5 ? i + 1 : i - 500)
  const statements = [...points.map((p) => `v ${p.join(' ')}`), ...faces.map((f) => `f ${f.map(index).join(' ')}`)]
  const text = `${statements.join('\n')}\n`
  expect(outlinesOf(read(text))).toEqual(faces.map((face) => face.map((i) => points[i])))
})

test('a long file gives turns: the steps between yields are bounded', () => {
  const text = `${square}${'f 1 2 3 4\n'.repeat(100_000)}`
  const steps = obj.read(text, { name: 'a.obj', bytes: new Uint8Array(0) }, usual)
  let count = 0
  let share = 0
  for (let step = steps.next(); step.done !== true; step = steps.next()) {
    count += 1
    expect(step.value.done).toBeGreaterThan(share)
    share = step.value.done
  }
  expect(count).toBe(5)
})
