/**
 * A wrong unit seen by line ends that do not meet: the distance within which ends are joined is a millimetre, so that in a
 * file of millimetres whose header says metres ends off by 0.3 mm stay apart, and what is read then is no plan to judge
 * lengths by. Where another unit lets nearly all of them meet, at lengths that panels have, the unit is asked.
 */
import { conversion, metres, units, type Unit } from '../../base/length.ts'
import type { Question, Repair } from '../../base/repair.ts'
import type { Result } from '../../base/result.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing } from '../drawing.ts'
import { planFromDrawing } from './from-drawing.ts'
import { counted } from '../lines/words.ts'
import { leaves, takes } from './reduced.ts'
import type { Plan } from '../plan.ts'
import type { ReadOptions, ReadPlan } from '../read-plan.ts'
import { longest_m, shortest_m } from '../unit-question.ts'

/** Share of the lines that may end loose before the unit is doubted; a drawing has fewer. */
const mostLoose = 0.05

/** .. and the share of them that may stay loose in the other unit: mitres that are drawn too short. */
const fewer = 0.25

/** What was read, in the unit in which ends meet where the user takes it; else with the question. */
export function* unitByEnds(drawing: Drawing, read: Result<ReadPlan>, unit: Unit, options: ReadOptions): Steps<Result<ReadPlan>> {
  const loose = read.ok ? looseEnds(read.value) : Infinity
  const lines = drawing.segmentLayer.length
  // What is too much to trace is so in every unit.
  if (!read.ok && read.problem.code !== 'no-panels') return read
  if (!(loose > mostLoose * lines) || lines === 0 || leaves(options, 'unit') || !(usualSegment(drawing, unit) > longest_m) || (read.ok && read.value.questions.some(({ code }) => code === 'unit'))) return read
  for (const other of units) {
    if (metres[other] >= metres[unit]) continue
    const again = yield* planFromDrawing(drawing, { ...options, unit: other })
    if (!again.ok || looseEnds(again.value) > Math.min(loose, lines) * fewer || !isPlausible(again.value.plan)) continue
    const meets = read.ok ? `${counted(loose, 'line end meets', 'line ends meet')} nothing` : 'the lines make no plan'
    const taken = takes(options, 'unit')
    const repair: Repair = { code: 'unit', state: taken ? 'accepted' : 'proposed', count: 1, message: `With the numbers in ${unit} ${meets}; in ${other} they are a plan of ${counted(again.value.plan.panelCount, 'panel', 'panels')}.`, where: [] }
    if (taken) return { ok: true, value: { ...again.value, repairs: [repair, ...again.value.repairs] } }
    const question: Question = { code: 'unit', message: `${repair.message} Which is it?`, options: [`--unit ${other}`, `--unit ${unit}`] }
    const shown = read.ok ? read.value : again.value
    return { ok: true, value: { ...shown, repairs: [repair, ...shown.repairs], questions: [question, ...shown.questions] } }
  }
  return read
}

const looseEnds = ({ repairs }: ReadPlan): number => repairs.reduce((sum, { code, count }) => sum + (code === 'loose-end' ? count : 0), 0)

/** The middle length of a plan's edges in metres. */
function usualEdge({ x, y, origin, edgeCount, unit }: Plan): number {
  const lengths = new Float64Array(edgeCount)
  for (let e = 0; e < edgeCount; e += 1) lengths[e] = Math.hypot(x[origin[2 * e]] - x[origin[2 * e + 1]], y[origin[2 * e]] - y[origin[2 * e + 1]])
  return lengths.sort()[edgeCount >> 1] * conversion(unit, 'm')
}

/** The middle length of a drawing's lines in metres, taken in `unit`; NaN without lines. */
function usualSegment({ points, segments }: Drawing, unit: Unit): number {
  const lengths = new Float64Array(segments.length >> 1)
  for (let i = 0; i < lengths.length; i += 1) {
    const a = 3 * segments[2 * i], b = 3 * segments[2 * i + 1]
    lengths[i] = Math.hypot(points[a] - points[b], points[a + 1] - points[b + 1])
  }
  return lengths.sort()[lengths.length >> 1] * conversion(unit, 'm')
}

const isPlausible = (plan: Plan): boolean => usualEdge(plan) >= shortest_m && usualEdge(plan) <= longest_m
