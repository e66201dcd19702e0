/** Codes that scripts meet. */
import type { RepairCode } from '../base/repair.ts'

const exits: readonly (readonly [string, string])[] = [
  ['0', 'lifts: every joint folds (also: a single panel; a pitch that is met); for read: a plan was read'],
  ['3', 'lifts in part, within the plan tolerance, or within the tolerance'],
  ['1', 'does not lift'],
  ['2', 'bad input, bad use, an open question'],
  ['130', 'stopped by Ctrl-C; nothing was written (143: ended by the system)'],
]

const repairs: Readonly<Record<RepairCode, string>> = {
  split: 'lines that cross or touch were split where they meet',
  joined: 'line ends nearer than the snapping distance became one node',
  repeat: 'lines and panels drawn more than once were taken once',
  'loose-end': 'lines that bound no panel were dropped',
  chords: 'curves became chords',
  flattened: 'heights or levels were dropped where the plan takes none',
  'tiny-face': 'faces too small to be panels were dropped',
  'left-out': 'what is no part of a plan was left out',
  'unit-assumed': 'the file states no unit, so one was assumed',
  'double-lines': 'bars drawn as two lines become one line',
  unit: 'the stated unit is not plausible and another fits',
  'which-lines': 'it is not clear which lines are the plan',
  straighten: 'nodes that are nearly in line come into line',
  square: 'runs that are nearly at right angles become so',
  equalise: 'bays that are nearly equal become equal',
  symmetric: 'a plan that is nearly symmetric becomes so',
  levels: 'texts or points with levels are held',
}

const problems: readonly (readonly [string, string])[] = [
  ['no-command, unknown-command, unknown-topic', 'the first words are not known'],
  ['unknown-option, value-missing, value-not-taken, twice', 'an option is not as its help has it'],
  ['not-a-number, not-a-length, not-a-scale, not-a-point, not-a-count, not-one-of, out-of-range', "an option's value is not as its help has it"],
  ['no-plan, no-out, stdin-twice', 'something is missing on the command line'],
  ['cannot-read, is-a-folder, too-large, file-changed', 'a file could not be read'],
  ['cannot-write, files-exist, out-is-no-folder, input-in-the-way', 'the output could not be written; nothing was'],
  ['cancelled', 'the run was stopped'],
  ['fault', 'a fault of panewise itself'],
]

const table = (rows: readonly (readonly [string, string])[]): string => {
  const width = Math.max(...rows.map(([code]) => code.length).filter((length) => length < 24))
  return rows.map(([code, text]) => (code.length > width ? `  ${code}\n  ${' '.repeat(width)}  ${text}` : `  ${code.padEnd(width)}  ${text}`)).join('\n')
}

export const helpCodes = `Exit codes (of several plans the worst, in the order 2, 1, 3, 0)
${table(exits)}

Repairs, proposals and questions ("repairs" and "questions" in the JSON; --accept CODE takes a proposal)
${table(Object.entries(repairs))}

Problems ("error" in the JSON): their code is a stable word, their message says the rest
${table(problems)}
  Problems of a drawing or a brief have codes of their own; they name the file, the place and the cure.
`
