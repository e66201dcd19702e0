/** What stands on an office's sheet beside the panels, as DXF entities in metres: axes, dimensions, walls, columns, a title block. Invented. */
import { at, line, polyline, type Pairs, type Written } from '../formats/dxf-writer.ts'
import type { Point, Sketch } from '../plan/drawings.ts'

const digits = (value: number): number => Math.round(value * 1e4) / 1e4

/** A sketch on a layer. */
export function onLayer(sketch: Sketch, layer: string, more: Pairs = []): Written[] {
  const entity = (written: Written): Written => ({ ...written, pairs: [...more, ...(written.pairs ?? [])] })
  return [
    ...(sketch.lines ?? []).map(([p, q]) => entity(line(p, q, layer))),
    ...(sketch.outlines ?? []).map((outline) => entity(polyline(outline.map((p) => [p[0], p[1]]), true, layer))),
  ]
}

/** All numbers of entities multiplied: places and sizes, no angles, bulges or flags. */
export function scaled(entities: readonly Written[], scale: number): Written[] {
  const isLength = (code: number): boolean => (code >= 10 && code <= 39) || code === 40 || code === 44 || code === 45
  return entities.map(({ kind, layer, pairs = [] }) => ({
    kind, ...(layer === undefined ? {} : { layer }),
    pairs: pairs.map(([code, value]) => [code, typeof value === 'number' && isLength(code) ? digits(value * scale) : value] as const),
  }))
}

export function moved(entities: readonly Written[], dx: number, dy: number): Written[] {
  return entities.map(({ kind, layer, pairs = [] }) => ({
    kind, ...(layer === undefined ? {} : { layer }),
    pairs: pairs.map(([code, value]) => [code, typeof value !== 'number' ? value : code >= 10 && code < 19 ? value + dx : code >= 20 && code < 29 ? value + dy : value] as const),
  }))
}

export const text = (words: string, [x, y]: Point, height: number, layer: string, more: Pairs = []): Written => ({
  kind: 'TEXT', layer, pairs: [...at(10, x, y), [40, height], [1, words], ...more],
})

/** Anchored at its middle. */
export const middleText = (words: string, [x, y]: Point, height: number, layer: string): Written =>
  text(words, [x, y], height, layer, [[72, 1], [73, 2], ...at(11, x, y)])

export const circle = ([x, y]: Point, radius: number, layer: string): Written => ({ kind: 'CIRCLE', layer, pairs: [...at(10, x, y), [40, radius]] })

const bubble = (name: string, [x, y]: Point, r: number, layer: string): Written[] => [circle([x, y], r, layer), middleText(name, [x, y], r, layer)]

/** Axes of a grid of m x n bays: 1, 2, .. up the sheet with a circle above, A, B, .. across it with circles on both sides. */
export function axes(m: number, n: number, bay: number, { layer = 'AXES', lineType = 'DASHDOT', r = 0.4, beyond = 1.5 } = {}): Written[] {
  const made: Written[] = []
  const axis = (from: Point, to: Point): Written => ({ ...line(from, to, layer), pairs: [[6, lineType], [62, 1], ...(line(from, to).pairs ?? [])] })
  for (let i = 0; i <= m; i += 1) {
    made.push(axis([i * bay, -beyond], [i * bay, n * bay + beyond]), ...bubble(String(i + 1), [i * bay, n * bay + beyond + r], r, layer))
  }
  for (let j = 0; j <= n; j += 1) {
    const name = 'ABCDEFGHJKLMNP'[j]!
    made.push(axis([-beyond, j * bay], [m * bay + beyond, j * bay]))
    made.push(...bubble(name, [-beyond - r, j * bay], r, layer), ...bubble(name, [m * bay + beyond + r, j * bay], r, layer))
  }
  return made
}

/** A chain of exploded dimensions below a run of `count` bays: extension lines, the dimension line with its ticks, and figures. */
export function dimensions(count: number, bay: number, y: number, { layer = 'DIM', gap = 0.1 } = {}): Written[] {
  const made: Written[] = [line([-0.15, y - 1], [count * bay + 0.15, y - 1], layer)]
  for (let i = 0; i <= count; i += 1) {
    made.push(line([i * bay, y - gap], [i * bay, y - 1.15], layer), line([i * bay - 0.08, y - 1.08], [i * bay + 0.08, y - 0.92], layer))
    if (i < count) made.push(middleText(bay.toFixed(2), [(i + 0.5) * bay, y - 0.85], 0.18, layer))
  }
  return made
}

