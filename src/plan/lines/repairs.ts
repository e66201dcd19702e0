/** What was done to a drawing's lines, in sentences with figures and places. */
import type { Repair } from '../../base/repair.ts'
import type { Traced } from './traced.ts'
import { counted, inMillimetres, Places } from './words.ts'
import type { ClosedOutlines } from './outlines-closed.ts'
import type { OutlineFaces } from './outlines-faces.ts'
import type { Trimmed } from './trace-trim.ts'

/** Repairs where every outline became a panel. */
export function faceRepairs(traced: Traced, { repeats, collapsed, panels }: OutlineFaces, outlines: ClosedOutlines): Repair[] {
  const mm = (length: number): string => inMillimetres(length * traced.mmPerUnit)
  const repairs: Repair[] = []
  const joined = joinedPlaces(traced)
  if (joined.count > 0) {
    repairs.push(joined.repair('joined', `Corners that miss each other by up to ${mm(joined.largest)} are one node at ${counted(joined.count, 'place', 'places')}.`))
  }
  const { lines, frame } = traced
  const off = new Places()
  lines.touchNode.forEach((node, k) => { if (lines.touchGap[k] > frame.silent) off.note(...traced.at(node), lines.touchGap[k]) })
  if (off.count > 0) {
    repairs.push(off.repair('split', `${counted(off.count, 'corner lies', 'corners lie')} up to ${mm(off.largest)} off a neighbour's edge, which now passes through ${off.count === 1 ? 'it' : 'them'}.`))
  }
  if (repeats.count > 0) {
    repairs.push(repeats.repair('repeat', `${counted(repeats.count, 'panel is', 'panels are')} drawn twice; the first drawn is taken.`))
  }
  if (collapsed.count > 0) repairs.push(tinyFaces(collapsed, mm(collapsed.largest)))
  const unused = unusedLines(traced, outlines, panels)
  if (unused.count > 0) {
    repairs.push(unused.repair('left-out', `${counted(unused.count, 'line lies', 'lines lie')} outside the closed outlines and ${unused.count === 1 ? 'is' : 'are'} not used: the outlines are the panels.`))
  }
  return repairs
}

/** Repairs where the panels were traced from lines. */
export function lineRepairs(traced: Traced, { loose, slivers }: Trimmed): Repair[] {
  const { lines, frame, points } = traced
  const mm = (length: number): string => inMillimetres(length * traced.mmPerUnit)
  const repairs: Repair[] = []
  const joined = joinedPlaces(traced)
  lines.touchNode.forEach((node, k) => { if (lines.touchGap[k] > frame.silent) joined.note(...traced.at(node), lines.touchGap[k]) })
  if (joined.count > 0) {
    repairs.push(joined.repair('joined', `Line ends that miss by up to ${mm(joined.largest)} are joined at ${counted(joined.count, 'place', 'places')}.`))
  }
  const split = new Places()
  const given = points.pointOf.length
  for (let node = given; node < lines.x.length; node += 1) split.note(...traced.at(node))
  const crossed = split.count
  for (const node of lines.touchNode) split.note(...traced.at(node))
  if (split.count > 0) {
    const touched = split.count - crossed
    const where = [
      ...(crossed > 0 ? [counted(crossed, 'crossing', 'crossings')] : []),
      ...(touched > 0 ? [`${counted(touched, 'point', 'points')} where one line ends on another`] : []),
    ]
    repairs.push(split.repair('split', `Lines are divided at ${where.join(' and ')}.`))
  }
  const repeats = repeatedLines(traced)
  if (repeats.count > 0) {
    repairs.push(repeats.repair('repeat', `${counted(repeats.count, 'line lies', 'lines lie')} wholly or partly on another; ${repeats.count === 1 ? 'it counts' : 'they count'} once.`))
  }
  if (loose.count > 0) {
    repairs.push(loose.repair('loose-end', `${counted(loose.count, 'loose line or end', 'loose lines or ends')} that bound no panel ${loose.count === 1 ? 'is' : 'are'} left out, up to ${mm(loose.largest)} long.`))
  }
  if (slivers.count > 0) repairs.push(tinyFaces(slivers, mm(slivers.largest)))
  return repairs
}

function tinyFaces(places: Places, width: string): Repair {
  return places.repair('tiny-face', `${counted(places.count, 'face', 'faces')} narrower than the snap distance (up to ${width}) ${places.count === 1 ? 'is' : 'are'} dropped.`)
}

/** A copy, so that more can be added. */
function joinedPlaces({ points, frame }: Traced): Places {
  const places = new Places()
  for (const [x, y] of points.joined.where) places.note(x + frame.centreX, y + frame.centreY)
  places.count = points.joined.count
  places.largest = points.joined.largest
  return places
}

/** Open lines that lie on an earlier line or on an outline, at least in part. */
function repeatedLines({ lines, firstSegment, at }: Traced): Places {
  const { chainStart, chain, a } = lines
  const covered = new Uint8Array(a.length)
  for (let k = 0; k < chainStart[firstSegment]; k += 1) covered[chain[k] >> 1] = 1
  const places = new Places()
  for (let i = firstSegment; i + 1 < chainStart.length; i += 1) {
    let on = -1
    for (let k = chainStart[i]; k < chainStart[i + 1]; k += 1) {
      if (covered[chain[k] >> 1] === 1 && on < 0) on = chain[k] >> 1
      covered[chain[k] >> 1] = 1
    }
    if (on >= 0) places.note(...at(a[on]))
  }
  return places
}

/** Open lines that run at least in part along no outline. */
function unusedLines({ lines, firstSegment, at }: Traced, outlines: ClosedOutlines, panels: Int32Array): Places {
  const { chainStart, chain, a } = lines
  const places = new Places()
  if (firstSegment + 1 >= chainStart.length) return places
  const used = new Uint8Array(a.length)
  for (const panel of panels) for (let k = outlines.start[panel]; k < outlines.start[panel + 1]; k += 1) used[outlines.half[k] >> 1] = 1
  for (let i = firstSegment; i + 1 < chainStart.length; i += 1) {
    for (let k = chainStart[i]; k < chainStart[i + 1]; k += 1) {
      if (used[chain[k] >> 1] === 1) continue
      places.note(...at(a[chain[k] >> 1]))
      break
    }
  }
  return places
}
