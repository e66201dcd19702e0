/**
 * Random plans of all kinds, as points and faces: what a seed gives is the same everywhere. Some lift and some do not; voids,
 * pinch nodes, several parts, T-junctions, re-entrant and many-sided panels occur.
 */
import { random } from '../../src/base/random.ts'
import { voronoi, type Points } from './plans.ts'

export interface Drawn {
  readonly points: Points
  readonly faces: readonly (readonly number[])[]
}

export type Kind = 'grid with voids' | 'quads and triangles' | 'merged cells' | 'bricks' | 'slanted cuts' | 'scattered cells'

export const kinds: readonly Kind[] = [
  'grid with voids',
  'quads and triangles',
  'merged cells',
  'bricks',
  'slanted cuts',
  'scattered cells',
]

export function randomPlan(kind: Kind, seed: number): Drawn {
  const next = random(1000 * seed + kinds.indexOf(kind))
  switch (kind) {
    case 'grid with voids':
      return looseGrid(next, 0.15, 0)
    case 'quads and triangles':
      return looseGrid(next, 0.1, 0.3)
    case 'scattered cells':
      return looseGrid(next, 0.4, 0.1)
    case 'merged cells':
      return mergedCells(next, seed)
    case 'bricks':
      return cuts(next, 0)
    case 'slanted cuts':
      return cuts(next, 0.25)
  }
}

type Next = () => number
const below = (next: Next, n: number): number => Math.floor(next() * n)

/** Jittered grid; a share of its cells is left out (voids, pinch nodes, parts), a share divided. Sometimes not jittered. */
function looseGrid(next: Next, left: number, divided: number): Drawn {
  const [m, n] = [3 + below(next, 4), 3 + below(next, 3)]
  const loose = next() < 0.3 ? 0 : 0.2
  const points: [number, number][] = []
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) points.push([i + loose * (next() - 0.5), j + loose * (next() - 0.5)])
  const faces: number[][] = []
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      const a = j * (m + 1) + i
      const quad = [a, a + 1, a + m + 2, a + m + 1]
      const [isOut, isDivided] = [next() < left, next() < divided]
      if (isOut && (i > 0 || j > 0)) continue
      if (isDivided) faces.push([quad[0]!, quad[1]!, quad[2]!], [quad[0]!, quad[2]!, quad[3]!])
      else faces.push(quad)
    }
  }
  return { points, faces }
}

/** Voronoi cells, some merged with a neighbour across a single joint, some left out. */
function mergedCells(next: Next, seed: number): Drawn {
  const { plan } = voronoi(12 + below(next, 14), seed)
  const points: [number, number][] = Array.from(plan.x, (x, node) => [x, plan.y[node]!])
  let faces: number[][] = Array.from({ length: plan.panelCount }, (_, p) => [
    ...plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1]),
  ])
  for (let merge = below(next, 4); merge > 0; merge -= 1) {
    const a = below(next, faces.length)
    for (let b = 0; b < faces.length; b += 1) {
      const joined = b === a ? null : merged(faces[a]!, faces[b]!)
      if (joined === null) continue
      faces = [...faces.filter((_, f) => f !== a && f !== b), joined]
      break
    }
  }
  if (next() < 0.4) faces.splice(below(next, faces.length), 1)
  return { points, faces }
}

/** One loop from two that share exactly one edge and no other node; null when they do not. */
function merged(a: readonly number[], b: readonly number[]): number[] | null {
  if (a.filter((node) => b.includes(node)).length !== 2) return null
  for (let i = 0; i < a.length; i += 1) {
    const j = b.findIndex((node, k) => node === a[(i + 1) % a.length] && b[(k + 1) % b.length] === a[i])
    if (j < 0) continue
    // Round a from the edge's end to its start, then round b from there to the edge's end.
    const fromA = Array.from({ length: a.length }, (_, k) => a[(i + 1 + k) % a.length]!)
    const fromB = Array.from({ length: b.length - 2 }, (_, k) => b[(j + 2 + k) % b.length]!)
    return [...fromA, ...fromB]
  }
  return null
}

