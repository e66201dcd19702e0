/** Faces turned from panel to void and back: the plan as if it had been drawn so, and the brief's names with what they hold. */
import { describe, expect, test } from 'vitest'
import { drawnFaces, faceAt, planOfFaces } from '../../../src/plan/drawn-faces.ts'
import { voidCount, type Plan } from '../../../src/plan/plan.ts'
import { emptyBrief } from '../../../src/plan/project/brief.ts'
import type { At, Condition } from '../../../src/plan/project/condition.ts'
import { heldForce, heldNode, heldPlane } from '../../../src/plan/project/edits.ts'
import { projectOf, type Project } from '../../../src/plan/project/project-record.ts'
import { projectText } from '../../../src/plan/project/project-text.ts'
import { readProject } from '../../../src/plan/project/read-project.ts'
import { turnedFace } from '../../../src/plan/project/turned-face.ts'
import { grid, plan } from '../../make/plans.ts'

const reading = { marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, repairs: [], questions: [], leftOut: [], notices: [] }

function project(on: Plan, conditions: readonly Condition[] = [], target: Float64Array | null = null): Project {
  return projectOf({ ...reading, plan: on, heights: on.x.map((x, n) => x + 10 * on.y[n]!) }, { name: 'a.obj', sha256: null, brief: { ...emptyBrief, conditions }, target, leastSlope: null })
}

function turn(of: Project, x: number, y: number): { project: Project; released: readonly string[] } {
  const made = turnedFace(of, faceAt(of.faces, x, y))
  if (!made.ok) throw new Error(made.problem.message)
  return made.value
}

/** Where a named thing lies: a node's point, the middle of a panel or joint. */
function spotOf(on: Plan, name: string): string {
  const k = Number(name.slice(1)) - 1
  const nodes = name.startsWith('N') ? [k] : name.startsWith('J') ? [on.origin[2 * k]!, on.origin[2 * k + 1]!] : Array.from(on.corner.subarray(on.panelStart[k], on.panelStart[k + 1]))
  const mean = (values: Float64Array): string => (nodes.reduce((sum, n) => sum + values[n]!, 0) / nodes.length).toFixed(6)
  return `${name[0]} ${mean(on.x)} ${mean(on.y)}`
}

describe('faces', () => {
  const two = grid(5, 3, { voids: [[1, 1], [3, 1]] })
  test('of a plan with voids: panels, then each void as a face', () => {
    const faces = drawnFaces(two, null)
    expect(Array.from(faces.isVoid)).toEqual([...new Array<number>(13).fill(0), 1, 1])
    expect([faceAt(faces, 0.5, 0.5), faceAt(faces, 1.5, 1.5), faceAt(faces, 3.5, 1.5), faceAt(faces, 7, 7)]).toEqual([0, 13, 14, -1])
    const again = planOfFaces(faces)
    expect(again).toEqual({ ok: true, value: two })
  })
  test('turned: as if it had been drawn so', () => {
    const filled = turn(project(two), 1.5, 1.5).project.read.plan
    expect([filled.panelCount, voidCount(filled), filled.nodeCount]).toEqual([14, 1, two.nodeCount])
    const drawn = grid(5, 3, { voids: [[3, 1]] })
    expect(filled.jointCount).toBe(drawn.jointCount)
    const opened = turn(project(two), 2.5, 0.5).project.read.plan
    const pinched = grid(5, 3, { voids: [[1, 1], [3, 1], [2, 0]] })
    expect([opened.panelCount, opened.jointCount, voidCount(opened), [...opened.rimPasses].sort()])
      .toEqual([12, pinched.jointCount, voidCount(pinched), [...pinched.rimPasses].sort()])
  })
  test('turned twice it is the same project, byte for byte, also at a corner whose node goes away', () => {
    for (const [x, y] of [[1.5, 1.5], [2.5, 0.5], [0.5, 0.5], [4.5, 2.5]] as const) {
      const start = project(two, [heldPlane(3, 10, 90)])
      const once = turn(start, x, y).project
      expect(projectText(once)).not.toBe(projectText(start))
      const twice = turn(once, x, y).project
      expect(projectText(twice)).toBe(projectText(start))
      expect(twice.read).toEqual(start.read)
      // Through the file as well.
      const read = readProject(projectText(once), 'it')
      expect(read.ok && projectText(turn(read.value, x, y).project)).toBe(projectText(start))
    }
  })
  test('the drawing\'s heights stay with their points', () => {
    const { read } = turn(project(two), 0.5, 0.5).project
    expect(read.plan.nodeCount).toBe(two.nodeCount - 1)
    expect(Array.from(read.heights!)).toEqual(Array.from(read.plan.x, (x, n) => x + 10 * read.plan.y[n]!))
  })
  test('heights set by hand stay where their nodes stay', () => {
    const once = turn(project(two, [], two.x.map((x) => 2 * x)), 0.5, 0.5).project
    expect(Array.from(once.target!)).toEqual(Array.from(once.read.plan.x, (x) => 2 * x))
    const back = turn(once, 0.5, 0.5).project
    expect(Array.from(back.target!).filter(Number.isNaN)).toHaveLength(1)
  })
  test('a void round other panels is no panel, and the last panel no void', () => {
    const island = plan([[0, 0], [9, 0], [9, 9], [0, 9], [1, 1], [8, 1], [8, 8], [1, 8], [3, 3], [5, 3], [5, 5], [3, 5]],
      [[0, 1, 5, 4], [1, 2, 6, 5], [2, 3, 7, 6], [3, 0, 4, 7], [8, 9, 10, 11]])
    const of = project(island)
    expect(faceAt(of.faces, 2, 2)).toBe(5)
    expect(faceAt(of.faces, 4, 4)).toBe(4)
    expect(turnedFace(of, 5)).toMatchObject({ ok: false, problem: { code: 'panels-inside', where: { at: [3, 3] } } })
    expect(turnedFace(turn(of, 4, 4).project, 5).ok).toBe(true)
    expect(turnedFace(project(plan([[0, 0], [1, 0], [0, 1]], [[0, 1, 2]])), 0)).toMatchObject({ ok: false, problem: { code: 'no-panels' } })
  })
})