/** Walls round a rectangle, as double lines, with two cross walls. */
export function walls(width: number, depth: number, { layer = 'WALLS', away = 1.2, thick = 0.3 } = {}): Written[] {
  const box = (off: number): Written => polyline([[-off, -off], [width + off, -off], [width + off, depth + off], [-off, depth + off]], true, layer)
  const cross = [0.35, 0.7].flatMap((share): Written[] => {
    const x = share * width
    return [line([x, depth + away + thick], [x, depth + away + 5], layer), line([x + thick, depth + away + thick], [x + thick, depth + away + 5], layer), line([x, depth + away + 5], [x + thick, depth + away + 5], layer)]
  })
  return [box(away), box(away + thick), ...cross]
}

/** Square columns on every second node. */
export function columns(m: number, n: number, bay: number, { layer = 'COLUMNS', size = 0.4 } = {}): Written[] {
  const made: Written[] = []
  const h = size / 2
  for (let j = 0; j <= n; j += 2) {
    for (let i = 0; i <= m; i += 2) {
      const [x, y] = [i * bay, j * bay]
      made.push(polyline([[x - h, y - h], [x + h, y - h], [x + h, y + h], [x - h, y + h]], true, layer), line([x - h, y - h], [x + h, y + h], layer), line([x - h, y + h], [x + h, y - h], layer))
    }
  }
  return made
}

/** Tables with chairs, under the roof. */
export function furniture(width: number, depth: number, { layer = 'FURNITURE' } = {}): Written[] {
  const made: Written[] = []
  const box = (x: number, y: number, w: number, d: number): Written => polyline([[x, y], [x + w, y], [x + w, y + d], [x, y + d]], true, layer)
  for (let y = 1.1; y + 1.2 < depth; y += 3.1) {
    for (let x = 0.9; x + 1.9 < width; x += 4.3) {
      made.push(box(x, y, 1.6, 0.8), circle([x + 0.4, y - 0.3], 0.22, layer), circle([x + 1.2, y - 0.3], 0.22, layer), circle([x + 0.8, y + 1.1], 0.22, layer))
    }
  }
  return made
}

/** A hatch of slanting lines in pieces over a strip above the plan. */
export function hatch(width: number, y: number, { layer = 'HATCH', depth = 0.9, step = 0.12 } = {}): Written[] {
  const made: Written[] = []
  for (let x = 0; x + depth <= width; x += step) made.push(line([x, y], [x + depth, y + depth], layer))
  return made
}

/** A sheet's frame round a box, with a title block in its lower right corner. */
export function titleBlock(left: number, low: number, right: number, high: number, layer = 'SHEET'): Written[] {
  const rows = [0, 0.5, 1, 1.5, 2.2]
  const made: Written[] = [
    polyline([[left, low], [right, low], [right, high], [left, high]], true, layer),
    polyline([[left - 0.5, low - 0.5], [right + 0.5, low - 0.5], [right + 0.5, high + 0.5], [left - 0.5, high + 0.5]], true, layer),
    line([right - 6, low], [right - 6, low + 2.2], layer), line([right - 2, low], [right - 2, low + 1.5], layer),
  ]
  for (const row of rows.slice(1)) made.push(line([right - 6, low + row], [right, low + row], layer))
  made.push(text('ROOF OVER THE YARD, PLAN', [right - 5.8, low + 1.7], 0.25, layer), text('1:50', [right - 1.8, low + 0.15], 0.2, layer))
  return made
}

/** A section through the roof: rafters as thin panes on a bow, a ground line and two walls. */
export function section(width: number, layer: string, bays = 8): Written[] {
  const made: Written[] = [line([-1, 0], [width + 1, 0], layer)]
  const height = (x: number): number => 3 + 4 * 0.18 * (x / width) * (1 - x / width) * width
  for (let i = 0; i < bays; i += 1) {
    const [a, b] = [(i * width) / bays, ((i + 1) * width) / bays]
    made.push(polyline([[a + 0.03, height(a)], [b - 0.03, height(b)], [b - 0.03, height(b) + 0.06], [a + 0.03, height(a) + 0.06]], true, layer))
    made.push(polyline([[a - 0.03, height(a) - 0.2], [a + 0.03, height(a) - 0.2], [a + 0.03, height(a)], [a - 0.03, height(a)]], true, layer))
  }
  for (const x of [0, width]) made.push(line([x, 0], [x, 2.8], layer), line([x + 0.3, 0], [x + 0.3, 2.8], layer))
  return made
}

/** A level's cross with its figure beside it. */
export function levelText(words: string, [x, y]: Point, { layer = 'LEVELS', size = 0.1 } = {}): Written[] {
  return [line([x - size, y], [x + size, y], layer), line([x, y - size], [x, y + size], layer), text(words, [x + 1.3 * size, y + 1.3 * size], 1.5 * size, layer)]
}
