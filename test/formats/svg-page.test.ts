/** The page: units, view boxes, sizes that are not given. Worked out by hand from CSS Values 4 (6.2) and SVG 2 (8.6). */
import { expect, test } from 'vitest'
import { svg } from '../../src/formats/svg.ts'
import { drawingOf, outlines, problemOf, type Point } from './svg-reading.ts'

const root = (attributes: string, inside = '<path d="M10 20H30V30H10z"/>'): string =>
  `<svg xmlns="http://www.w3.org/2000/svg" ${attributes}>${inside}</svg>`

function corners(markup: string): Point[] {
  const [loop] = outlines(drawingOf(svg, markup))
  return loop!.map(([x, y]): Point => [Number(x.toFixed(9)), Number(y.toFixed(9))])
}

const notes = (markup: string): string[] => drawingOf(svg, markup).repairs.map(({ code }) => code)

test('physical units of the page', () => {
  // 1 in = 25.4 mm = 72 pt = 6 pc = 96 px; 1 Q = 0.25 mm.
  const sizes: Record<string, string> = {
    mm: '200',
    cm: '20',
    in: '7.874015748031496',
    pt: '566.9291338582677',
    pc: '47.24409448818898',
    q: '800',
    Q: '800',
  }
  for (const [unit, value] of Object.entries(sizes)) {
    const markup = root(`width="${value}${unit}" height="${value}${unit}" viewBox="0 0 100 100"`)
    expect(corners(markup), unit).toEqual([
      [20, 160],
      [60, 160],
      [60, 140],
      [20, 140],
    ])
    expect(notes(markup), unit).toEqual([])
  }
})

test('pixels and missing sizes are 96 to an inch, and a note says so', () => {
  const mm = 25.4 / 96
  const expected = (high: number): Point[] =>
    [
      [10, 20],
      [30, 20],
      [30, 30],
      [10, 30],
    ].map(([x, y]) => [Number((x! * mm).toFixed(9)), Number(((high - y!) * mm).toFixed(9))])
  for (const attributes of [
    'width="100" height="100"',
    'width="100px" height="100px"',
    'viewBox="0 0 100 100"',
    'width="100%" height="100%" viewBox="0 0 100 100"',
    'width="100" viewBox="0 0 100 100"',
  ]) {
    expect(corners(root(attributes)), attributes).toEqual(expected(100))
    expect(notes(root(attributes)), attributes).toEqual(['unit-assumed'])
  }
  // No size at all: y counts from the upper edge.
  expect(corners(root(''))).toEqual(expected(0))
})

test('the unit is always the mm on paper', () => {
  const drawing = drawingOf(svg, root('width="5cm" height="5cm" viewBox="0 0 100 100"'))
  expect([drawing.unit, drawing.onPaper, drawing.format]).toEqual(['mm', true, 'SVG'])
})

test('a view box that starts elsewhere, and preserveAspectRatio', () => {
  // 200 x 100 mm for a box of 100 x 100: meet scales by 1 and leaves 100 mm over in x; slice by 2 and cuts y.
  const page = (preserve: string, box = '0 0 100 100'): string =>
    root(`width="200mm" height="100mm" viewBox="${box}" ${preserve === '' ? '' : `preserveAspectRatio="${preserve}"`}`)
  const first = (preserve: string, box?: string): Point => corners(page(preserve, box))[0]!
  expect(first('')).toEqual([60, 80])
  expect(first('xMinYMin')).toEqual([10, 80])
  expect(first('xMaxYMax meet')).toEqual([110, 80])
  expect(first('none')).toEqual([20, 80])
  expect(first('xMidYMid slice')).toEqual([20, 110])
  expect(first('xMidYMin slice')).toEqual([20, 60])
  expect(first('xMidYMax slice')).toEqual([20, 160])
  expect(first('', '10 20 100 100')).toEqual([50, 100])
})

test('without a view box user units are pixels, whatever the unit of the page; lengths carry their own', () => {
  const markup = root('width="100mm" height="100mm"', '<rect x="10mm" y="1in" width="2cm" height="72pt"/>')
  expect(corners(markup)).toEqual([
    [10, 74.6],
    [30, 74.6],
    [30, 49.2],
    [10, 49.2],
  ])
  expect(notes(markup)).toEqual([])
})

test('percentages are shares of the view box', () => {
  const markup = root('width="100mm" height="50mm" viewBox="0 0 200 100"', '<rect x="10%" y="10%" width="50%" height="50%"/>')
  expect(corners(markup)).toEqual([
    [10, 45],
    [60, 45],
    [60, 20],
    [10, 20],
  ])
})

test('a page that cannot be read is refused', () => {
  const messages: [string, RegExp][] = [
    ['width="0" height="5"', /width of the page must be more than 0: "0"/],
    ['width="-5mm" height="5mm"', /width of the page must be more than 0/],
    ['width="5em" height="5"', /width is no length that can be read: "5em"/],
    ['width="wide"', /width is no length/],
    ['width="1e999mm"', /width is no length/],
    ['viewBox="0 0 10"', /viewBox is not four numbers/],
    ['viewBox="0 0 10 NaN"', /viewBox is not four numbers/],
    ['viewBox="0 0 0 10"', /viewBox has no size/],
    ['viewBox="0 0 10 10" preserveAspectRatio="middle"', /preserveAspectRatio cannot be read: "middle"/],
  ]
  for (const [attributes, message] of messages) expect(problemOf(svg, root(attributes)).message, attributes).toMatch(message)
  expect(problemOf(svg, root('', '<rect width="50%" height="5"/>')).message).toMatch(/share of the page/)
})
