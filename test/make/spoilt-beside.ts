/** Faults of a sheet: what offices draw round the panels, on layers of its own or on theirs, sized to the plan. */
import type { Beside, Point, Segment, Sketch } from '../plan/drawings.ts'
import type { Written } from '../formats/dxf-writer.ts'
import { axes, columns, dimensions, furniture, hatch, levelText, moved, section, titleBlock, walls } from './sheet.ts'
import type { Fault } from './spoilt.ts'

/** Entities of `sheet.ts` as parts of a sketch; `layer` in the place of their own where it is given. */
function besideOf(entities: readonly Written[], layer: string | null = null): Beside[] {
  const value = ({ pairs = [] }: Written, code: number): number => Number(pairs.find(([c]) => c === code)?.[1] ?? 0)
  const all = ({ pairs = [] }: Written, code: number): number[] => pairs.filter(([c]) => c === code).map(([, v]) => Number(v))
  return entities.map((entity): Beside => {
    const own = { layer: layer ?? entity.layer ?? '' }
    switch (entity.kind) {
      case 'LINE': return { ...own, lines: [[[value(entity, 10), value(entity, 20)], [value(entity, 11), value(entity, 21)]]] }
      case 'LWPOLYLINE': return { ...own, outlines: [all(entity, 10).map((x, k): Point => [x, all(entity, 20)[k]!])] }
      case 'CIRCLE': return { ...own, circles: [{ at: [value(entity, 10), value(entity, 20)], radius: value(entity, 40) }] }
      default: return { ...own, texts: [{ text: String((entity.pairs ?? []).find(([c]) => c === 1)?.[1] ?? ''), at: [value(entity, 10), value(entity, 20)], height: value(entity, 40) }] }
    }
  })
}

/** Everything of a part moved; sizes by what the move does to a unit step. */
export function besideOnPoints(beside: Beside, change: (p: Point) => Point): Beside {
  const scale = ([x, y]: Point): number => Math.hypot(change([x + 1, y])[0] - change([x, y])[0], change([x + 1, y])[1] - change([x, y])[1])
  return {
    layer: beside.layer,
    ...(beside.lines === undefined ? {} : { lines: beside.lines.map(([p, q]): Segment => [change(p), change(q)]) }),
    ...(beside.outlines === undefined ? {} : { outlines: beside.outlines.map((outline) => outline.map(change)) }),
    ...(beside.circles === undefined ? {} : { circles: beside.circles.map(({ at, radius }) => ({ at: change(at), radius: radius * scale(at) })) }),
    ...(beside.texts === undefined ? {} : { texts: beside.texts.map(({ at, height, ...rest }) => ({ ...rest, at: change(at), height: height * scale(at) })) }),
  }
}

interface Box {
  readonly left: number
  readonly low: number
  readonly width: number
  readonly depth: number
}

function boxOf({ lines = [], outlines = [] }: Sketch): Box {
  const points = [...lines.flat(), ...outlines.flat()]
  const x = points.map((p) => p[0]), y = points.map((p) => p[1])
  const left = Math.min(...x), low = Math.min(...y)
  return { left, low, width: Math.max(...x) - left, depth: Math.max(...y) - low }
}

/** `made`: what stands round a plan of this width and depth whose lower left corner is 0, 0. */
function fault(name: string, made: (width: number, depth: number, next: () => number) => readonly Written[], layer: string | null = null): Fault {
  return {
    name, isBeside: true, ...(name.startsWith('sheet') ? { mayAsk: true } : {}),
    spoil: (sketch, next) => {
      const { left, low, width, depth } = boxOf(sketch)
      return { sketch: { ...sketch, beside: [...(sketch.beside ?? []), ...besideOf(moved(made(width, depth, next), left, low), layer)] } }
    },
  }
}

const bays = (length: number): number => Math.max(1, Math.floor(length / 1.5))

export const besideFaults: readonly Fault[] = [
  fault('axes with names', (width, depth) => axes(bays(width), bays(depth), 1.5)),
  fault('axes on the same layer', (width, depth) => axes(bays(width), bays(depth), 1.5), ''),
  fault('dimensions on their layer', (width, _, next) => dimensions(bays(width), width / bays(width), 0, { gap: next() < 0.5 ? 0 : 0.1 })),
  fault('furniture on its layer', (width, depth) => furniture(Math.max(3.5, width), Math.max(3.5, depth))),
  fault('walls, columns and hatch on their layers', (width, depth) => [...walls(width, depth), ...columns(bays(width), bays(depth), 1.5), ...hatch(width, depth + 0.2)]),
  fault('sheet and title block on the same layer', (width, depth) => titleBlock(-4, -6, width + 8, depth + 6), ''),
  fault('section beside on the same layer', (width, depth) => moved(section(width, ''), 0, depth + 6), ''),
  fault('levels in words', (width, depth) => [[0, 0], [width, 0], [width, depth], [0, depth]].flatMap(([x, y], k) => levelText(`+${(112 + k / 4).toFixed(3)}`, [x!, y!]))),
]
