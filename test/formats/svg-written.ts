/** Plans written as SVG and GeoJSON in the ways that drawing programs write them. For tests only. */
import { random } from '../../src/base/random.ts'
import type { Plan } from '../../src/plan/plan.ts'

type Point = [x: number, y: number]

const panels = (plan: Plan): Point[][] =>
  Array.from({ length: plan.panelCount }, (_, p) =>
    Array.from(plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1]), (node): Point => [plan.x[node]!, plan.y[node]!]),
  )

const edges = (plan: Plan): [Point, Point][] =>
  Array.from({ length: plan.edgeCount }, (_, e) => {
    const [a, b] = [plan.origin[2 * e]!, plan.origin[2 * e + 1]!]
    return [
      [plan.x[a]!, plan.y[a]!],
      [plan.x[b]!, plan.y[b]!],
    ]
  })

/** A page of 1 x 1 m at 1:100; one user unit is a metre of the plan, whose origin lies in the lower left corner. */
const page = (inside: string): string =>
  `<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg" width="1000mm" height="100cm" viewBox="0 0 100 100">\n${inside}\n</svg>\n`

const up = ([x, y]: Point): Point => [x, 100 - y]
const list = (points: readonly Point[]): string => points.map((point) => point.join(' ')).join(' ')

function shuffled<T>(items: readonly T[], seed: number): T[] {
  const next = random(seed)
  return items
    .map((item) => ({ item, key: next() }))
    .sort((a, b) => a.key - b.key)
    .map(({ item }) => item)
}

/** Points under the inverse of translate(7 3) rotate(30) scale(2 -0.5), to be drawn under it. */
function before([x, y]: Point): Point {
  const [u, v] = [x - 7, y - 3]
  const [c, s] = [Math.cos(Math.PI / 6), Math.sin(Math.PI / 6)]
  return [(c * u + s * v) / 2, (c * v - s * u) / -0.5]
}

const relative = (points: readonly Point[]): string =>
  points
    .map(([x, y], i) => (i === 0 ? `m${x} ${y}` : `l${(x - points[i - 1]![0]).toFixed(9)} ${(y - points[i - 1]![1]).toFixed(9)}`))
    .join('')

const lineElement = ([[x1, y1], [x2, y2]]: [Point, Point]): string => `<line stroke="red" x1="${x1}" y1="${y1}" x2="${x2}" y2="${y2}"/>`

export const svgWays: Readonly<Record<string, (plan: Plan) => string>> = {
  polygons: (plan) =>
    page(
      panels(plan)
        .map((loop) => `<polygon points="${list(loop.map(up))}"/>`)
        .join('\n'),
    ),
  'relative paths under a mirror': (plan) =>
    page(
      `<g transform="matrix(1 0 0 -1 0 100)" style="fill:none;stroke:#000">${panels(plan)
        .map((loop) => `<path d="${relative(loop)}z"/>`)
        .join('')}</g>`,
    ),
  'paths under nested transforms': (plan) =>
    page(
      `<g transform="translate(7 3)"><g transform="rotate(30)scale(2-.5)">${panels(plan)
        .map((loop) => `<path d="M${list(loop.map(up).map(before))}Z"/>`)
        .join('')}</g></g>`,
    ),
  'one path of all panels': (plan) =>
    page(
      `<path d="${panels(plan)
        .map((loop) => `M${list(loop.map(up))}Z`)
        .join('')}"/>`,
    ),
  'lines in any order, some twice': (plan) => {
    const all = shuffled([...edges(plan), ...edges(plan).slice(0, 5)], 4)
    return page(
      all
        .map(
          ([a, b], i) =>
            lineElement(i % 2 === 0 ? [up(a), up(b)] : [up(b), up(a)]),
        )
        .join(''),
    )
  },
  'one shape used with offsets': (plan) =>
    page(
      `<defs>${panels(plan)
        .map((loop, p) => `<path id="p${p}" d="M${list(loop.map(up).map(([x, y]): Point => [x - p, y - 1]))}z"/>`)
        .join('')}</defs>${panels(plan)
        .map((_, p) => `<use href="#p${p}" x="${p}" y="1"/>`)
        .join('')}`,
    ),
}

const ring = (loop: readonly Point[]): Point[] => [...loop, loop[0]!]

export const geoJsonWays: Readonly<Record<string, (plan: Plan) => string>> = {
  'a feature a panel': (plan) =>
    JSON.stringify({
      type: 'FeatureCollection',
      features: panels(plan).map((loop) => ({ type: 'Feature', properties: {}, geometry: { type: 'Polygon', coordinates: [ring(loop)] } })),
    }),
  'one MultiPolygon, rings clockwise': (plan) =>
    JSON.stringify({ coordinates: panels(plan).map((loop) => [ring([...loop].reverse())]), type: 'MultiPolygon' }, null, 1),
  'line strings in any order': (plan) =>
    JSON.stringify({
      type: 'GeometryCollection',
      geometries: shuffled(edges(plan), 9).map((edge) => ({ type: 'LineString', coordinates: edge })),
    }),
}
