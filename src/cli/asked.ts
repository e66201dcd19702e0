/** From the words of a command line to what the job asks for: every value read, every further file opened. */
import nodeFs from 'node:fs'
import { proposalCodes } from '../base/repair.ts'
import { fail, ok, placed, type Result } from '../base/result.ts'
import { mostDecimals } from '../base/decimal.ts'
import { csvStyles } from '../formats/write-csv.ts'
import { decodedText } from '../formats/text-encoding.ts'
import type { Source } from '../formats/format.ts'
import type { Request } from '../job/request.ts'
import { shapes } from '../plan/project/brief.ts'
import { keptPatterns } from '../plan/project/keep-options.ts'
import { noOptions, type Options } from '../plan/project/options.ts'
import type { Arguments } from './arguments.ts'
import { readInput } from './read-input.ts'
import { typedCount, typedDegrees, typedLength, typedMillimetres, typedPoint, typedColour, typedInside, typedScale, typedScaleFrom, typedUnit, typedBetween, typedWindow, typedWord } from './typed-values.ts'

/** A request without its plan: the same for every plan of the run. */
export type Asked = Omit<Request, 'source'>

/** Options of this run that no answer depends on: they are not recorded. */
const notRecorded: readonly string[] = ['out', 'overwrite', 'at-once', 'json', 'quiet', 'help']

/** Reads all values; files that options name are read too. */
export async function asked(args: Arguments): Promise<Result<Asked>> {
  const { values } = args
  const typed = typedOptions(values)
  if (!typed.ok) return typed
  const target = await targetFrom(one(values, 'target'))
  if (!target.ok) return target
  const levels = await levelsFrom(one(values, 'levels'))
  if (!levels.ok) return levels
  const brief = await briefFrom(one(values, 'brief'))
  if (!brief.ok) return brief
  return ok({
    command: args.command,
    options: { ...typed.value, target: target.value },
    brief: brief.value,
    levels: levels.value,
    given: given(args),
  })
}

const one = (values: Arguments['values'], name: string): string | null => values.get(name)?.[0] ?? null

function typedOptions(values: Arguments['values']): Result<Options> {
  const problems: Extract<Result<never>, { ok: false }>[] = []
  /** The option's value read by `read`; null where it was not given. */
  const take = <T>(name: string, read: (text: string, option: string) => Result<T>): T | null => {
    const text = one(values, name)
    if (text === null) return null
    const value = read(text, `--${name}`)
    if (value.ok) return value.value
    problems.push(value)
    return null
  }
  const codes = (name: string): string[] => (values.get(name) ?? []).flatMap((text) => {
    const code = typedWord(text, [...proposalCodes, 'all'], `--${name}`)
    if (!code.ok) problems.push(code)
    return code.ok ? [code.value] : []
  })
  /** The same for each value of a repeatable option; null where it was not given. */
  const several = <T>(name: string, read: (text: string, option: string) => Result<T>): T[] | null => {
    const texts = values.get(name)
    if (texts === undefined) return null
    return texts.flatMap((text) => {
      const value = read(text, `--${name}`)
      if (!value.ok) problems.push(value)
      return value.ok ? [value.value] : []
    })
  }
  const has = (name: string): boolean => values.has(name)
  const voids: (readonly [number, number])[] = []
  for (const text of values.get('void') ?? []) {
    const point = typedPoint(text, '--void')
    if (!point.ok) return point
    voids.push(point.value)
  }
  const options: Options = {
    ...noOptions,
    unit: take('unit', typedUnit),
    scale: take('scale', typedScale),
    layers: values.get('layer') ?? null,
    ...chosen({ colours: several('colour', typedColour), lineTypes: values.get('line-type') ?? null, window: take('window', typedWindow), between: take('between', typedBetween), inside: take('inside', typedInside) }),
    snap_mm: take('snap', (text, option) => typedMillimetres(text, option, false)),
    sagitta_mm: take('sagitta', (text, option) => typedMillimetres(text, option, true)),
    voids: voids.length > 0 ? voids : null,
    accept: codes('accept'),
    leave: codes('leave'),
    scaleFrom: take('scale-from', typedScaleFrom),
    rim: take('rim', typedRim),
    datum: take('datum', typedLength),
    levelsWithin: take('levels-within', typedLength),
    oneWay: take('one-way', typedJoints),
    pitch_deg: take('pitch', typedDegrees),
    bearing_deg: take('bearing', typedDegrees),
    rise: take('rise', typedLength),
    down: has('down'),
    shape: take('shape', (text, option) => typedWord(text, shapes, option)),
    ...(has('few-folds') ? { fewestFolds: true } : {}),
    keeps: {
      stay: values.get('stay') ?? [],
      rimNodes: take('rim-nodes', (text, option) => typedWord(text, ['slide', 'fixed', 'free'] as const, option)) ?? 'slide',
      bend: has('bend'),
      largestShift: take('largest-shift', typedLength),
      leastEdge: take('least-edge', typedLength),
      leastCorner_deg: take('least-corner', typedDegrees),
      keep: several('keep', (text, option) => typedWord(text, keptPatterns, option)) ?? [],
      keepShape: values.get('keep-shape') ?? [],
    },
    planTolerance_mm: take('plan-tolerance', (text, option) => typedMillimetres(text, option, false)),
    flat_mm: take('flat', (text, option) => typedMillimetres(text, option, true)),
    decimals: take('decimals', (text, option) => typedCount(text, mostDecimals, option)),
    near: has('near'),
    csv: take('csv', (text, option) => typedWord(text, csvStyles, option)) ?? 'comma',
    full: has('full'),
  }
  return problems[0] ?? ok(options)
}

