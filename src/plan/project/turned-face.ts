/**
 * A bounded face turned from panel to void or back. Panels, nodes and joints are named by their order, so the names after
 * it move: those in the brief go with what they stand for.
 */
import { conversion } from '../../base/length.ts'
import { fail, ok, type Result } from '../../base/result.ts'
import { faceAt, isInFace, nodePoints, turned, type DrawnFaces } from '../drawn-faces.ts'
import { indexOfName, jointName, nodeName, panelName } from '../names.ts'
import type { Plan } from '../plan.ts'
import type { At, Condition, Point, Spot } from './condition.ts'
import { atNodes, atPoints, readFaces, type Project } from './project-record.ts'

export interface TurnedFace {
  readonly project: Project
  /** Names of conditions that went with what they held. */
  readonly released: readonly string[]
}

/**
 * The project with a face (by its number in `faces`, see `faceAt`) turned. Heights set by hand stay where their nodes
 * stay. Fails as `turned` and `planFromFaces` do.
 */
export function turnedFace(project: Project, face: number): Result<TurnedFace> {
  const faces = turned(project.faces, face)
  if (!faces.ok) return faces
  const read = readFaces(faces.value, project.read)
  if (!read.ok) return read
  const moved = mover(project, faces.value, read.value.plan, face)
  const conditions: Condition[] = []
  const released: string[] = []
  for (const condition of project.brief.conditions) {
    const next = moved(condition)
    if (next === null) released.push(condition.name)
    else conditions.push({ ...next, name: freeName(next.name, conditions) })
  }
  const target = atPoints(project.target, nodePoints(project.faces), faces.value.x.length)
  return ok({
    project: { ...project, faces: faces.value, read: read.value, brief: { ...project.brief, conditions }, target: atNodes(target, nodePoints(faces.value)) },
    released,
  })
}

/**
 * The project with a void at each of these points, in the plan's unit; where one is already nothing changes. Fails with
 * "void-nowhere" for a point beside the plan, else as `turnedFace` does.
 */
export function withVoids(project: Project, points: readonly Point[]): Result<Project> {
  let now = project
  for (const [x, y] of points) {
    const { faces } = now
    const face = faceAt(faces, x, y)
    if (face < 0 && isBeside(faces, x, y)) return fail('void-nowhere', 'the void point lies in no bounded region', { at: [x, y] }, 'put it inside the void, clear of its lines')
    // A region that touches the outside in a node is a void, and no face.
    if (face < 0 || faces.isVoid[face] === 1) continue
    const next = turnedFace(now, face)
    if (!next.ok) return next
    now = next.value.project
  }
  return ok(now)
}

function isBeside({ x, y }: DrawnFaces, px: number, py: number): boolean {
  const within = (values: Float64Array, at: number): boolean => values.some((value) => value <= at) && values.some((value) => value >= at)
  return !within(x, px) || !within(y, py)
}

type Letter = 'N' | 'P' | 'J'

/** The condition under the new names, null when nothing is left of what it held. */
function mover(project: Project, faces: DrawnFaces, plan: Plan, face: number): (condition: Condition) => Condition | null {
  const old = project.read.plan
  const oldPoint = nodePoints(project.faces)
  const newNode = new Int32Array(faces.x.length).fill(-1)
  nodePoints(faces).forEach((point, node) => (newNode[point] = node))
  const panels = (all: DrawnFaces): number[] => Array.from(all.isVoid.keys()).filter((f) => all.isVoid[f] === 0)
  const oldFace = panels(project.faces)
  const newPanel = new Map(panels(faces).map((f, panel) => [f, panel]))
  const newJoint = new Map(Array.from({ length: plan.jointCount }, (_, joint) => [`${plan.origin[2 * joint]} ${plan.origin[2 * joint + 1]}`, joint]))

  const node = (index: number): number => newNode[oldPoint[index]]
  const panel = (index: number): number => newPanel.get(oldFace[index]) ?? -1
  const joint = (index: number): number => {
    const ends = [node(old.origin[2 * index]), node(old.origin[2 * index + 1])].sort((a, b) => a - b)
    return newJoint.get(ends.join(' ')) ?? -1
  }
  /** The new name of a named thing, null when it is gone. */
  const rename = (name: string, letter: Letter): string | null => {
    const index = indexOfName(name, letter)
    // A name of nothing stays one, to be refused where it is used.
    if (index < 0 || index >= { N: old.nodeCount, P: old.panelCount, J: old.jointCount }[letter]) return name
    const next = { N: node, P: panel, J: joint }[letter](index)
    return next < 0 ? null : { N: nodeName, P: panelName, J: jointName }[letter](next)
  }
  const kept = (spots: readonly Spot[], letter: Letter): Spot[] =>
    spots.flatMap((spot): Spot[] => {
      const next = typeof spot === 'string' ? rename(spot, letter) : spot
      return next === null ? [] : [next]
    })

  const factor = conversion(faces.unit, project.brief.unit ?? faces.unit)
  const place = (at: At): At | null => {
    if ('run' in at) {
      // A run is a line: where its node is gone, the node's point says the same.
      const along = (name: string): Spot => {
        const index = indexOfName(name, 'N')
        const point: Point = [old.x[index] * factor, old.y[index] * factor]
        return rename(name, 'N') ?? point
      }
      return { run: at.run.map((spot) => (typeof spot === 'string' ? along(spot) : spot)) }
    }
    if ('rim' in at) return at.rim !== 'outer' && isInFace(faces, face, at.rim[0] / factor, at.rim[1] / factor) ? null : at
    if ('nodes' in at) return { ...at, nodes: kept(at.nodes, 'N') }
    if ('joints' in at) return { joints: kept(at.joints, 'J') }
    return at.panels === 'all' ? at : { panels: kept(at.panels, 'P') }
  }
  return (condition) => {
    const at = place(condition.at)
    const needed = condition.kind === 'equal' || condition.kind === 'profile' ? 2 : 1
    return at === null || spotCount(at) < needed ? null : { ...condition, name: nameAfter(condition, rename), at } as Condition
  }
}

/** How many places are named; a rim counts as many. */
function spotCount(at: At): number {
  if ('rim' in at || ('panels' in at && at.panels === 'all')) return Infinity
  return Object.values(at).reduce((sum: number, spots: unknown) => sum + (Array.isArray(spots) ? spots.length : 0), 0)
}

/** A name that says what the condition holds ("height of N5") goes on saying it. */
function nameAfter({ name, at }: Condition, rename: (name: string, letter: Letter) => string | null): string {
  const spots = Object.values(at).flatMap((spots: unknown) => (Array.isArray(spots) ? spots.filter((spot) => typeof spot === 'string') : []))
  return name.replace(/\b([NPJ])[1-9]\d*\b/g, (word, letter: Letter) => (spots.includes(word) ? rename(word, letter) ?? word : word))
}

/** The name, numbered where another condition has come to have it. */
function freeName(name: string, conditions: readonly Condition[]): string {
  let free = name
  for (let number = 2; conditions.some((other) => other.name === free); number += 1) free = `${name} ${number}`
  return free
}
