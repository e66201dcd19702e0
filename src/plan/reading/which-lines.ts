/**
 * A drawing as offices send it made into a plan: which of its lines are the panels, what its axes are, and then the plan
 * of the lines chosen. What the user states is taken as it is; where nothing is stated a guess is made, and said.
 */
import type { LeftOut, Question, Repair } from '../../base/repair.ts'
import { pointWithin_mm, snap_mm as defaultTolerance_mm } from '../../base/geometry/tolerance.ts'
import { conversion, metres } from '../../base/length.ts'
import { ok, type Result } from '../../base/result.ts'
import type { Steps } from '../../base/steps.ts'
import type { Drawing, DrawnText } from '../drawing.ts'
import { drawnLevels, type DrawnLevels } from './levels-drawn.ts'
import { matchedLevels } from './levels-matched.ts'
import { planFromDrawing } from './from-drawing.ts'
import { chordsKept } from './which-chords.ts'
import { leaves, takes } from './reduced.ts'
import type { ReadOptions, ReadPlan } from '../read-plan.ts'
import { unitByEnds } from './unit-by-ends.ts'
import { unitOfDrawing } from '../unit-of-drawing.ts'
import { drawnAxes, type DrawnAxes } from './axes-drawn.ts'
import { figuresGuess, layersGuess, type Guess, type Measuring } from './which-guess.ts'
import { mostlyLoose } from './which-loose.ts'
import { isEmpty, leftOutOf, part } from './which-part.ts'
import { storeysGuess } from './which-storey.ts'
import { statedLines } from './which-stated.ts'

/** Formats whose faces are what they say: a model has no title block. */
const models: readonly string[] = ['OBJ', 'GeoJSON']

/** Problems that no choice of figures mends: what is too much to cut is too much to tell apart. */
const tooMuch: readonly string[] = ['too-many-crossings', 'too-many-lines']

/** The plan of the lines that are its panels; see `planFromDrawing` for all else. */
export function* planOfLines(given: Drawing, options: ReadOptions): Steps<Result<ReadPlan>> {
  const unit = unitOfDrawing(given, options)
  if (!unit.ok) return unit
  const { factor } = unit.value
  const how: Measuring = { unit: unit.value, snap_mm: options.snap_mm, tolerance_mm: options.planTolerance_mm ?? defaultTolerance_mm, metres: metres[unit.value.unit] }
  const said: Said = { leftOut: [...given.leftOut], repairs: [], questions: [], notices: [] }

  yield { stage: 'Looking for axes', done: 0 }
  const axes = drawnAxes(given)
  yield { stage: 'Looking for levels', done: 0 }
  let drawing = axes === null ? given : withoutAxes(given, axes, said)
  const levels = drawnLevels(drawing, factor, unit.value.unit)
  drawing = part(drawing, levels.kept)
  yield { stage: 'Choosing the lines', done: 0 }
  const found: Found = { axes, levels, options, factor }
  const stated = statedLines(drawing, options, factor)
  if (!stated.ok) return stated
  if (stated.value !== null) {
    said.leftOut.push(...leftOutOf(drawing, stated.value, 'not chosen'))
    drawing = part(drawing, stated.value)
  }
  const isModel = models.includes(given.format)
  const storey = isModel || (options.between ?? null) !== null || leaves(options, 'which-lines') ? null : yield* storeysGuess(drawing, how)
  if (storey !== null) {
    say(storey, drawing, options, said)
    drawing = part(drawing, storey.kept)
  }
  const isFree = stated.value === null && !isModel
  const layers = isFree && options.layers === undefined && !leaves(options, 'which-lines') ? yield* layersGuess(drawing, how) : null
  const before = drawing
  if (layers !== null && (!layers.isOpen || takes(options, 'which-lines'))) drawing = part(drawing, layers.kept)
  let read = yield* planFromDrawing(asRead(drawing, given), options)
  const isAsked = layers !== null && layers.isOpen && !takes(options, 'which-lines')
  if (isAsked && !read.ok) {
    // All lines together are no plan, so that the question stands beside the best guess.
    drawing = part(before, layers.kept)
    read = yield* planFromDrawing(asRead(drawing, given), options)
  }
  if (isFree && !leaves(options, 'which-lines') && !(isAsked && read.ok) && (read.ok ? read.value.plan.partCount > 1 : !tooMuch.includes(read.problem.code))) {
    const figures = yield* figuresGuess(drawing, how)
    if (figures !== null && !isEmpty(figures.kept)) {
      const isTaken = !figures.isOpen || takes(options, 'which-lines')
      const again = yield* planFromDrawing(asRead(part(drawing, figures.kept), given), options)
      if (again.ok) {
        if (!isAsked) say(figures, drawing, options, said)
        if (isTaken || !read.ok) read = again
      }
    }
  }
  if (!read.ok && drawing !== before) {
    // A guess that gives no plan is none.
    const whole = yield* planFromDrawing(asRead(before, given), options)
    if (whole.ok) return ok(finished(whole.value, said, found))
  }
  if (unit.value.statedBy !== 'user' && !given.onPaper) read = yield* unitByEnds(asRead(drawing, given), read, unit.value.unit, options)
  if (layers !== null) say(layers, before, options, said)
  if (read.ok && isFree && options.snap_mm === null && read.value.questions.length + said.questions.length === 0 && !leaves(options, 'which-lines') && !takes(options, 'which-lines')) {
    const loose = mostlyLoose(asRead(drawing, given), read.value)
    if (loose !== null) {
      said.repairs.push(loose.repair)
      said.questions.push(loose.question)
    }
  }
  return read.ok ? ok(finished(read.value, said, found)) : read
}