/** "all", or names of joints with commas between them. */
function typedJoints(text: string, option: string): Result<Options['oneWay']> {
  if (text.trim().toLowerCase() === 'all') return ok('all')
  const names = text.split(/[\s,]+/).filter((name) => name !== '')
  const wrong = names.find((name) => !/^J[1-9]\d{0,8}$/i.test(name))
  if (wrong === undefined && names.length > 0) return ok(names)
  return fail('not-a-joint', `"${wrong ?? text}" is not the name of a joint`, { field: option }, 'write all, or names like J4,J11')
}

/** What is chosen at all. */
function chosen(lines: Pick<Options, 'colours' | 'lineTypes' | 'window' | 'between' | 'inside'>): typeof lines {
  return Object.fromEntries(Object.entries(lines).filter(([, value]) => value !== null))
}

function typedRim(text: string, option: string): Result<Options['rim']> {
  const word = text.trim().toLowerCase()
  if (word === 'free' || word === 'level') return ok(word)
  const level = /^level\s*=\s*(.+)$/i.exec(text.trim())
  if (level === null) return fail('not-one-of', `"${text}" is not free, level or level=H`, { field: option })
  const height = typedLength(level[1], option)
  return height.ok ? ok({ level: height.value }) : height
}

async function targetFrom(text: string | null): Promise<Result<Options['target']>> {
  if (text === null) return ok(null)
  if (text === 'input' || text === 'none') return ok(text)
  return forOption(await readInput(text), '--target')
}

/** FILE, or FILE#LAYER; a file whose name has the sign itself wins. */
async function levelsFrom(text: string | null): Promise<Result<Asked['levels']>> {
  if (text === null) return ok(null)
  const sign = text.lastIndexOf('#')
  const hasLayer = sign > 0 && !nodeFs.existsSync(text)
  const source = forOption(await readInput(hasLayer ? text.slice(0, sign) : text), '--levels')
  return source.ok ? ok({ source: source.value, layer: hasLayer ? text.slice(sign + 1) : null }) : source
}

async function briefFrom(text: string | null): Promise<Result<Asked['brief']>> {
  if (text === null) return ok(null)
  const source = forOption(await readInput(text), '--brief')
  if (!source.ok) return source
  const brief = decodedText(source.value)
  return brief.ok ? ok({ name: source.value.name, text: brief.value }) : brief
}

function forOption(source: Result<Source>, option: string): Result<Source> {
  return source.ok ? source : { ok: false, problem: placed(source.problem, { field: option }) }
}

/** The options as typed, for the record: by name, files by their base name. */
function given({ values }: Arguments): Record<string, unknown> {
  const record: Record<string, unknown> = {}
  for (const [name, texts] of values) {
    if (notRecorded.includes(name)) continue
    const recorded = ['brief', 'levels', 'target', 'densities'].includes(name) ? texts.map((text) => text.replace(/^.*[\\/]/, '')) : texts
    record[name] = recorded.length === 0 ? true : ['layer', 'colour', 'line-type', 'void', 'accept', 'leave', 'stay', 'cure', 'keep', 'keep-shape'].includes(name) ? recorded : recorded[0]
  }
  return record
}
