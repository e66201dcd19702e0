/** A part of a drawing: some of its lines, with what is left out counted by kind and layer. */
import type { LeftOut } from '../../base/repair.ts'
import type { Drawing, Loops } from '../drawing.ts'

/** 1 for what stays. */
export interface Kept {
  readonly segments: Uint8Array
  readonly outlines: Uint8Array
  readonly holes: Uint8Array
}

export function all({ segmentLayer, outlines, holes }: Drawing): Kept {
  return { segments: new Uint8Array(segmentLayer.length).fill(1), outlines: new Uint8Array(outlines.layer.length).fill(1), holes: new Uint8Array(holes.layer.length).fill(1) }
}

export function isEmpty({ segments, outlines }: Kept): boolean {
  return !segments.includes(1) && !outlines.includes(1)
}

export function isWhole({ segments, outlines, holes }: Kept): boolean {
  return !segments.includes(0) && !outlines.includes(0) && !holes.includes(0)
}

/** The drawing with what is kept; its points keep their numbers. */
export function part(drawing: Drawing, kept: Kept): Drawing {
  if (isWhole(kept)) return drawing
  const { segments, segmentLayer, segmentLine, segmentLook } = drawing
  const of = (list: Int32Array): Int32Array => list.filter((_, i) => kept.segments[i] === 1)
  return {
    ...drawing,
    segments: segments.filter((_, k) => kept.segments[k >> 1] === 1), segmentLayer: of(segmentLayer), segmentLine: of(segmentLine),
    ...(segmentLook === undefined ? {} : { segmentLook: of(segmentLook) }),
    outlines: loops(drawing.outlines, kept.outlines), holes: loops(drawing.holes, kept.holes),
  }
}

function loops({ start, point, layer, line, look }: Loops, kept: Uint8Array): Loops {
  const own = Array.from(kept.keys()).filter((i) => kept[i] === 1)
  const newStart = new Int32Array(own.length + 1)
  own.forEach((i, k) => { newStart[k + 1] = newStart[k] + start[i + 1] - start[i] })
  const points = new Int32Array(newStart[own.length])
  own.forEach((i, k) => { points.set(point.subarray(start[i], start[i + 1]), newStart[k]) })
  const of = (list: Int32Array): Int32Array => Int32Array.from(own, (i) => list[i])
  return { start: newStart, point: points, layer: of(layer), line: of(line), ...(look === undefined ? {} : { look: of(look) }) }
}

/** The drawing with the points that its lines use and no others. */
export function compact(drawing: Drawing): Drawing {
  const { points, hasHeight, segments, outlines, holes } = drawing
  const numberOf = new Int32Array(points.length / 3).fill(-1)
  let count = 0
  for (const list of [outlines.point, holes.point, segments]) for (const p of list) if (numberOf[p] < 0) numberOf[p] = count++
  if (2 * count > numberOf.length) return drawing
  const own = new Float64Array(3 * count), heights = new Uint8Array(count)
  for (let p = 0; p < numberOf.length; p += 1) {
    if (numberOf[p] < 0) continue
    for (let k = 0; k < 3; k += 1) own[3 * numberOf[p] + k] = points[3 * p + k]
    heights[numberOf[p]] = hasHeight[p]
  }
  const renumbered = (list: Int32Array): Int32Array => list.map((p) => numberOf[p])
  return {
    ...drawing, points: own, hasHeight: heights, segments: renumbered(segments), marks: new Int32Array(0), markLayer: new Int32Array(0), circles: [],
    outlines: { ...outlines, point: renumbered(outlines.point) }, holes: { ...holes, point: renumbered(holes.point) },
  }
}

/** Entities that are not kept, by kind and layer, `why` after their kind. An entity is what begins on one line of the file. */
export function leftOutOf(drawing: Drawing, kept: Kept, why: string): LeftOut[] {
  const { segmentLayer, segmentLine, segmentLook, outlines, holes, layers, looks } = drawing
  const counts = new Map<string, { kind: string; layer: string; count: number }>()
  const seen = new Set<string>()
  const note = (look: number | undefined, plainly: string, layer: number, line: number, isLine: boolean): void => {
    // Blocks put in place several times have their entities on the same lines: pieces of a polyline follow one another.
    const entity = `${line} ${look ?? -1} ${layer}`
    if (isLine && line > 0 && seen.has(entity)) return
    if (isLine) {
      seen.clear()
      seen.add(entity)
    }
    const kind = `${look === undefined ? plainly : (looks?.[look]?.kind ?? plainly)}, ${why}`
    const key = `${kind}\n${layer}`
    const known = counts.get(key)
    if (known === undefined) counts.set(key, { kind, layer: layers[layer] ?? '', count: 1 })
    else known.count += 1
  }
  for (let i = 0; i < segmentLayer.length; i += 1) if (kept.segments[i] === 0) note(segmentLook?.[i], 'line', segmentLayer[i], segmentLine[i], true)
  for (const [list, keeps] of [[outlines, kept.outlines], [holes, kept.holes]] as const) {
    for (let i = 0; i < list.layer.length; i += 1) if (keeps[i] === 0) note(list.look?.[i], 'outline', list.layer[i], list.line[i], false)
  }
  return [...counts.values()]
}
