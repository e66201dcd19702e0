/** The lists of roofs whose every angle and area is known from somewhere else. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import type { Column, Table } from '../../../src/base/table.ts'
import { lists } from '../../../src/roof/panels/lists.ts'
import type { Plan } from '../../../src/plan/plan.ts'
import { roofOf } from '../../make/answers.ts'
import { plan, type Points } from '../../make/plans.ts'

function column(table: Table, title: string): Column {
  const found = table.columns.find((each) => each.title === title)
  if (found === undefined) throw new Error(`no column ${title}`)
  return found
}

/** A column as plain values: numbers, words, or the names' 1-based numbers. */
function values(table: Table, title: string): (number | string)[] {
  const found = column(table, title)
  if (found.kind === 'number') return [...found.values]
  if (found.kind === 'word') return [...found.index].map((at) => found.words[at]!)
  if (found.kind === 'name') return [...found.index].map((at) => `${found.letter}${at + 1}`)
  return [...found.values]
}


const tables = (of: Plan, heights: readonly number[]): { panels: Table; joints: Table; nodes: Table } => finish(lists(of, roofOf(of, heights)))

/** Heights of all nodes as a function of their place. */
const over = (of: Plan, z: (x: number, y: number) => number): number[] => [...of.x].map((x, n) => z(x, of.y[n]!))

/** 18 x 12 hipped roof, ridge in the middle of the plan, hips at 45 degrees. */
const hipped = plan(
  [[0, 0], [18, 0], [18, 12], [0, 12], [6, 6], [12, 6]],
  [[0, 1, 5, 4], [1, 2, 5], [2, 3, 4, 5], [3, 0, 4]],
)

describe('hipped roof, 18 x 12 m at 20 degrees (exact: worked out by hand from the definition)', () => {
  const rise = 6 * Math.tan((20 * Math.PI) / 180)
  const { panels, joints, nodes } = tables(hipped, over(hipped, (_, y) => (y === 6 ? rise : 0)))

  test('titles are the ones that scripts rely on', () => {
    expect(panels.columns.map(({ title }) => title).join(',')).toBe('panel,corners,plan_area_m2,area_m2,perimeter_m,slope_deg,fall_deg,corner_mm,flatness_mm')
    expect(joints.columns.map(({ title }) => title).join(',')).toBe('joint,from,to,length_m,fold,fold_deg,dihedral_deg,form_density_no_load,form_force_no_load')
    expect(nodes.columns.map(({ title }) => title).join(',')).toBe('node,x,y,z,valence,rim')
  })

  test('all slopes 20 degrees, falls to the four winds, areas', () => {
    for (const slope of values(panels, 'slope_deg')) expect(slope).toBeCloseTo(20, 9)
    // Bearings clockwise from +y, downhill: the south side falls south.
    const fall = values(panels, 'fall_deg') as number[]
    expect(fall.map((each) => Math.round(each * 1e9) / 1e9)).toEqual([180, 90, 0, 270])
    const areas = values(panels, 'area_m2') as number[]
    expect(areas.reduce((a, b) => a + b)).toBeCloseTo(229.86, 2)
    expect(values(panels, 'plan_area_m2')).toEqual([72, 36, 72, 36])
    expect(values(panels, 'corners')).toEqual([4, 3, 4, 3])
    // South side: eaves 18, ridge 6, two hips of sqrt(36 + 36 + rise^2).
    expect((values(panels, 'perimeter_m') as number[])[0]).toBeCloseTo(24 + 2 * Math.sqrt(72 + rise * rise), 9)
  })

  test('ridge folds by 40 degrees, hips have a dihedral of 152.01', () => {
    const from = values(joints, 'from')
    const to = values(joints, 'to')
    const dihedral = values(joints, 'dihedral_deg') as number[]
    const fold = values(joints, 'fold_deg') as number[]
    expect(values(joints, 'fold')).toEqual(['ridge', 'ridge', 'ridge', 'ridge', 'ridge'])
    for (let j = 0; j < 5; j += 1) {
      const isRidge = [from[j], to[j]].every((name) => name !== undefined && hippedInner(String(name)))
      expect(dihedral[j]).toBeCloseTo(isRidge ? 140 : 152.01, 2)
      expect(fold[j]! + dihedral[j]!).toBeCloseTo(180, 9)
    }
  })

  test('nodes: valence counts rim edges too, rim tells rim nodes', () => {
    expect((values(nodes, 'valence') as number[]).reduce((a, b) => a + b)).toBe(2 * hipped.edgeCount)
    expect([...values(nodes, 'rim')].sort()).toEqual([0, 0, 1, 1, 1, 1])
  })

  test('lengths and areas of a plan in millimetres are metres all the same', () => {
    const inMm = plan(pointsOf(hipped, 1000), facesOf(hipped), 'mm')
    const mm = tables(inMm, over(inMm, (_, y) => (y === 6000 ? rise * 1000 : 0)))
    for (const title of ['area_m2', 'plan_area_m2', 'perimeter_m', 'slope_deg']) {
      const expected = values(panels, title) as number[]
      ;(values(mm.panels, title) as number[]).forEach((value, p) => expect(value).toBeCloseTo(expected[p]!, 9))
    }
    const lengths = values(joints, 'length_m') as number[]
    ;(values(mm.joints, 'length_m') as number[]).forEach((value, j) => expect(value).toBeCloseTo(lengths[j]!, 9))
  })
})

