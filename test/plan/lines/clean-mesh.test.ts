/** The short way for clean meshes against the long way: whatever it takes, the long way reads as the same plan, without a repair. */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { finish } from '../../../src/base/steps.ts'
import { cleanMesh } from '../../../src/plan/lines/clean-mesh.ts'
import type { Drawing } from '../../../src/plan/drawing.ts'
import { lineFrame } from '../../../src/plan/lines/frame.ts'
import { panelFaces } from '../../../src/plan/lines/panels-of-lines.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import { planFromFaces } from '../../../src/plan/subdivision.ts'
import { millimetresPer, unitOfDrawing } from '../../../src/plan/unit-of-drawing.ts'
import { kinds, randomPlan } from '../../make/random-plans.ts'
import { drawing, plainly } from '../drawings.ts'

type Points = readonly (readonly [number, number])[]
type Faces = readonly (readonly number[])[]

function meshOf(points: Points, faces: Faces): Drawing {
  const start = Int32Array.from([0, ...faces.map((_, f) => faces.slice(0, f + 1).reduce((sum, face) => sum + face.length, 0))])
  return {
    ...drawing({}), format: 'OBJ', points: Float64Array.from(points.flatMap(([x, y]) => [x, y, 0])), hasHeight: new Uint8Array(points.length),
    outlines: { start, point: Int32Array.from(faces.flat()), layer: new Int32Array(faces.length), line: new Int32Array(faces.length) },
  }
}

/** Both ways; `long` is null where the long way fails or repairs something. */
function both(points: Points, faces: Faces, snap_mm: number | null = null): { short: Plan | null; long: Plan | null } {
  const mesh = meshOf(points, faces)
  const unit = unitOfDrawing(mesh, plainly)
  if (!unit.ok) throw new Error(unit.problem.message)
  const frame = lineFrame(mesh, unit.value, snap_mm, 1)
  if (!frame.ok) throw new Error(frame.problem.message)
  const short = finish(cleanMesh(mesh, frame.value, 'm'))?.plan ?? null
  const read = finish(panelFaces(mesh, frame.value, millimetresPer('m'), []))
  if (!read.ok || read.value.repairs.length > 0 || read.value.notices.length > 0 || read.value.doubles !== null) return { short, long: null }
  const { x, y, start, corner } = read.value
  const made = planFromFaces({ unit: 'm', x, y, start, corner })
  return { short, long: made.ok ? made.value.plan : null }
}

/** 5 x 5 quads of 2 m: node (i, j) is 6 j + i. */
const square: Points = Array.from({ length: 36 }, (_, node) => [2 * (node % 6), 2 * Math.floor(node / 6)])
const quads: Faces = Array.from({ length: 25 }, (_, f) => [0, 1, 7, 6].map((at) => 6 * Math.floor(f / 5) + (f % 5) + at))
/** The quads with some replaced: f and its corners. */
const instead = (...others: readonly (readonly [number, readonly number[]])[]): Faces => quads.map((face, f) => new Map(others).get(f) ?? face)

describe('a clean mesh', () => {
  test('is taken, its panels turned as the long way turns them', () => {
    const { short, long } = both(square, quads.map((face, f) => (f % 2 === 0 ? face : [...face].reverse())))
    expect(short).not.toBeNull()
    expect(short).toEqual(long)
  })

  test.each(kinds)('of %s is the same plan by either way, as drawn and with nodes moved', (kind) => {
    let taken = 0
    for (let seed = 0; seed < 30; seed += 1) {
      const { points, faces } = randomPlan(kind, seed)
      const next = random(seed)
      // From untouched to nodes far off their places: folds, overlaps, corners near edges.
      const size = [0, 0.05, 0.3, 1, 3][seed % 5]!
      const moved = points.map(([x, y]): [number, number] => (next() < 0.3 ? [x + size * (next() - 0.5), y + size * (next() - 0.5)] : [x, y]))
      const { short, long } = both(moved, faces)
      if (short === null) continue
      taken += 1
      expect(short, `seed ${seed}`).toEqual(long)
    }
    // Plans of several parts and pinched ones, which these nearly all are, go the long way.
    expect(taken).toBeGreaterThan(kind === 'scattered cells' ? -1 : 3)
  })
})