describe('names in the brief', () => {
  const on = grid(4, 3)
  const named = (condition: Condition): string[] => Object.values(condition.at as At).flatMap((list: unknown) => (Array.isArray(list) ? list.filter((spot) => typeof spot === 'string') : []))
  const all: Condition[] = [
    heldNode(12, 1), heldNode(0, 0), heldPlane(9, 12, 180), heldPlane(0, 3, 90), heldForce(16, -0.1), heldForce(0, 0.2),
    { name: 'three', soft: null, kind: 'level', at: { nodes: ['N1', 'N7', 'N20'] }, level: 0 },
    { name: 'pair', soft: null, kind: 'equal', at: { nodes: ['N1', 'N20'] } },
    { name: 'run', soft: null, kind: 'straight', at: { run: ['N1', 'N5', [4, 3]] } },
    { name: 'P12 and P1', soft: 2, kind: 'coplanar', at: { panels: ['P12', 'P1'] } },
    { name: 'void', soft: null, kind: 'equal', at: { rim: 'outer' } },
  ]
  test('go with what they stand for; what held only the face is released', () => {
    const before = project(on, all)
    // The first panel: N1 goes, P2 .. become P1 .., and the joints of P1 become rim.
    const { project: after, released } = turn(before, 0.5, 0.5)
    expect(released).toEqual(['height of N1', 'slope of P1', 'force of J1', 'pair'])
    const spots = (of: Project): string[][] => of.brief.conditions.map((condition) => named(condition).map((name) => spotOf(of.read.plan, name)))
    const gone = [spotOf(on, 'N1'), spotOf(on, 'P1')]
    const expected = spots({ ...before, brief: { ...before.brief, conditions: all.filter(({ name }) => !released.includes(name)) } })
    expect(spots(after)).toEqual(expected.map((list) => list.filter((spot) => !gone.includes(spot))))
    expect(after.brief.conditions.map(({ name }) => name)).toEqual(['height of N12', 'slope of P9', expect.stringMatching(/^force of J\d+$/), 'three', 'run', 'P11 and P1', 'void'])
    expect(after.brief.conditions[4]!.at).toEqual({ run: [[0, 0], 'N4', [4, 3]] })
    // All that is left is found on the new plan and goes back with the face.
    expect(turn(after, 0.5, 0.5).project.brief.conditions.map(({ name }) => name)).toEqual(['height of N13', 'slope of P10', 'force of J17', 'three', 'run', 'P12 and P1', 'void'])
  })
  test('in the brief\'s own unit', () => {
    const of = project(on, [{ name: 'run', soft: null, kind: 'straight', at: { run: ['N1', 'N5'] } }])
    const after = turn({ ...of, brief: { ...of.brief, unit: 'mm' } }, 0.5, 0.5).project
    expect(after.brief.conditions[0]!.at).toEqual({ run: [[0, 0], 'N4'] })
    const far = turn({ ...of, brief: { ...of.brief, unit: 'mm', conditions: [{ name: 'run', soft: null, kind: 'straight', at: { run: ['N20', 'N1'] } }] } }, 3.5, 2.5).project
    expect(far.brief.conditions[0]!.at).toEqual({ run: [[4000, 3000], 'N1'] })
  })
  test('a rim of the void that becomes a panel is no longer a place', () => {
    const holed = grid(3, 3, { voids: [[1, 1]] })
    const rim: Condition = { name: 'light', soft: null, kind: 'level', at: { rim: [1.5, 1.5] }, level: 0 }
    expect(turn(project(holed, [rim]), 1.5, 1.5).released).toEqual(['light'])
    expect(turn(project(holed, [rim]), 0.5, 0.5).released).toEqual([])
  })
})