/** Inner nodes of the hipped roof are the two that stand at y = 6. */
const hippedInner = (name: string): boolean => hipped.y[Number(name.slice(1)) - 1] === 6
const pointsOf = (of: Plan, scale: number): Points => [...of.x].map((x, n) => [x * scale, of.y[n]! * scale] as const)
const facesOf = (of: Plan): number[][] => [...Array<number>(of.panelCount).keys()].map((p) => [...of.corner.slice(of.panelStart[p], of.panelStart[p + 1])])

describe('dodecahedron, face up (published: dihedral angle arccos(-1/sqrt 5) in any table of polyhedra)', () => {
  const phi = (1 + Math.sqrt(5)) / 2
  const ring = (radius: number, from: number): Points =>
    [0, 1, 2, 3, 4].map((k) => [radius * Math.cos(((from + 72 * k) * Math.PI) / 180), radius * Math.sin(((from + 72 * k) * Math.PI) / 180)] as const)
  const points = [...ring(1, 90), ...ring(phi, 90), ...ring(phi, 126)]
  const body = plan(points, [[0, 1, 2, 3, 4], ...[0, 1, 2, 3, 4].map((k) => [k, 5 + k, 10 + k, 5 + ((k + 1) % 5), (k + 1) % 5])])
  const { panels, joints } = tables(body, over(body, (x, y) => (Math.hypot(x, y) < 1.1 ? 0 : isOn(90, x, y) ? -1 : -phi)))

  test('dihedral angles to 1e-6 degrees, side panels: slope tan 2, areas 1.063314 and 2.377641', () => {
    for (const angle of values(joints, 'dihedral_deg')) expect(Math.abs((angle as number) - (Math.acos(-1 / Math.sqrt(5)) * 180) / Math.PI)).toBeLessThan(1e-6)
    expect((values(panels, 'slope_deg') as number[])[0]).toBeLessThan(1e-9)
    expect((values(panels, 'fall_deg') as number[])[0]).toBeNaN()
    for (let p = 1; p < 6; p += 1) {
      expect(Math.tan(((values(panels, 'slope_deg') as number[])[p]! * Math.PI) / 180)).toBeCloseTo(2, 9)
      expect((values(panels, 'plan_area_m2') as number[])[p]).toBeCloseTo(1.063314, 6)
      expect((values(panels, 'area_m2') as number[])[p]).toBeCloseTo(2.377641, 6)
    }
  })

  test('form densities -1.701302 round the top and -3.804226 on the spokes', () => {
    const density = (values(joints, 'form_density_no_load') as number[]).map((s) => s.toFixed(6)).sort()
    expect(density).toEqual([...Array<string>(5).fill('-1.701302'), ...Array<string>(5).fill('-3.804226')])
  })
})

/** Whether a point lies on one of five rays 72 degrees apart. */
function isOn(from: number, x: number, y: number): boolean {
  const turn = (((Math.atan2(y, x) * 180) / Math.PI - from) / 72 + 10) % 1
  return turn < 1e-6 || turn > 1 - 1e-6
}

describe('words at joints', () => {
  test('an inverted pyramid has valleys: dihedral 180 + fold; its force is the slope jump', () => {
    const pyramid = plan([[-1, -1], [1, -1], [1, 1], [-1, 1], [0, 0]], [[0, 1, 4], [1, 2, 4], [2, 3, 4], [3, 0, 4]])
    const { joints } = tables(pyramid, over(pyramid, (x) => (x === 0 ? -1 : 0)))
    expect(values(joints, 'fold')).toEqual(['valley', 'valley', 'valley', 'valley'])
    // Normals (0,-1,1)/sqrt 2 and (1,0,1)/sqrt 2 enclose 60 degrees.
    for (const angle of values(joints, 'dihedral_deg')) expect(angle).toBeCloseTo(240, 9)
    // Exact: gradients (1,0) and (0,1) differ by sqrt 2 over a joint of length sqrt 2, so s = +1.
    for (const s of values(joints, 'form_density_no_load')) expect(s).toBeCloseTo(1, 12)
    for (const force of values(joints, 'form_force_no_load')) expect(force).toBeCloseTo(Math.SQRT2, 12)
  })

  test('an inclined plane has flush joints only, and their form forces are exactly 0', () => {
    const two = plan([[0, 0], [1.1, 0], [2.3, 0], [2.3, 1.7], [1.1, 1.7], [0, 1.7]], [[0, 1, 4, 5], [1, 2, 3, 4]])
    const { joints, panels } = tables(two, over(two, (x, y) => 0.3 * x + 0.1 * y + 3))
    expect(values(joints, 'fold')).toEqual(['flush'])
    expect(values(joints, 'fold_deg')).toEqual([0])
    expect(values(joints, 'dihedral_deg')).toEqual([180])
    expect(values(joints, 'form_density_no_load')).toEqual([0])
    // Downhill is (-0.3, -0.1): bearing 180 + atan(3) clockwise from north.
    for (const fall of values(panels, 'fall_deg')) expect(fall).toBeCloseTo(180 + (Math.atan(3) * 180) / Math.PI, 9)
  })

  test('survey coordinates cost no accuracy that shows', () => {
    const far = plan(pointsOf(hipped, 1).map(([x, y]) => [x + 3_456_000, y + 5_700_000] as const), facesOf(hipped))
    const rise = 6 * Math.tan((20 * Math.PI) / 180)
    const { panels } = tables(far, over(far, (_, y) => (y === 5_700_006 ? rise : 0)))
    for (const slope of values(panels, 'slope_deg')) expect(slope).toBeCloseTo(20, 6)
  })
})
