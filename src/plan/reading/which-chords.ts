/** Repairs of reading, of the lines that are chosen only: curves that are not read became no chords of the plan. */
import type { Repair } from '../../base/repair.ts'
import type { Drawing } from '../drawing.ts'
import { counted } from '../lines/words.ts'

/** Every place of a repair "chords" is a point on its curve, as the lines have it. */
export function chordsKept({ points, segments, outlines, holes, repairs }: Drawing): Repair[] {
  const key = (x: number, y: number): string => `${x} ${y}`
  const used = new Set<string>()
  if (repairs.some(({ code }) => code === 'chords')) {
    for (const list of [segments, outlines.point, holes.point]) for (const p of list) used.add(key(points[3 * p], points[3 * p + 1]))
  }
  return repairs.flatMap((repair): Repair[] => {
    if (repair.code !== 'chords') return [repair]
    const where = repair.where.filter(([x, y]) => used.has(key(x, y)))
    if (where.length === repair.where.length) return [repair]
    if (where.length === 0) return []
    return [{ ...repair, count: where.length, where, message: repair.message.replace(/^.* became \d+ chords/, `Curves of ${counted(where.length, 'entity', 'entities')} became chords`) }]
  })
}
