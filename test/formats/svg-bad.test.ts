/** What is no SVG drawing, or too much of one: refused with its place, and reading can be stopped at any time. */
import { expect, test } from 'vitest'
import { svg } from '../../src/formats/svg.ts'
import { problemOf, refusal, sheet } from './svg-reading.ts'

test('shapes and references that cannot be read are refused at their line', () => {
  const cases: [string, RegExp][] = [
    ['<rect width="-1" height="5"/>', /^width is negative/],
    ['<circle r="-1"/>', /^r is negative/],
    ['<rect width="5ex" height="5"/>', /^width is no length that can be read: "5ex"/],
    ['<rect x="NaN" width="5" height="5"/>', /^x is no length/],
    ['<polygon points="0 0 5 5 9"/>', /^points has an odd count/],
    ['<polygon points="0 0 5 x"/>', /^points, character 7: a number is expected in place of "x"/],
    ['<polygon points="0 0 5 1e999"/>', /beyond the range/],
    ['<rect x="1e308" width="5" height="5"/>', /beyond 1e12/],
    ['<path d="M0 0L1e13 0L5 5z"/>', /beyond 1e12/],
    ['<g id="a"><use href="#a"/></g>', /"#a" is used inside itself/],
    ['<g id="a"><use href="#b"/></g><g id="b"><use href="#a"/></g>', /is used inside itself/],
  ]
  for (const [inside, message] of cases) {
    const problem = refusal(`\n\n${inside}`)
    expect(problem.message, inside).toMatch(message)
    expect(problem.where?.line, inside).toBe(3)
  }
  expect(problemOf(svg, '<html xmlns="http://www.w3.org/1999/xhtml"/>')).toMatchObject({
    code: 'not-svg',
    message: 'the first element is <html>, not <svg>',
  })
  expect(problemOf(svg, sheet('<text>only</text><rect display="none" width="1" height="1"/>'))).toMatchObject({
    code: 'nothing-drawn',
    message: 'the file has no shapes and no lines that are seen, only 1 x text, 1 x rect, hidden',
  })
})

test('a drawing that multiplies itself by use is refused, not drawn', () => {
  let inside = '<g id="a0"><rect width="1" height="1"/></g>'
  for (let i = 1; i < 12; i += 1) inside += `<g id="a${i}">${`<use href="#a${i - 1}"/>`.repeat(10)}</g>`
  expect(refusal(inside)).toMatchObject({ code: 'too-large' })
  // A curve that would need more chords than there are is refused at once.
  expect(refusal('<circle r="1e9"/>', { sagitta: 1e-9 }).message).toMatch(/more than 100000 chords/)
})

test('gives turns within one long path, one long list of points and many rings, so that reading can be stopped', () => {
  const turns = (inside: string): number => {
    const steps = svg.read(sheet(inside), { name: 'a', bytes: new Uint8Array() }, { layers: null, sagitta: 0.005, metresPerUnit: null })
    let count = 0
    while (steps.next().done !== true) count += 1
    return count
  }
  // The text itself gives a turn every 16,384 characters; the rest is what the path or list adds.
  const added = (inside: string): number => turns(inside) - inside.length / 16384
  expect(added(`<path d="M0 0${'h1v1'.repeat(50_000)}"/>`)).toBeGreaterThan(20)
  expect(added(`<polygon points="${'1 2 3 4 '.repeat(50_000)}"/>`)).toBeGreaterThan(20)
  expect(
    added(`<path d="${Array.from({ length: 20_000 }, (_, i) => `M${2 * (i % 100)} ${2 * Math.floor(i / 100)}h1v1z`).join('')}"/>`),
  ).toBeGreaterThan(60)
  expect(added('<line x2="5" stroke="red"/>'.repeat(10_000))).toBeGreaterThan(15)
})
