/** Style sheets: the cascade of CSS Cascade 4, section 6, for the selectors that are followed. */
import { expect, test } from 'vitest'
import { lookOf, initialLook } from '../../src/formats/svg-look.ts'
import { drawn } from './svg-reading.ts'

/** Whether the one rectangle is taken: it is when anything paints it. */
const taken = (style: string, attributes: string): boolean =>
  drawn(`<style>${style}</style><rect ${attributes} width="5" height="5"/><path d="M0 0H1V1z" style="fill:red!important"/>`).outlines.layer
    .length === 2

test('presentation attributes are weaker than any rule, rules weaker than the style attribute, importance wins', () => {
  expect(taken('', 'fill="none"')).toBe(false)
  expect(taken('rect{fill:red}', 'fill="none"')).toBe(true)
  expect(taken('*{fill:red}', 'fill="none"')).toBe(true)
  expect(taken('rect{fill:red}', 'style="fill:none"')).toBe(false)
  expect(taken('rect{fill:red !important}', 'style="fill:none"')).toBe(true)
  expect(taken('rect{fill:red!important}', 'style="fill:none!important"')).toBe(false)
})

test('the more specific rule wins, then the later one', () => {
  expect(taken('.a{fill:none} rect{fill:red}', 'class="a"')).toBe(false)
  expect(taken('#i{fill:none} .a{fill:red}', 'class="a" id="i"')).toBe(false)
  expect(taken('rect.a{fill:none} .a{fill:red}', 'class="a"')).toBe(false)
  expect(taken('.a.b{fill:none} .a{fill:red}', 'class="b x a"')).toBe(false)
  expect(taken('.a.b{fill:none}', 'class="a"')).toBe(true)
  expect(taken('.a{fill:red} .b{fill:none}', 'class="b a"')).toBe(false)
  expect(taken('.b{fill:none} .a{fill:red}', 'class="b a"')).toBe(true)
  expect(taken('circle.a, #j, rect.a{fill:none}', 'class="a"')).toBe(false)
  expect(taken('circle.a, #j, .A{fill:none}', 'class="a"')).toBe(true)
})

test('comments, quotes, data in brackets and CDATA do not break a sheet', () => {
  expect(taken('/* rect{fill:red} */ rect{ /* } */ fill : none ; }', '')).toBe(false)
  expect(taken('@font-face{src:url(data:a;b{c})} rect{fill:none}', '')).toBe(false)
  expect(taken('<![CDATA[rect{font-family:"a}b";fill:none}]]>', '')).toBe(false)
  expect(taken('rect{fill:none', '')).toBe(false)
  expect(taken('', 'style="cursor:url(a;b);fill:none"')).toBe(false)
})

test('classes are inherited through groups, and rules that are not followed are counted', () => {
  expect(drawn('<style>.lines{fill:none;stroke:#000}</style><g class="lines"><path d="M0 0H5V5"/></g>').segmentLayer.length).toBe(2)
  const drawing = drawn(
    '<style>g path{fill:none} path:hover{fill:none} path>path{fill:none}' +
      ' @media print{path{fill:none}} @import "a.css"; path[x]{fill:none}</style><path d="M0 0H5V5z"/>',
  )
  expect(drawing.outlines.layer.length).toBe(1)
  expect(drawing.leftOut).toEqual([{ kind: 'style rule', layer: '', count: 6 }])
})

test('lengths may stand in a style', () => {
  const drawing = drawn('<style>rect{width:7px;height:2mm}</style><rect style="x:1px"/>')
  expect(drawing.points.slice(0, 2)).toEqual(Float64Array.from([1, 100]))
  expect(drawing.points[3]).toBe(8)
})

test('what paints and what does not', () => {
  const fill = (value: string): boolean => lookOf(new Map([['fill', value]]), initialLook).fill
  for (const value of [
    'red',
    '#fff',
    '#0001',
    'rgb(255,0,0)',
    'rgb(255 0 0 / 10%)',
    'rgba(0,0,0,0.5)',
    'url(#a)',
    'url(#a) none',
    'currentColor',
    'rgba(0,0,0,1)',
    'hsl(10,0%,0%)',
    '#100000',
    'inherit',
    'initial',
  ]) {
    expect(fill(value), value).toBe(true)
  }
  for (const value of [
    'none',
    'transparent',
    '#0000',
    '#ffffff00',
    'rgba(0,0,0,0)',
    'rgba(1, 2, 3, 0.0)',
    'rgb(0 0 0 / 0)',
    'rgb(0 0 0 / 0%)',
    'hsla(1,2%,3%,.0)',
  ])
    expect(fill(value), value).toBe(false)
  const stroke = (map: [string, string][]): boolean => {
    const { stroke: line, strokeSeen, strokeWide } = lookOf(new Map(map), initialLook)
    return line && strokeSeen && strokeWide
  }
  expect(stroke([])).toBe(false)
  expect(stroke([['stroke', 'red']])).toBe(true)
  expect(
    stroke([
      ['stroke', 'red'],
      ['stroke-width', '0'],
    ]),
  ).toBe(false)
  expect(
    stroke([
      ['stroke', 'red'],
      ['stroke-opacity', '0%'],
    ]),
  ).toBe(false)
  expect(
    stroke([
      ['stroke', 'red'],
      ['stroke-width', '.5px'],
    ]),
  ).toBe(true)
})

test('a sheet of more rules than any drawing has is refused', () => {
  expect(() => drawn(`<style>${'.a{fill:none}'.repeat(5001)}</style><rect width="1" height="1"/>`)).toThrow(/more than 5000 rules/)
})
