/**
 * Faces joined across edges that the file marks as invisible. DXF faces have at most four corners, so programs write a
 * panel of five or more as several faces and hide the edges between them; the panel is the union, and a hidden edge is
 * no joint. An edge that only one of its two faces hides is drawn by the other and stays. Where hidden edges remain on the
 * outside of a group, they were not meant so (some programs hide every edge of a surface), and the faces stay as they are.
 */
import type { Loops } from '../plan/drawing.ts'
import { Integers } from '../base/growing.ts'

/** Corners of a face, as numbers of places, and of the points they came from. */
interface Face {
  places: number[]
  points: number[]
  hidden: number[]
  readonly layer: number
}

/**
 * The loops with faces joined. `hidden` has, for each loop with a hidden edge, 1 at corner i where the edge from corner i
 * to the next is hidden; `place` gives points of the same coordinates the same number. A group whose union is no single
 * outline, or one that meets itself, stays as it is.
 */
export function joinedFaces(loops: Loops, hidden: ReadonlyMap<number, readonly number[]>, place: (point: number) => number): Loops {
  const faces = new Map<number, Face>()
  for (const [loop, marks] of hidden) {
    const points = [...loops.point.subarray(loops.start[loop], loops.start[loop + 1])]
    faces.set(loop, { points, places: points.map(place), hidden: [...marks], layer: loops.layer[loop] })
  }
  const neighbours = acrossHidden(faces)
  const replaced = new Map<number, readonly number[] | null>()
  const seen = new Set<number>()
  for (const first of faces.keys()) {
    if (seen.has(first)) continue
    const group = oriented(first, faces, neighbours, seen)
    const outline = group.length < 2 ? null : union(group.map((loop) => faces.get(loop) as Face))
    if (outline === null) continue
    for (const loop of group) replaced.set(loop, null)
    replaced.set(Math.min(...group), outline)
  }
  return replaced.size === 0 ? loops : withReplaced(loops, replaced)
}

/** Pairs of faces on one layer that hide the same edge, both ways; an edge that three hide pairs none. */
function acrossHidden(faces: ReadonlyMap<number, Face>): Map<number, number[]> {
  const byEdge = new Map<string, number[]>()
  for (const [loop, { places, hidden, layer }] of faces) {
    hidden.forEach((mark, i) => {
      if (mark === 0) return
      const [a, b] = [places[i], places[(i + 1) % places.length]]
      const key = `${layer} ${Math.min(a, b)} ${Math.max(a, b)}`
      const there = byEdge.get(key)
      if (there === undefined) byEdge.set(key, [loop])
      else there.push(loop)
    })
  }
  const neighbours = new Map<number, number[]>()
  for (const loops of byEdge.values()) {
    if (loops.length !== 2 || loops[0] === loops[1]) continue
    for (const [a, b] of [[loops[0], loops[1]], [loops[1], loops[0]]]) neighbours.set(a, [...(neighbours.get(a) ?? []), b])
  }
  return neighbours
}

/** The faces joined to the first by hidden edges, all made to run the same way round as it does. */
function oriented(first: number, faces: ReadonlyMap<number, Face>, neighbours: ReadonlyMap<number, number[]>, seen: Set<number>): number[] {
  const group = [first]
  seen.add(first)
  for (let at = 0; at < group.length; at += 1) {
    const face = faces.get(group[at]) as Face
    for (const loop of neighbours.get(group[at]) ?? []) {
      if (seen.has(loop)) continue
      seen.add(loop)
      group.push(loop)
      const other = faces.get(loop) as Face
      if (runsAlong(face, other)) reverse(other)
    }
  }
  return group
}

/** Whether the two run through a hidden edge of both in the same direction. */
function runsAlong(a: Face, b: Face): boolean {
  const edges = new Set(hiddenEdges(a))
  return hiddenEdges(b).some((edge) => edges.has(edge))
}

const hiddenEdges = ({ places, hidden }: Face): string[] =>
  places.flatMap((place, i) => (hidden[i] === 0 ? [] : [`${place} ${places[(i + 1) % places.length]}`]))

function reverse(face: Face): void {
  const n = face.places.length
  face.places.reverse()
  face.points.reverse()
  const before = [...face.hidden]
  face.hidden = before.map((_, j) => before[(2 * n - 2 - j) % n])
}

/** The outline of the group as points, or null when it is not one that meets each place once. */
function union(group: readonly Face[]): number[] | null {
  const ahead = new Map<string, { face: Face; i: number }>()
  for (const face of group) {
    face.places.forEach((place, i) => {
      if (face.hidden[i] === 1) ahead.set(`${place} ${face.places[(i + 1) % face.places.length]}`, { face, i })
    })
  }
  const mate = (face: Face, i: number): { face: Face; i: number } | undefined =>
    face.hidden[i] === 1 ? ahead.get(`${face.places[(i + 1) % face.places.length]} ${face.places[i]}`) : undefined
  const open = group.flatMap((face) => face.places.map((_, i) => ({ face, i }))).filter(({ face, i }) => mate(face, i) === undefined)
  if (open.length < 3 || open.some(({ face, i }) => face.hidden[i] === 1)) return null
  const outline: number[] = []
  const met = new Set<number>()
  let { face, i } = open[0]
  for (let guard = 0; guard < open.length; guard += 1) {
    if (met.has(face.places[i])) return null
    met.add(face.places[i])
    outline.push(face.points[i])
    i = (i + 1) % face.places.length
    // Turn about the corner, over all hidden edges, to the next one that is drawn.
    for (let other = mate(face, i), turns = 0; other !== undefined && turns <= 4 * group.length; other = mate(face, i), turns += 1) {
      face = other.face
      i = (other.i + 1) % face.places.length
    }
    if (face === open[0].face && i === open[0].i) return outline.length === open.length ? outline : null
  }
  return null
}

/** The loops with some of them replaced by an outline, or dropped (null), in their order. */
function withReplaced(loops: Loops, replaced: ReadonlyMap<number, readonly number[] | null>): Loops {
  const [start, point, layer, line, look] = [new Integers(), new Integers(), new Integers(), new Integers(), new Integers()]
  start.push(0)
  for (let loop = 0; loop < loops.layer.length; loop += 1) {
    const outline = replaced.get(loop)
    if (outline === null) continue
    for (const p of outline ?? loops.point.subarray(loops.start[loop], loops.start[loop + 1])) point.push(p)
    start.push(point.length)
    layer.push(loops.layer[loop])
    line.push(loops.line[loop])
    if (loops.look !== undefined) look.push(loops.look[loop])
  }
  return { start: start.array(), point: point.array(), layer: layer.array(), line: line.array(), ...(loops.look === undefined ? {} : { look: look.array() }) }
}
