/**
 * A map as one plan: the counties of the United States (us-atlas 3.0.1, from the Census Bureau's cartographic boundaries),
 * written as GeoJSON. Panels, joints, rim edges and nodes are counted from the topology's shared arcs, which the reader
 * never sees.
 *
 * Left out of the file are polygons with a hole, which a panel cannot have, and what the map's own rounding has spoilt.
 */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { read } from '../../../src/job/run.ts'
import { noOptions } from '../../../src/plan/project/options.ts'

interface Topology {
  readonly transform: { readonly scale: [number, number]; readonly translate: [number, number] }
  readonly arcs: [number, number][][]
  readonly objects: { readonly counties: { readonly geometries: ({ type: 'Polygon'; arcs: number[][] } | { type: 'MultiPolygon'; arcs: number[][][] })[] } }
}

/** Whole-numbered positions along each arc (TopoJSON 1.0, sections 2.1.3 and 2.1.4: differences, and ~i for an arc run backwards). */
function rings(topology: Topology): [number, number][][][] {
  const arcs = topology.arcs.map((arc) => {
    let [x, y] = [0, 0]
    return arc.map(([dx, dy]): [number, number] => [x += dx, y += dy])
  })
  const ring = (list: readonly number[]): [number, number][] => {
    const out = list.flatMap((i) => (i < 0 ? [...arcs[~i]!].reverse() : arcs[i]!).slice(0, -1))
    return out.filter((p, k) => p[0] !== out[(k + 1) % out.length]![0] || p[1] !== out[(k + 1) % out.length]![1])
  }
  return topology.objects.counties.geometries.flatMap((g) => (g.type === 'Polygon' ? [g.arcs] : g.arcs).map((polygon) => polygon.map(ring)))
}

type Ring = readonly (readonly [number, number])[]

const turn = (o: readonly [number, number], a: readonly [number, number], b: readonly [number, number]): number => Math.sign((a[0] - o[0]) * (b[1] - o[1]) - (a[1] - o[1]) * (b[0] - o[0]))

/** Whether a ring passes a place twice or crosses itself, all sides against all. */
function isSpoilt(ring: Ring): boolean {
  if (new Set(ring.map(String)).size !== ring.length) return true
  const side = (i: number): [readonly [number, number], readonly [number, number]] => [ring[i]!, ring[(i + 1) % ring.length]!]
  for (let i = 0; i < ring.length; i += 1) {
    for (let j = i + 2; j < ring.length; j += 1) {
      const [[a, b], [c, d]] = [side(i), side(j)]
      if (turn(a, b, c) * turn(a, b, d) < 0 && turn(c, d, a) * turn(c, d, b) < 0) return true
    }
  }
  return false
}

/** Regions that cross another, to be left out: pairs of sides that cross, found by cells of the grid on which positions lie. */
function crossing(regions: readonly Ring[]): Set<number> {
  const size = 700
  const cells = new Map<string, [region: number, a: Ring[number], b: Ring[number]][]>()
  const out = new Set<number>()
  regions.forEach((ring, r) => ring.forEach((a, k) => {
    const b = ring[(k + 1) % ring.length]!
    for (let i = Math.floor(Math.min(a[0], b[0]) / size); i <= Math.floor(Math.max(a[0], b[0]) / size); i += 1) {
      for (let j = Math.floor(Math.min(a[1], b[1]) / size); j <= Math.floor(Math.max(a[1], b[1]) / size); j += 1) {
        const cell = cells.get(`${i} ${j}`) ?? []
        cells.set(`${i} ${j}`, cell)
        for (const [other, c, d] of cell) if (turn(a, b, c) * turn(a, b, d) < 0 && turn(c, d, a) * turn(c, d, b) < 0) out.add(r).add(other)
        cell.push([r, a, b])
      }
    }
  }))
  return out
}

const place = (p: readonly [number, number]): string => `${p[0]},${p[1]}`

test('3,000 regions with islands: panels, joints, rim, nodes and parts as the topology has them', async () => {
  const topology = JSON.parse(readFileSync(join(import.meta.dirname, '../../../node_modules/us-atlas/counties-albers-10m.json'), 'utf8')) as Topology
  const all = rings(topology)
  const degenerate = all.filter(([outer]) => outer!.length < 3)
  const sound = all.filter((polygon) => polygon.length === 1 && polygon[0]!.length >= 3 && !isSpoilt(polygon[0]!)).map(([outer]) => outer!)
  const crossed = crossing(sound)
  const kept = sound.filter((_, r) => !crossed.has(r))
  expect([all.length, degenerate.length, kept.length]).toEqual([3326, 21, 3283])

  // From the topology: sides that two regions share are joints, others rim edges; regions that share joints are one part.
  const sides = new Map<string, number[]>()
  kept.forEach((ring, r) => ring.forEach((p, k) => {
    const key = [place(p), place(ring[(k + 1) % ring.length]!)].sort().join(' ')
    sides.set(key, [...(sides.get(key) ?? []), r])
  }))
  const root = kept.map((_, r) => r)
  const find = (r: number): number => {
    while (root[r] !== r) r = root[r] = root[root[r]!]!
    return r
  }
  for (const [a, b] of sides.values()) if (b !== undefined) root[find(a!)] = find(b)
  const joints = [...sides.values()].filter((list) => list.length === 2).length
  const nodes = new Set(kept.flatMap((ring) => ring.map(place))).size

  const { scale: [sx, sy] } = topology.transform
  // Counties of some kilometres as panels of some metres; the sheet's y runs down.
  const position = (p: readonly [number, number]): number[] => [p[0] * sx * 3, -p[1] * sy * 3]
  const feature = (ring: Ring): object => ({ type: 'Feature', properties: {}, geometry: { type: 'Polygon', coordinates: [[...ring, ring[0]!].map(position)] } })
  const text = JSON.stringify({ type: 'FeatureCollection', features: [...kept, ...degenerate.map(([outer]) => outer!)].filter((ring) => ring.length > 0).map(feature) })
  const answer = await read({ command: 'read', source: { name: 'counties.geojson', bytes: new TextEncoder().encode(text) }, options: { ...noOptions, unit: 'm' }, brief: null, levels: null, given: {} })
  if (!answer.ok) throw new Error(`${answer.problem.message} ${JSON.stringify(answer.problem.where)}`)
  const { plan, questions } = answer.value.summary
  expect(questions).toEqual([])
  expect([plan.panels, plan.joints, plan.rimEdges, plan.nodes, plan.parts]).toEqual([kept.length, joints, sides.size - joints, nodes, new Set(root.map((_, r) => find(r))).size])
  // Regions that belong to nobody, by Euler: E - V + C - F.
  const components = new Map<string, string>()
  const top = (p: string): string => {
    let at = p
    while ((components.get(at) ?? at) !== at) at = components.get(at)!
    return at
  }
  for (const key of sides.keys()) {
    const [a, b] = key.split(' ') as [string, string]
    components.set(top(a), top(b))
  }
  const connected = new Set(kept.flatMap((ring) => ring.map((p) => top(place(p))))).size
  expect(plan.voids).toBe(sides.size - nodes + connected - kept.length)
})
