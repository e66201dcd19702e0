/**
 * What must not change: the same plan moved, turned, scaled, sheared, mirrored, renumbered, drawn in survey coordinates or in
 * millimetres has the same freedom, frozen joints and verdicts, and stresses that follow by one factor. Source: exact, since
 * heights stay lifts under an affine change of the plan (an affine function of the place stays one). Seeds in the names.
 */
import { describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { closure } from '../../src/roof/stress/closure.ts'
import { stressOfGradients } from '../../src/roof/stress/forces.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import { projected } from '../../src/roof/stress/lift-space.ts'
import { panelBases, panelPlanes, squaredResidual } from '../../src/roof/stress/panel-bases.ts'
import { ask, objText, written } from '../make/ask.ts'
import { plan, voronoi, type Points } from '../make/plans.ts'
import { raise } from '../make/raise.ts'
import { kinds, randomPlan, type Drawn, type Kind } from '../make/random-plans.ts'
import { flatness, readObj } from './second-reader.ts'

interface Change {
  readonly name: string
  /** Linear part a b c d of (x, y) -> (a x + b y, c x + d y) + shift. */
  readonly linear: readonly [number, number, number, number]
  readonly shift: readonly [number, number]
}

const turned = (degrees: number, scale = 1): Change['linear'] => {
  const [c, s] = [scale * Math.cos((degrees * Math.PI) / 180), scale * Math.sin((degrees * Math.PI) / 180)]
  return [c, -s, s, c]
}

/** Changes that keep shapes, so that the wish goes with the plan. */
const similar: readonly Change[] = [
  { name: 'moved', linear: [1, 0, 0, 1], shift: [1234.5, -987.25] },
  { name: 'turned by 37 degrees', linear: turned(37), shift: [0, 0] },
  { name: 'a hundredth of the size', linear: turned(0, 0.01), shift: [0, 0] },
  { name: 'turned, 250 times as large and moved', linear: turned(-118, 250), shift: [5e4, 7e4] },
  { name: 'mirrored', linear: [-1, 0, 0, 1], shift: [0, 0] },
]
const affine: readonly Change[] = [
  ...similar,
  { name: 'sheared', linear: [1, 0.7, 0, 1], shift: [0, 0] },
  { name: 'stretched five times one way', linear: [5, 0, 0, 1], shift: [0, 0] },
  { name: 'sheared, mirrored and turned', linear: [0.3, -1.1, -0.9, 0.4], shift: [10, 20] },
]

const changed = (points: Points, { linear: [a, b, c, d], shift: [u, v] }: Change): [number, number][] =>
  points.map(([x, y]) => [a * x + b * y + u, c * x + d * y + v])

/** The same drawing with points, faces and the beginnings of faces in another order; `point[k]` is where point k has gone. */
function renumbered({ points, faces }: Drawn, seed: number): { drawn: Drawn; point: number[]; face: number[] } {
  const next = random(seed)
  const shuffled = (n: number): number[] => {
    const order = Array.from({ length: n }, (_, k) => k)
    for (let k = n - 1; k > 0; k -= 1) {
      const other = Math.floor(next() * (k + 1))
      ;[order[k], order[other]] = [order[other]!, order[k]!]
    }
    return order
  }
  const point = shuffled(points.length),
    face = shuffled(faces.length)
  const moved: [number, number][] = []
  points.forEach(([x, y], k) => (moved[point[k]!] = [x, y]))
  const turnedFaces: number[][] = []
  faces.forEach((corners, f) => {
    const first = Math.floor(next() * corners.length)
    const round = corners.map((_, k) => point[corners[(first + k) % corners.length]!]!)
    turnedFaces[face[f]!] = next() < 0.3 ? round.reverse() : round
  })
  return { drawn: { points: moved, faces: turnedFaces }, point, face }
}

/** Node of the plan at each point of the drawing it was made from. */
function nodeOfPoint(of: Plan, points: Points): number[] {
  const known = new Map(Array.from(of.x, (x, node) => [`${x} ${of.y[node]}`, node]))
  return points.map(([x, y]) => known.get(`${x} ${y}`) ?? -1)
}

/** Joints of `other` in the order of the joints of `of`, by what has become of their nodes. */
function jointsIn(of: Plan, other: Plan, node: readonly number[]): number[] {
  const key = (a: number, b: number): string => `${Math.min(a, b)} ${Math.max(a, b)}`
  const known = new Map(Array.from({ length: other.jointCount }, (_, j) => [key(other.origin[2 * j]!, other.origin[2 * j + 1]!), j]))
  return Array.from({ length: of.jointCount }, (_, j) => known.get(key(node[of.origin[2 * j]!]!, node[of.origin[2 * j + 1]!]!))!)
}

/** Where each node of `of` is in `other`, both made from drawings whose point k of the first is `point[k]` of the second. */
function nodesIn(of: Plan, from: Points, other: Plan, to: Points, point: readonly number[]): number[] {
  const [mine, others] = [nodeOfPoint(of, from), nodeOfPoint(other, to)]
  const out = new Array<number>(of.nodeCount).fill(-1)
  mine.forEach((node, k) => {
    if (node >= 0) out[node] = others[point[k]!]!
  })
  return out
}

/** Stress of each joint from heights and places as they are, in no unit of the plan's own. */
const stressOf = (of: Plan, heights: Float64Array): Float64Array =>
  stressOfGradients(of, panelPlanes(of, panelBases(of), heights).gradient).map((s) => s / of.frame.span ** 2)

const same = (points: Points): number[] => points.map((_, k) => k)
const facts = (of: Plan): (number | boolean)[] => {
  const { freedom, count, tilts, space, groupCount, decided } = finish(freeRim(of))
  return [freedom, count, tilts, space.dimension, groupCount, decided]
}

const cases: [Kind, number][] = kinds.flatMap((kind) => [61, 62, 63].map((seed): [Kind, number] => [kind, seed]))

describe.each(cases)('%s, seed %d', (kind, seed) => {
  const drawn = randomPlan(kind, seed)
  const of = plan(drawn.points, drawn.faces)
  const { space, freedom, frozen } = finish(freeRim(of))
  const heights = projected(
    space,
    Float64Array.from({ length: of.nodeCount }, (_, i) => Math.sin(5 * i + seed)),
  )
  const stress = stressOf(of, heights)

  test.each(affine)('$name: same facts, same frozen joints; the heights stay a lift and stresses divide by |det|', (change) => {
    const points = changed(drawn.points, change)
    const image = plan(points, drawn.faces)
    expect(facts(image)).toEqual(facts(of))
    const node = nodesIn(of, drawn.points, image, points, same(points))
    const joint = jointsIn(of, image, node)
    const there = finish(freeRim(image))
    expect(joint.map((j) => there.frozen[j])).toEqual([...frozen])
    const moved = new Float64Array(image.nodeCount)
    node.forEach((at, i) => (moved[at] = heights[i]!))
    const most = Math.max(...heights.map(Math.abs))
    expect(Math.sqrt(squaredResidual(image, there.bases, moved))).toBeLessThan(1e-11 * most)
    const [a, b, c, d] = change.linear
    const scale = Math.abs(a * d - b * c)
    // A plan that lifts nowhere has no stress but its heights' rounding.
    if (freedom === 0) return
    const largest = Math.max(...stress.map(Math.abs))
    const theirs = stressOf(image, moved)
    joint.forEach((j, k) => expect(Math.abs(theirs[j]! * scale - stress[k]!)).toBeLessThan(1e-9 * largest))
    // The stresses of the first plan balance in the second as they are.
    expect(
      imbalance(
        image,
        Float64Array.from({ length: image.jointCount }, (_, j) => stress[joint.indexOf(j)]!),
      ),
    ).toBeLessThan(1e-10)
  })

  test('renumbered: same facts, same frozen joints, same nearest roof', () => {
    const { drawn: other, point } = renumbered(drawn, seed)
    const image = plan(other.points, other.faces)
    expect(facts(image)).toEqual(facts(of))
    const node = nodesIn(of, drawn.points, image, other.points, point)
    const { frozen: there } = finish(freeRim(image))
    expect(jointsIn(of, image, node).map((j) => there[j])).toEqual([...frozen])
    const wish = (x: number, y: number): number => 0.02 * Math.sin(x) * Math.cos(0.7 * y)
    const target = (on: Plan): Float64Array => Float64Array.from(on.x, (x, i) => wish(x, on.y[i]!))
    const [first, second] = [raise(of, { target: target(of) }), raise(image, { target: target(image) })]
    expect(second.verdict).toBe(first.verdict)
    node.forEach((at, i) => expect(Math.abs(second.roof!.heights[at]! - first.roof!.heights[i]!)).toBeLessThan(1e-7))
  })

  test.each(similar)('$name: same verdict and the same roof in proportion, under conditions', (change) => {
    const points = changed(drawn.points, change)
    const image = plan(points, drawn.faces)
    const node = nodesIn(of, drawn.points, image, points, same(points))
    const scale = Math.sqrt(Math.abs(change.linear[0] * change.linear[3] - change.linear[1] * change.linear[2]))
    const conditionsAt = (name: (at: number) => string, size: number): Condition[] => [
      { kind: 'level', name: 'a', soft: null, at: { nodes: [name(0), name(1)] }, level: 0 },
      { kind: 'level', name: 'b', soft: null, at: { nodes: [name(of.nodeCount - 1)] }, level: 0.1 * size },
      { kind: 'equal', name: 'c', soft: null, at: { nodes: [name(2), name(3)] } },
    ]
    const first = raise(of, { conditions: conditionsAt((at) => `N${at + 1}`, 1), flat: 0.001 })
    const second = raise(image, { conditions: conditionsAt((at) => `N${node[at]! + 1}`, scale), flat: 0.001 * scale })
    expect([second.verdict, second.under.freedomLeft]).toEqual([first.verdict, first.under.freedomLeft])
    expect(jointsIn(of, image, node).map((j) => second.under.frozen[j])).toEqual([...first.under.frozen])
    if (first.roof === null) return
    // The box's longer side is 1 in either plan's own measure, and turns with it no more: heights compared in length.
    const size = Math.max(...first.z.map(Math.abs))
    node.forEach((at, i) => expect(Math.abs(second.z[at]! / scale - first.z[i]!)).toBeLessThan((first.roof!.exact ? 1e-8 : 1e-6) * size))
  })
})

/** Largest sum of a closure row over the sum of its terms' sizes, terms below 1e-9 of the largest force's left out. */
function imbalance(of: Plan, stress: Float64Array): number {
  const { start, joint, value } = closure(of)
  let worst = 0,
    most = 0
  for (let r = 0; r + 1 < start.length; r += 1)
    for (let k = start[r]!; k < start[r + 1]!; k += 1) most = Math.max(most, Math.abs(value[k]! * stress[joint[k]!]!))
  for (let r = 0; r + 1 < start.length; r += 1) {
    let sum = 0
    for (let k = start[r]!; k < start[r + 1]!; k += 1) sum += value[k]! * stress[joint[k]!]!
    worst = Math.max(worst, most === 0 ? 0 : Math.abs(sum) / most)
  }
  return worst
}

describe('survey coordinates, through the job', () => {
  const { plan: cells } = voronoi(60, 17)
  const faces = Array.from({ length: cells.panelCount }, (_, p) => [...cells.corner.slice(cells.panelStart[p], cells.panelStart[p + 1])])
  /** Digits as a surveyor's file has them: metres with six decimals, millimetres with three, offset included. */
  const file = (offset: number, unit: 'm' | 'mm'): string => {
    const [scale, decimals] = unit === 'm' ? [1, 6] : [1000, 3]
    const digits = (metres: number): string => {
      const whole = Math.round(metres * 1e6)
      const text = (BigInt(offset) * 1000000n + BigInt(whole)) * BigInt(scale)
      const sign = text < 0n ? '-' : ''
      const all = (text < 0n ? -text : text).toString().padStart(7, '0')
      return `${sign}${all.slice(0, -6)}.${all.slice(-6).slice(0, decimals)}`
    }
    const nodes = [...cells.x].map((x, i) => `v ${digits(x)} ${digits(cells.y[i]!)} 0`)
    return [...nodes, ...faces.map((face) => `f ${face.map((node) => node + 1).join(' ')}`), ''].join('\n')
  }
  const conditions = { shape: 'dome', conditions: [{ name: 'corner', kind: 'level', at: { nodes: ['N1', 'N3'] }, level: 0 }] } as const

  test.each([
    [5_700_000, 'm'],
    [5_700_000, 'mm'],
    [0, 'mm'],
    [-32_400_000, 'm'],
  ] as const)('origin %d m away, in %s: as at the origin in metres', async (offset, unit) => {
    const options = { unit } as const
    const home = await ask({ text: file(0, 'm'), brief: conditions, options: { unit: 'm' } })
    const away = await ask({ text: file(offset, unit), brief: conditions, options })
    const [first, second] = [home.answer.summary, away.answer.summary]
    expect(second.verdict).toBe('lifts')
    for (const key of ['verdict', 'plan'] as const)
      expect({ ...(second[key] as object), unit: '' }).toEqual({ ...(first[key] as object), unit: '' })
    expect([second.stress.freedom, second.stress.freedomLeft, second.stress.count]).toEqual([
      first.stress.freedom,
      first.stress.freedomLeft,
      first.stress.count,
    ])
    expect(second.stress.freedom).toBe(1)
    const per = unit === 'mm' ? 1000 : 1
    away.answer.roof!.heights.forEach((z, i) => expect(Math.abs(z / per - home.answer.roof!.heights[i]!)).toBeLessThan(2e-6))
    // x and y leave as they came, digit by digit but for trailing zeros; the panels as written are flat.
    const obj = readObj((await written(away))['roof.obj']!)
    const given = file(offset, unit)
      .split('\n')
      .slice(0, cells.nodeCount)
      .map((line) =>
        line
          .split(' ')
          .slice(1, 3)
          .map((digits) => digits.replace(/\.?0+$/, '')),
      )
    expect(obj.digits.map(([x, y]) => [x, y])).toEqual(given)
    expect(flatness(obj).zone / per).toBeLessThan(2e-6)
  })
})

describe('written files, read by the second reader', () => {
  test.each(kinds.map((kind): [Kind, number] => [kind, 71]))(
    '%s, seed %d: flatness and rise are those of the summary',
    async (kind, seed) => {
      const { points, faces } = randomPlan(kind, seed)
      const checked = await ask({ text: objText(points, faces), options: { near: true, rise: 0.5 } })
      const { roof, plan: planFacts } = checked.answer.summary
      const obj = readObj((await written(checked))['roof.obj']!)
      expect(obj.panels).toHaveLength(planFacts.panels)
      const measured = flatness(obj)
      expect(Math.abs(1000 * measured.zone - roof!.flatnessMax_mm)).toBeLessThan(1e-9 + 1e-9 * roof!.flatnessMax_mm)
      expect(Math.abs(1000 * measured.corner - roof!.cornerMax_mm)).toBeLessThan(1e-8 + 1e-8 * roof!.cornerMax_mm)
      const z = obj.nodes.map(([, , height]) => height)
      expect(Math.max(...z) - Math.min(...z)).toBeGreaterThanOrEqual(roof!.rise)
    },
  )
})
