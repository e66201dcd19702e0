/** What is taken of an SVG drawing, as what, and what is left out. Areas exact: worked out by hand from the definition. */
import { expect, test } from 'vitest'
import { svg } from '../../src/formats/svg.ts'
import { area, chain, drawingOf, drawn, outlines, refusal, segments } from './svg-reading.ts'

const line = 'fill="none" stroke="black"'
const areas = (inside: string): number[] => outlines(drawn(inside)).map((loop) => Number(Math.abs(area(loop)).toFixed(6)))
const left = (inside: string): string[] =>
  drawn(`${inside}<path d="M0 0H1V1z"/>`).leftOut.map(({ kind, layer, count }) => `${count} ${kind}${layer === '' ? '' : ` on ${layer}`}`)

test('basic shapes are outlines', () => {
  const drawing = drawn(
    `<rect x="1" y="2" width="30" height="20"/><circle cx="50" cy="50" r="10"/><ellipse cx="50" cy="50" rx="20" ry="10"/>
    <polygon points="0,0 10,0 10,10"/><line x1="1" y1="2" x2="3" y2="4" stroke="red"/><polyline points="5 5 6 6-7.5-8" ${line}/>`,
    { sagitta: 1e-7 },
  )
  const [rect, circle, ellipse, polygon] = outlines(drawing)
  expect(rect).toEqual([
    [1, 98],
    [31, 98],
    [31, 78],
    [1, 78],
  ])
  // n chords of a circle enclose n/2 sin(2 pi/n) r^2, an ellipse the same times its axes.
  const share = (n: number): number => (n / 2) * Math.sin((2 * Math.PI) / n)
  expect(Math.abs(area(circle!))).toBeCloseTo(100 * share(circle!.length), 8)
  expect(Math.abs(area(ellipse!))).toBeCloseTo(200 * share(ellipse!.length), 8)
  expect(circle!.length % 4).toBe(0)
  expect(circle).toContainEqual([60, 50])
  expect(polygon).toEqual([
    [0, 100],
    [10, 100],
    [10, 90],
  ])
  expect(segments(drawing)).toEqual([
    [
      [1, 98],
      [3, 96],
    ],
    [
      [5, 95],
      [6, 94],
    ],
    [
      [6, 94],
      [-7.5, 108],
    ],
  ])
  expect([...drawing.segmentLine]).toEqual([2, 2, 2])
  expect(drawing.repairs).toMatchObject([
    {
      code: 'chords',
      state: 'applied',
      count: 2,
      where: [
        [60, 50],
        [70, 50],
      ],
    },
  ])
})

test('round corners: one radius stands for both, none is larger than half a side', () => {
  const round = (attributes: string): number =>
    Math.abs(area(outlines(drawn(`<rect width="40" height="20" ${attributes}/>`, { sagitta: 1e-8 }))[0]!))
  // What four quarter ellipses leave of their corners: (4 - pi) rx ry; chords of 1e-5 mm sagitta add less than 0.001.
  const corners = (rx: number, ry: number): number => 800 - (4 - Math.PI) * rx * ry
  for (const [attributes, rx, ry] of [
    ['rx="5" ry="3"', 5, 3],
    ['rx="5"', 5, 5],
    ['ry="4"', 4, 4],
    ['rx="100" ry="100"', 20, 10],
    ['rx="auto" ry="2"', 2, 2],
  ] as const) {
    expect(Math.abs(round(attributes) - corners(rx, ry)), attributes).toBeLessThan(1e-3)
  }
  for (const attributes of ['rx="0" ry="5"', 'rx="5" ry="0"']) expect(round(attributes), attributes).toBe(800)
})

test('what a path is depends on its paint: open lines are segments, filled areas are closed', () => {
  const open = 'd="M0 0H10V5"'
  expect(outlines(drawn(`<path ${open}/>`))).toEqual([
    [
      [0, 100],
      [10, 100],
      [10, 95],
    ],
  ])
  expect(chain(drawn(`<path ${open} ${line}/>`))).toEqual([
    [0, 100],
    [10, 100],
    [10, 95],
  ])
  // Filled and stroked: the line is what is drawn.
  const both = drawn(`<path ${open} stroke="red"/>`)
  expect([both.outlines.layer.length, both.segmentLayer.length]).toEqual([0, 2])
  expect(outlines(drawn(`<path d="M0 0H10V5z" ${line}/>`))).toEqual([
    [
      [0, 100],
      [10, 100],
      [10, 95],
    ],
  ])
})

