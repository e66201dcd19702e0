/** Rings of one path: which bound panels and which bound holes (SVG 2, section 13.4.2), worked out by hand. */
import { expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { area, drawn, holes, outlines, type Point } from './svg-reading.ts'

const line = 'fill="none" stroke="black"'

test('several rings in one path: those that bound no paint are holes, by either rule', () => {
  const outer = 'M0 0H40V40H0z'
  const same = 'M10 10H30V30H10z'
  const opposite = 'M10 10V30H30V10z'
  const island = 'M15 15H25V25H15z'
  const count = (d: string, attributes = ''): [number, number] => {
    const drawing = drawn(`<path d="${d}" ${attributes}/>`)
    return [drawing.outlines.layer.length, drawing.holes.layer.length]
  }
  expect(count(outer + opposite)).toEqual([1, 1])
  expect(count(outer + same)).toEqual([2, 0])
  expect(count(outer + same, 'fill-rule="evenodd"')).toEqual([1, 1])
  expect(count(outer + same, 'style="fill-rule: evenodd"')).toEqual([1, 1])
  expect(count(same + outer, 'fill-rule="evenodd"')).toEqual([1, 1])
  expect(count(outer + same + island, 'fill-rule="evenodd"')).toEqual([2, 1])
  expect(count(outer + opposite + island)).toEqual([2, 1])
  expect(holes(drawn(`<path d="${outer + opposite}"/>`))).toEqual([
    [
      [10, 90],
      [10, 70],
      [30, 70],
      [30, 90],
    ],
  ])
  // Two rings side by side, and one in the notch of another, are no holes; nor is anything where only lines are drawn.
  expect(count('M0 0H10V10H0zM10 0H20V10H10z', 'fill-rule="evenodd"')).toEqual([2, 0])
  expect(count('M0 0H40V40H20V20H0zM5 25H15V35H5z', 'fill-rule="evenodd"')).toEqual([2, 0])
  expect(count(outer + same, `fill-rule="evenodd" ${line}`)).toEqual([2, 0])
  // A ring drawn twice is two outlines: the plan drops the repeat.
  expect(count(outer + outer, 'fill-rule="evenodd"')).toEqual([2, 0])
  // A hole whose corner lies on the ring round it.
  expect(count('M0 0H40V40H0zM0 0L20 10L10 20z', 'fill-rule="evenodd"')).toEqual([1, 1])
})

test('many rings in one path: 36 holes with an island each, in any order and under any turn', () => {
  const square = (x: number, y: number, half: number): string => `M${x - half} ${y - half}h${2 * half}v${2 * half}h${-2 * half}z`
  const pieces = [square(50, 50, 50)]
  for (let i = 0; i < 36; i += 1)
    pieces.push(square(9 + 16.4 * (i % 6), 9 + 16.4 * Math.floor(i / 6), 7.9), square(9 + 16.4 * (i % 6), 9 + 16.4 * Math.floor(i / 6), 3))
  const next = random(12)
  for (const turn of [0, 33, 90, 200]) {
    const mixed = pieces
      .map((piece) => ({ piece, key: next() }))
      .sort((a, b) => a.key - b.key)
      .map(({ piece }) => piece)
    const drawing = drawn(`<path fill-rule="evenodd" transform="rotate(${turn})" d="${mixed.join('')}"/>`)
    const size = (loops: Point[][]): number[] => loops.map((loop) => Math.round(Math.sqrt(Math.abs(area(loop))) * 10)).sort((a, b) => a - b)
    expect(size(outlines(drawing)), String(turn)).toEqual([...Array<number>(36).fill(60), 1000])
    expect(size(holes(drawing)), String(turn)).toEqual(Array<number>(36).fill(158))
  }
})