describe('nodes within the snap distance of others', () => {
  test('stay apart where a side joins them', () => {
    const { short, long } = both([...square, [4.0004, 4]], instead([7, [8, 9, 15, 36, 14]], [12, [14, 36, 15, 21, 20]]))
    expect(short).not.toBeNull()
    expect(short).toEqual(long)
  })

  test.each([[40, 5], [150, 3], [400, 1]] as const)('in random plans joined within %i mm the long way agrees', (snap_mm, least) => {
    let taken = 0
    for (const kind of kinds) {
      for (let seed = 0; seed < 15; seed += 1) {
        const { points, faces } = randomPlan(kind, seed)
        const { short, long } = both(points, faces, snap_mm)
        if (short === null) continue
        taken += 1
        expect(short, `${kind}, seed ${seed}`).toEqual(long)
      }
    }
    expect(taken).toBeGreaterThanOrEqual(least)
  })
})

describe('what is not shown to be clean', () => {
  const away: readonly (readonly [string, Points, Faces])[] = [
    ['a panel drawn twice', square, [...quads, quads[7]!]],
    ['a node folded over a panel beside it', square.map((p, i): readonly [number, number] => (i === 14 ? [6.5, 6.5] : p)), quads],
    ['a corner within the snap distance of a side', [...square, [5, 4.0005]], instead([7, [8, 9, 15, 36, 14]])],
    ['two nodes within the snap distance with no side between them', square.map((p, i): readonly [number, number] => (i === 14 ? [5, 4.9997] : i === 21 ? [5.0002, 5] : p)), quads],
    ['a second sheet over the first', [...square, [1, 1], [1.5, 1], [1.5, 1.5], [1, 1.5]], [...quads, [36, 37, 38, 39]]],
    ['a rim that folds back over the panels', [...square, [3, 3], [3, 5]], [...quads, [11, 17, 37, 36]]],
    ['a five-pointed star in a void', [...square, [5, 4.2], [5.5, 5.8], [4.3, 4.8], [5.7, 4.8], [4.5, 5.8]], instead([12, [36, 37, 38, 39, 40]])],
    ['a panel that crosses itself', square, instead([12, [14, 21, 15, 20]])],
    ['two quads that meet in a node', square, quads.filter((_, f) => f !== 6 && f !== 12)],
  ]
  test('the mesh that these are made from is clean', () => {
    expect(both(square, quads).short).not.toBeNull()
    expect(both(square, quads.filter((_, f) => f !== 12)).short).not.toBeNull()
  })

  test.each(away)('%s goes the long way', (_, points, faces) => {
    expect(both(points, faces).short).toBeNull()
  })

  test('two strips of panels whose rims come within the snap distance', () => {
    // A ring of quads, open by 0.5 mm at the right.
    const ring = (gap: number): { points: [number, number][]; faces: number[][] } => {
      const points: [number, number][] = []
      for (let k = 0; k <= 12; k += 1) {
        for (const radius of [2, 3, 4]) {
          const turn = (2 * Math.PI * k) / 12
          points.push([radius * Math.cos(turn), radius * Math.sin(turn) + (k === 12 ? -gap : 0)])
        }
      }
      const faces = Array.from({ length: 24 }, (_, f) => [0, 1, 4, 3].map((at) => 3 * (f >> 1) + (f & 1) + at))
      return { points, faces }
    }
    const [near, far] = [ring(0.0005), ring(0.1)]
    expect(both(near.points, near.faces).short).toBeNull()
    const clear = both(far.points, far.faces)
    expect(clear.short).not.toBeNull()
    expect(clear.short).toEqual(clear.long)
  })
})
