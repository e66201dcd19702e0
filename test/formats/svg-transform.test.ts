/** Transform lists: matrices worked out by hand, and a second reader (svgpath, MIT) on random lists. */
import svgpath from 'svgpath'
import { expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { composed, transformList } from '../../src/formats/svg-transform.ts'
import { drawn, outlines, refusal } from './svg-reading.ts'

test('each function is its matrix; right angles are exact', () => {
  // Exact: worked out by hand from SVG 1.1, section 7.6.
  expect(transformList('matrix(1,2 3-4 5 6)')).toEqual([1, 2, 3, -4, 5, 6])
  expect(transformList('translate(3)')).toEqual([1, 0, 0, 1, 3, 0])
  expect(transformList('translate( 3 , -4 )')).toEqual([1, 0, 0, 1, 3, -4])
  expect(transformList('scale(2)')).toEqual([2, 0, 0, 2, 0, 0])
  expect(transformList('scale(2-1)')).toEqual([2, 0, 0, -1, 0, 0])
  expect(transformList('rotate(90)')).toEqual([0, 1, -1, 0, 0, 0])
  expect(transformList('rotate(-90)')).toEqual([0, -1, 1, 0, 0, 0])
  expect(transformList('rotate(90 10 20)')!.map((v) => v + 0)).toEqual([0, 1, -1, 0, 30, 10])
  expect(transformList('skewX(45)')![2]).toBeCloseTo(1, 15)
  expect(transformList('skewY(45)')![1]).toBeCloseTo(1, 15)
  expect(transformList('')).toEqual([1, 0, 0, 1, 0, 0])
  expect(transformList(' none ')).toEqual([1, 0, 0, 1, 0, 0])
  expect(transformList('rotate(0.25turn)')).toEqual([0, 1, -1, 0, 0, 0])
  expect(transformList('translate(3px, 4px)')).toEqual([1, 0, 0, 1, 3, 4])
})

test('the rightmost function acts first', () => {
  // Exact: (1, 0) scaled by 3 is (3, 0), turned by 90 degrees (0, 3), moved (10, 3).
  const [a, b, , , e, f] = transformList('translate(10) rotate(90)scale(3)')!
  expect([a + e, b + f]).toEqual([10, 3])
  expect(composed([1, 2, 3, 4, 5, 6], [7, 8, 9, 10, 11, 12])).toEqual([31, 46, 39, 58, 52, 76])
})

test('what is no list of functions of the plane is refused', () => {
  for (const text of [
    'rotate',
    'rotate(',
    'rotate(1 2)',
    'matrix(1 2 3 4 5)',
    'scale()',
    'rotate(x)',
    'rotate3d(1 1 1 5)',
    'translate(5%)',
    'foo(1)',
    'scale(1e999)',
    'scale(1))',
    'scale(1) 5',
    'translate(1 2 3 4 5 6 7)',
  ]) {
    expect(transformList(text), text).toBeNull()
  }
  expect(transformList('scale(1) '.repeat(2000))).toBeNull()
})

test('200 random lists move points where a second reader moves them', () => {
  const next = random(3)
  const number = (): string => ((next() - 0.5) * 8).toFixed(2)
  for (let i = 0; i < 200; i += 1) {
    const functions = Array.from({ length: 1 + Math.floor(next() * 4) }, () => {
      const kinds = [
        `translate(${number()},${number()})`,
        `scale(${number()} ${number()})`,
        `rotate(${Number(number()) * 90})`,
        `rotate(${Number(number()) * 20} ${number()} ${number()})`,
        `skewX(${number()})`,
        `skewY(${number()})`,
        `matrix(${number()} ${number()} ${number()} ${number()} ${number()} ${number()})`,
      ]
      return kinds[Math.floor(next() * kinds.length)]!
    })
    const list = functions.join(' ')
    const [a, b, c, d, e, f] = transformList(list)!
    const theirs: number[] = []
    svgpath('M1.5 -2.25')
      .transform(list)
      .iterate((segment) => {
        if (segment[0] === 'M') theirs.push(segment[1], segment[2])
      })
    const size = Math.abs(theirs[0]!) + Math.abs(theirs[1]!) + 1000
    expect(Math.abs(a * 1.5 + c * -2.25 + e - theirs[0]!), list).toBeLessThan(1e-13 * size)
    expect(Math.abs(b * 1.5 + d * -2.25 + f - theirs[1]!), list).toBeLessThan(1e-13 * size)
  }
})

test('nested groups compose; transform may stand in a style', () => {
  // Exact: (0,0)-(10,5) scaled by 2, moved by (30, 10), then turned by 90 degrees about (50, 50): (x, y) -> (100 - y, x).
  const square = '<rect width="10" height="5"/>'
  const attribute = outlines(drawn(`<g transform="rotate(90 50 50)"><g transform="translate(30 10) scale(2)">${square}</g></g>`))
  const style = outlines(
    drawn(
      `<g style="transform: rotate(90deg)" transform="scale(9)">` +
        `<g transform="translate(0 -100) translate(30 10)"><g style="transform:scale(2)">${square}</g></g></g>`,
    ),
  )
  expect(attribute).toEqual([
    [
      [90, 70],
      [90, 50],
      [80, 50],
      [80, 70],
    ],
  ])
  expect(style).toEqual(attribute)
})

test('a mirror turns the sense of an outline, not its area', () => {
  const [plain, mirrored] = outlines(drawn('<path d="M0 0H10V5H0z"/><path transform="matrix(-1 0 0 1 50 0)" d="M0 0H10V5H0z"/>'))
  expect(plain).toEqual([
    [0, 100],
    [10, 100],
    [10, 95],
    [0, 95],
  ])
  expect(mirrored).toEqual([
    [50, 100],
    [40, 100],
    [40, 95],
    [50, 95],
  ])
})

test('a transform that cannot be read is refused at its element', () => {
  expect(refusal('<g id="a" transform="rotate(1 2)"><rect width="1" height="1"/></g>')).toMatchObject({
    message: 'transform cannot be read: "rotate(1 2)"',
    where: { line: 1, entity: '<g> "a"' },
  })
  expect(refusal('<rect style="transform:scale(2);transform-origin:center" width="1" height="1"/>').message).toMatch(/^transform-origin/)
})