test('a line that comes back to its start is closed, to a ten-thousandth of its size', () => {
  const paths = (end: string): number => drawn(`<path d="M0 0L10 0L10 10L${end}" ${line}/>`).outlines.layer.length
  expect([paths('0 0'), paths('0.0009 0.0009'), paths('0.01 0'), paths('0 1')]).toEqual([1, 1, 0, 0])
  expect(outlines(drawn(`<polyline points="0 0 10 0 10 10 0 0" ${line}/>`))[0]).toHaveLength(3)
  expect(outlines(drawn(`<polygon points="0 0 10 0 10 10" ${line}/>`))[0]).toHaveLength(3)
  expect(outlines(drawn(`<path d="M0 0L10 0L10 10L0 0z" ${line}/>`))[0]).toHaveLength(3)
  // There and back is one line, not an area.
  expect(segments(drawn(`<path d="M0 0L10 0L0 0z" ${line}/>`))).toEqual([
    [
      [0, 100],
      [10, 100],
    ],
  ])
})

test('points repeated in a row are one, and moves alone draw nothing', () => {
  expect(chain(drawn(`<path d="M9 9M1 1L2 1L2 1L2 2M5 5" ${line}/>`))).toEqual([
    [1, 99],
    [2, 99],
    [2, 98],
  ])
  expect(left('<path d="M5 5"/><path d=""/><rect width="5"/><circle cx="5" cy="5" r="0"/>')).toEqual([
    '2 path, of no size',
    '1 rect, of no size',
    '1 circle, of no size',
  ])
})

test('use: placed, nested, before its definition; what is used inherits from the use', () => {
  const cell = '<defs><path id="cell" d="M0 0H10V10H0z"/><g id="pair"><use href="#cell"/><use xlink:href="#cell" x="10"/></g></defs>'
  expect(outlines(drawn(`<use href="#pair" x="5" y="7" transform="scale(2)"/>${cell}`))).toEqual([
    [
      [10, 86],
      [30, 86],
      [30, 66],
      [10, 66],
    ],
    [
      [30, 86],
      [50, 86],
      [50, 66],
      [30, 66],
    ],
  ])
  expect(drawn(`${cell}<g ${line}><use href="#cell"/></g>`).outlines.layer.length).toBe(1)
  expect(left(`${cell}<use href="#gone"/><use href="other.svg#a"/>`)).toEqual(['1 use of nothing', '1 use of another file'])
})

test('symbol and nested svg have views of their own', () => {
  const symbol = '<symbol id="s" viewBox="0 0 10 10"><rect width="10" height="10"/></symbol>'
  // 20 x 40 for a box of 10 x 10: scaled by 2, in the middle of the height.
  expect(outlines(drawn(`${symbol}<use href="#s" x="10" y="10" width="20" height="40"/>`))).toEqual([
    [
      [10, 80],
      [30, 80],
      [30, 60],
      [10, 60],
    ],
  ])
  expect(outlines(drawn('<svg x="10" y="20" width="50%" height="10" viewBox="0 0 100 20"><rect width="100%" height="10"/></svg>'))).toEqual(
    [
      [
        [10, 80],
        [60, 80],
        [60, 75],
        [10, 75],
      ],
    ],
  )
  expect(areas('<svg viewBox="0 0 10 10"><rect width="5" height="5"/></svg><svg><rect width="5" height="5"/></svg>')).toEqual([2500, 25])
  expect(areas('<rect width="2" height="2"/><svg width="0" height="5"><rect width="5" height="5"/></svg>')).toEqual([4])
  expect(
    outlines(
      drawn(
        `<svg id="n" x="1" y="1" width="10" height="10" viewBox="0 0 5 5"><rect width="5" height="5"/></svg>` +
          `<use href="#n" x="20" width="20" height="20"/>`,
      ),
    )[1],
  ).toEqual([
    [21, 99],
    [41, 99],
    [41, 79],
    [21, 79],
  ])
})

test('definitions draw nothing where they stand', () => {
  const shape = '<rect width="50" height="50"/>'
  const inside = ['defs', 'clipPath', 'mask', 'pattern', 'marker', 'symbol'].map((name) => `<${name}>${shape}</${name}>`).join('')
  const drawing = drawn(
    `${inside}<title>a</title><desc>b</desc><metadata><x xmlns="urn:x"><path/></x></metadata><rect width="2" height="3"/>`,
  )
  expect(drawing.outlines.layer.length).toBe(1)
  expect(drawing.leftOut).toEqual([])
})

test('what is no line work is named and counted, per layer', () => {
  expect(
    left(
      `<g id="notes"><text>1</text><text>2</text><image href="a.png"/></g><foreignObject/><script/>` +
        `<rect width="1" height="1"><animate/></rect><video/>`,
    ),
  ).toEqual(['2 text on notes', '1 image on notes', '1 foreignObject', '1 script', '1 animate', '1 video'])
})

test('what is not seen or not painted is left out, and said', () => {
  expect(left('<g display="none"><rect width="5" height="5"/><g style="display:inline"><circle r="5"/></g></g>')).toEqual([
    '1 rect, hidden',
    '1 circle, hidden',
  ])
  expect(left('<rect style="visibility:hidden" width="5" height="5"/><g opacity="0"><path d="M0 0H5V5z"/></g>')).toEqual([
    '1 rect, hidden',
    '1 path, hidden',
  ])
  expect(left('<rect fill="none" width="5" height="5"/><line x2="5"/><path fill="transparent" d="M0 0H5V5z"/>')).toEqual([
    '1 rect, not painted',
    '1 line, not painted',
    '1 path, not painted',
  ])
  expect(drawn('<g visibility="hidden"><rect visibility="visible" width="5" height="5"/></g>').outlines.layer.length).toBe(1)
})