/** The lines chosen, with what was said of reading them alone; what was left out of the whole is said apart. */
function asRead(drawing: Drawing, given: Drawing): Drawing {
  return { ...drawing, leftOut: [], repairs: drawing.segments.length === given.segments.length && drawing.outlines.point.length === given.outlines.point.length ? given.repairs : chordsKept(drawing) }
}

interface Said {
  readonly leftOut: LeftOut[]
  readonly repairs: Repair[]
  readonly questions: Question[]
  readonly notices: string[]
}

/** The guess as a repair, and as a question where it is open and nobody has answered. */
function say({ kept, isOpen, words, options: ways, why, where }: Guess, drawing: Drawing, options: ReadOptions, said: Said): void {
  const isTaken = takes(options, 'which-lines')
  const left = leftOutOf(drawing, kept, why)
  const count = left.reduce((sum, each) => sum + each.count, 0)
  const sentence = `${words.charAt(0).toUpperCase()}${words.slice(1)}.`
  if (!isOpen || isTaken) said.leftOut.push(...left)
  said.repairs.push({ code: 'which-lines', state: !isOpen ? 'applied' : isTaken ? 'accepted' : 'proposed', count, message: isOpen && !isTaken ? sentence.replace(/^(\S+) (.*?) (is|are) read:/, '$1 $2 would be read:') : sentence, where })
  if (!isOpen || isTaken) return
  const message = `Which lines are the panels? By their looks ${words.replace(/ (is|are) read:/, ':')}.`
  said.questions.push({ code: 'which-lines', message, options: [...ways, '--leave which-lines'] })
}

/** The drawing without the lines of its axes; their names are no longer left out. */
function withoutAxes(drawing: Drawing, axes: DrawnAxes, said: Said): Drawing {
  notLeftOut(axes.names, said.leftOut)
  said.notices.push(`${axes.words}; their lines bound no panels.`)
  const rest = part(drawing, axes.kept)
  // Where the joints are drawn on nothing but the axes there is no plan without them.
  return isEmpty(axes.kept) ? drawing : rest
}

/** Words that are taken after all. */
function notLeftOut(texts: readonly DrawnText[], leftOut: LeftOut[]): void {
  for (const { kind, layer } of texts) {
    const k = leftOut.findIndex((each) => each.kind === kind && each.layer.toLowerCase() === layer.toLowerCase())
    if (k < 0) continue
    const { count } = leftOut[k]
    if (count > 1) leftOut[k] = { ...leftOut[k], count: count - 1 }
    else leftOut.splice(k, 1)
  }
}

interface Found {
  readonly axes: DrawnAxes | null
  readonly levels: DrawnLevels
  readonly options: ReadOptions
  /** From the drawing's numbers to the plan's. */
  readonly factor: number
}

function finished(read: ReadPlan, said: Said, { axes, levels, options, factor }: Found): ReadPlan {
  const scaled = ([x, y]: readonly [number, number]): [number, number] => [x * factor, y * factor]
  const mm = conversion(read.plan.unit, 'mm')
  const matched = matchedLevels(levels, read.plan, (options.levelsWithin_mm ?? pointWithin_mm) / mm, mm, options)
  if (takes(options, 'levels')) notLeftOut(levels.words.map(({ text }) => text), said.leftOut)
  return {
    ...read,
    repairs: [...said.repairs, ...read.repairs, ...matched.repairs],
    // What else there is to ask is about lines that may not be the ones.
    questions: said.questions.length > 0 ? said.questions : read.questions,
    leftOut: [...said.leftOut, ...read.leftOut], notices: [...said.notices, ...read.notices],
    ...(axes === null ? {} : { axes: axes.axes.map(({ name, from, to }) => ({ name, from: scaled(from), to: scaled(to) })) }),
    ...(matched.levels.length === 0 ? {} : { levels: matched.levels }),
  }
}
