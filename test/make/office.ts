/** Drawings as offices send them, for test/corpus/office: invented, each for one thing that the reader must cope with. */
import { random } from '../../src/base/random.ts'
import { dxfText, type Written } from '../formats/dxf-writer.ts'
import type { Point, Sketch } from '../plan/drawings.ts'
import { sheetFiles } from './office-sheets.ts'
import { grid } from './plans.ts'
import { bond, skewGrid, ways } from './spoilt.ts'

const digits = (value: number): number => Math.round(value * 1e4) / 1e4

/** A sketch in metres as DXF, multiplied by `scale`; `units` as in $INSUNITS (4 mm, 6 m; null: none). */
function dxf(sketch: Sketch, scale: number, units: number | null): string {
  const at = ([x, y]: readonly number[]): [number, number] => [digits(x! * scale), digits(y! * scale)]
  const entities: Written[] = [
    ...(sketch.lines ?? []).map(([p, q]): Written => {
      const [[x1, y1], [x2, y2]] = [at(p), at(q)]
      return { kind: 'LINE', layer: 'ROOF', pairs: [[10, x1], [20, y1], [11, x2], [21, y2]] }
    }),
    ...(sketch.outlines ?? []).map((outline): Written => ({
      kind: 'LWPOLYLINE', layer: 'ROOF',
      pairs: [[90, outline.length], [70, 1], ...outline.flatMap((p) => [[10, at(p)[0]], [20, at(p)[1]]] as const)],
    })),
  ]
  return dxfText({ units, entities })
}

/** Lines of a grid of bars, each drawn through from end to end: m x n panes of bay x depth, bars `width` wide on the axes. */
export function throughBars(m: number, n: number, width: number, bay: number, depth: number): Sketch {
  const half = width / 2
  const lines: [Point, Point][] = []
  for (let i = 0; i <= m; i += 1) for (const off of [-half, half]) lines.push([[i * bay + off, -half], [i * bay + off, n * depth + half]])
  for (let j = 0; j <= n; j += 1) for (const off of [-half, half]) lines.push([[-half, j * depth + off], [m * bay + half, j * depth + off]])
  return { lines }
}

const drawn = (name: string, plan: Parameters<(typeof ways)[number]['draw']>[0], seed: number): Sketch => {
  const way = ways.find((each) => each.name === name)
  if (way === undefined) throw new Error(name)
  return way.draw(plan, random(seed))
}

/** Every node moved by up to 0.4 mm along x and y, the same in each outline that has it. */
function shaken(sketch: Sketch, seed: number): Sketch {
  const next = random(seed)
  const shifts = new Map<string, Point>()
  const shift = (p: readonly number[]): Point => {
    const key = `${p[0]!.toFixed(6)} ${p[1]!.toFixed(6)}`
    const known = shifts.get(key) ?? [4e-4 * (2 * next() - 1), 4e-4 * (2 * next() - 1)]
    shifts.set(key, known)
    return [p[0]! + known[0], p[1]! + known[1]]
  }
  return { outlines: (sketch.outlines ?? []).map((outline) => outline.map(shift)) }
}

/** Text by file name. */
export function officeFiles(): ReadonlyMap<string, string> {
  return new Map([
    ['bars-through.dxf', dxf(throughBars(6, 4, 0.06, 1.5, 1.2), 1000, 4)],
    ['bars-bond-mitred.dxf', dxf(drawn('double lines, mitred', bond(4, 4), 3), 1000, 4)],
    ['bars-acute-two-widths.dxf', dxf(drawn('double lines, two widths', skewGrid(5, 4, 35), 5), 1, 6)],
    ['bars-rectangles.dxf', dxf(drawn('bars as rectangles', skewGrid(4, 4, 90, true), 7), 1, 6)],
    ['panes-apart.dxf', dxf(drawn('panes apart', grid(6, 3, { bay: 1.5 }), 2), 1, 6)],
    ['crooked.dxf', dxf(shaken(drawn('outlines', grid(7, 4, { bay: 1.2 }), 1), 11), 1000, 4)],
    ['unit-wrong.dxf', dxf(drawn('single lines', grid(5, 4, { bay: 1.5 }), 1), 1000, 6)],
    ['unscaled.dxf', dxf(drawn('single lines', grid(5, 4, { bay: 1.5 }), 1), 100 / 7.5, null)],
    ...sheetFiles(),
  ])
}