test('a page background is no panel: a filled rectangle over the whole page, beside other things', () => {
  const panel = '<rect x="10" y="10" width="5" height="5"/>'
  expect(drawn(`<rect width="100%" height="100%"/>${panel}`).leftOut).toEqual([{ kind: 'page background', layer: '', count: 1 }])
  expect(drawn(`<path d="M0 100L100 100L100 0L0 0z" style="fill:#fff"/>${panel}`).outlines.layer.length).toBe(1)
  expect(drawn(`<rect x="-5" y="-5" width="200" height="200"/>${panel}`).outlines.layer.length).toBe(1)
  // Stroked, smaller, not along the page, or alone on the page it is taken.
  for (const background of [
    '<rect width="100" height="100" stroke="red"/>',
    '<rect width="99" height="100"/>',
    '<path d="M0 0H100V100L0 90z"/>',
  ]) {
    expect(drawn(background + panel).outlines.layer.length, background).toBe(2)
  }
  expect(drawn('<rect width="100" height="100"/>').outlines.layer.length).toBe(1)
})

test('the innermost group with an id is the layer; a chosen layer brings the groups inside it', () => {
  const inside =
    '<g id="Glass"><rect width="1" height="1"/><g><rect width="2" height="1"/></g><g id="north">' +
      '<rect width="3" height="1"/></g></g><rect width="4" height="1"/>'
  const all = drawn(inside)
  expect([...all.outlines.layer].map((i) => all.layers[i])).toEqual(['Glass', 'Glass', 'north', ''])
  const chosen = (layers: string[]): number[] => outlines(drawn(inside, { layers })).map((loop) => Math.abs(area(loop)))
  expect(chosen(['GLASS'])).toEqual([1, 2, 3])
  expect(chosen(['north'])).toEqual([3])
  expect(drawn(inside, { layers: ['north'] }).leftOut).toEqual([
    { kind: 'rect, layer not chosen', layer: 'Glass', count: 2 },
    { kind: 'rect, layer not chosen', layer: '', count: 1 },
  ])
  expect(refusal(inside, { layers: ['steel'] })).toMatchObject({
    code: 'no-such-layer',
    message: 'there is no layer "steel"',
    cure: 'the file has "Glass", "north"',
  })
  // A definition's id names a block, not a layer.
  const used = drawn('<defs><g id="block"><rect width="1" height="1"/></g></defs><g id="roof"><use href="#block"/></g>')
  expect(used.layers[used.outlines.layer[0]!]).toBe('roof')
})

test('markup in names stays text', () => {
  const drawing = drawn('<g id="&lt;b&gt;&amp;&quot;x"><rect width="1" height="1"/></g>')
  expect(drawing.layers).toEqual(['<b>&"x'])
})

test('switch takes the first child that asks for nothing', () => {
  expect(
    areas(
      '<switch><foreignObject/><g requiredExtensions="urn:x"><rect width="9" height="9"/></g><g>' +
        '<rect width="2" height="1"/></g><rect width="5" height="5"/></switch>',
    ),
  ).toEqual([2])
})

test('prefixes, a file without a namespace, foreign elements', () => {
  const box = ' width="10mm" height="10mm" viewBox="0 0 10 10"'
  const prefixed = `<s:svg xmlns:s="http://www.w3.org/2000/svg" xmlns:e="urn:editor"${box}>` +
    `<e:rect width="9" height="9"/><s:rect e:width="7" width="2" height="2"/></s:svg>`
  expect(outlines(drawingOf(svg, prefixed))).toEqual([
    [
      [0, 10],
      [2, 10],
      [2, 8],
      [0, 8],
    ],
  ])
  expect(outlines(drawingOf(svg, `<svg${box}><rect width="2" height="2"/></svg>`))).toHaveLength(1)
})

test('recognised by content: declarations, comments and a document type may come first', () => {
  const yes = [
    '<svg xmlns="http://www.w3.org/2000/svg">',
    '<?xml version="1.0"?>\n<!-- <html> -->\n<!DOCTYPE svg PUBLIC "-//W3C//DTD SVG 1.1//EN" "x.dtd" [ ' +
      '<!ATTLIST a b CDATA #IMPLIED> ]>\n<svg/>',
    '\ufeff <s:svg xmlns:s="x">',
  ]
  const no = ['<html><svg/></html>', '<svgx/>', 'svg', '<!-- <svg> -->', '{"type": "Feature"}', '  0\nSECTION\n', '']
  for (const head of yes) expect(svg.recognises(head), head).toBe(true)
  for (const head of no) expect(svg.recognises(head), head).toBe(false)
})
