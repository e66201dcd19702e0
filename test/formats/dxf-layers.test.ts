import { describe, expect, test } from 'vitest'
import { drawn } from './dxf-drawn.ts'
import { at, line } from './dxf-writer.ts'
import { segmentsOf } from './text-read.ts'

describe('layers', () => {
  const layers = [{ name: 'Glass' }, { name: 'Frozen', frozen: true }, { name: 'Off', off: true }]
  const lines = [line([0, 0], [1, 0], 'GLASS'), line([0, 1], [1, 1], 'frozen'), line([0, 2], [1, 2], 'OFF'), line([0, 3], [1, 3], 'Notes')]

  test('frozen and off are not taken, and counted', () => {
    const drawing = drawn(lines, { layers })
    expect(segmentsOf(drawing).map(([a]) => a[1])).toEqual([0, 3])
    expect(drawing.leftOut).toEqual([
      { kind: 'LINE, layer frozen', layer: 'frozen', count: 1 },
      { kind: 'LINE, layer off', layer: 'OFF', count: 1 },
    ])
  })

  test('chosen by name without case; one that is named is taken even when off', () => {
    const drawing = drawn(lines, { layers }, { layers: ['glass', 'off'] })
    expect(segmentsOf(drawing).map(([a]) => a[1])).toEqual([0, 2])
    expect(drawing.leftOut).toEqual([
      { kind: 'LINE, layer not chosen', layer: 'frozen', count: 1 },
      { kind: 'LINE, layer not chosen', layer: 'Notes', count: 1 },
    ])
  })

  test('one that is not there', () => {
    expect(() => drawn(lines, { layers }, { layers: ['Steel'] })).toThrow(
      'plan.dxf: there is no layer "Steel"; the file has "Frozen", "Glass", "Notes", "Off".',
    )
  })

  test('names with escapes', () => {
    expect(drawn([line([0, 0], [1, 0], 'Tr\\U+00E4ger 90%%d %%c8 %%p1 %%37 100%%%')]).layers).toEqual(['Träger 90° ⌀8 ±1 %%37 100%'])
  })

  test('spelt in two ways is one layer', () => {
    expect(drawn([line([0, 0], [1, 0], 'Glass'), line([0, 0], [1, 0], 'GLASS')]).layers).toEqual(['Glass'])
  })

  test('paper space and invisible entities are counted', () => {
    const drawing = drawn([
      line([0, 0], [1, 0]),
      { ...line([0, 0], [1, 0]), pairs: [[67, 1], ...at(10, 0, 0), ...at(11, 1, 0)] },
      { ...line([0, 0], [1, 0]), pairs: [[60, 1], ...at(10, 0, 0), ...at(11, 1, 0)] },
    ])
    expect(drawing.leftOut.map(({ kind }) => kind)).toEqual(['LINE, paper space', 'LINE, invisible'])
  })
})
