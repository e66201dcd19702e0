/** What stands beside a drawing: scale bar and north point. */
import { metres, type Unit } from '../../base/length.ts'
import { Batch, dots, label, polyline, type Item } from './display-list.ts'
import { figure, roundLength } from './figures.ts'
import type { Block } from './legend.ts'

/** A bar of a round length near 90 px, in m (in for inches and ft for feet); `scale`: px to the plan unit. */
export function scaleBar(unit: Unit, scale: number): Block {
  const shown: Unit = unit === 'in' || unit === 'ft' ? 'ft' : 'm'
  const pxToShown = scale / (metres[unit] / metres[shown])
  const length = roundLength(100 / pxToShown)
  const width = length * pxToShown
  const items: Item[] = [polyline('thin', [0, 6, width, 6])]
  for (const k of [0, 2]) items.push(polyline('rim', [(k * width) / 4, 6, ((k + 1) * width) / 4, 6]))
  items.push(polyline('thin', [0, 2, 0, 10]), polyline('thin', [width, 2, width, 10]))
  const decimals = length < 1 ? Math.ceil(-Math.log10(length) - 1e-9) : 0
  items.push(label(0, 24, '0', { size: 11, anchor: 'middle' }), label(width, 24, `${figure(length, decimals)} ${shown}`, { size: 11, anchor: 'middle' }))
  return { items, width: width + 16, height: 28 }
}

/** A needle that points to +y of the plan, which is up on the sheet. */
export function northPoint(): Block {
  const needle = new Batch()
  for (const [x, y] of [[12, 16], [7.4, 32], [12, 28], [16.6, 32]] as const) needle.point(x, y)
  needle.end()
  return {
    items: [dots([12, 25], 10, null, 'ink', 1), needle.fills('ink'), label(12, 11, 'N', { size: 12, tone: 'ink', anchor: 'middle', bold: true })],
    width: 24, height: 36,
  }
}