/** A rectangle cut again and again across its pieces; every end of a cut becomes a corner of the panel beyond it. */
function cuts(next: Next, slant: number): Drawn {
  let pieces: [number, number][][] = [
    [
      [0, 0],
      [9, 0],
      [9, 6],
      [0, 6],
    ],
  ]
  for (let cut = 5 + below(next, 8); cut > 0; cut -= 1) {
    const largest = pieces.reduce((best, piece, k) => (areaOf(piece) > areaOf(pieces[best]!) ? k : best), 0)
    const at = next() < 0.7 ? largest : below(next, pieces.length)
    const [xs, ys] = [pieces[at]!.map(([x]) => x), pieces[at]!.map(([, y]) => y)]
    const [width, depth] = [Math.max(...xs) - Math.min(...xs), Math.max(...ys) - Math.min(...ys)]
    const across = (width > depth ? 0 : Math.PI / 2) + slant * (next() - 0.5)
    const [nx, ny] = slant === 0 ? (width > depth ? [1, 0] : [0, 1]) : [Math.cos(across), Math.sin(across)]
    const [t, u] = [0.3 + 0.4 * next(), 0.3 + 0.4 * next()]
    const level = nx * (Math.min(...xs) + t * width) + ny * (Math.min(...ys) + u * depth)
    const sides = halves(pieces[at]!, nx, ny, level)
    if (sides.every((side) => areaOf(side) > 0.6)) pieces = [...pieces.filter((_, k) => k !== at), ...sides]
  }
  const points: [number, number][] = []
  const index = ([x, y]: readonly [number, number]): number => {
    const known = points.findIndex(([px, py]) => Math.hypot(px - x, py - y) < 1e-6)
    return known >= 0 ? known : points.push([x, y]) - 1
  }
  const loops = pieces.map((piece) => piece.map(index).filter((node, k, all) => node !== all[(k + 1) % all.length]))
  return { points, faces: loops.map((loop) => withNodesOnSides(loop, points)) }
}

function halves(piece: readonly [number, number][], nx: number, ny: number, level: number): [number, number][][] {
  const sides: [number, number][][] = [[], []]
  piece.forEach((p, k) => {
    const q = piece[(k + 1) % piece.length]!
    const [sp, sq] = [nx * p[0] + ny * p[1] - level, nx * q[0] + ny * q[1] - level]
    if (sp <= 0) sides[0]!.push(p)
    if (sp >= 0) sides[1]!.push(p)
    if (sp * sq < 0) {
      const on: [number, number] = [p[0] + (sp / (sp - sq)) * (q[0] - p[0]), p[1] + (sp / (sp - sq)) * (q[1] - p[1])]
      sides[0]!.push(on)
      sides[1]!.push(on)
    }
  })
  return sides
}

function areaOf(piece: readonly (readonly [number, number])[]): number {
  return (
    Math.abs(
      piece.reduce((sum, [x, y], k) => {
        const [u, v] = piece[(k + 1) % piece.length]!
        return sum + x * v - y * u
      }, 0),
    ) / 2
  )
}

/** The loop with every known point that lies on one of its sides put in as a corner. */
export function withNodesOnSides(loop: readonly number[], points: Points): number[] {
  return loop.flatMap((from, k) => {
    const to = loop[(k + 1) % loop.length]!
    const [p, q] = [points[from]!, points[to]!]
    const [dx, dy] = [q[0] - p[0], q[1] - p[1]]
    const length = Math.hypot(dx, dy)
    const on = points
      .map(([x, y], node) => ({
        node,
        t: ((x - p[0]) * dx + (y - p[1]) * dy) / length ** 2,
        off: Math.abs((x - p[0]) * dy - (y - p[1]) * dx) / length,
      }))
      .filter(({ node, t, off }) => node !== from && node !== to && t > 0 && t < 1 && off < 1e-6)
      .sort((a, b) => a.t - b.t)
    return [from, ...on.map(({ node }) => node)]
  })
}
