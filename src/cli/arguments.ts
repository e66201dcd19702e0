/**
 * The words of a command line, sorted: node's own parser does the work; here values may begin with a minus, and a word
 * that is not known names the nearest one that is.
 */
import { parseArgs } from 'node:util'
import { fail, ok, type Result } from '../base/result.ts'
import { nearestWord } from '../plan/project/nearest-word.ts'
import { commands, optionsOf, type Command, type OptionEntry } from './option-table.ts'

export interface Arguments {
  readonly command: Command
  readonly plans: readonly string[]
  /** By the option's name: its values in order; a switch that is on has none. */
  readonly values: ReadonlyMap<string, readonly string[]>
}

/** Words that stand in the place of a command. */
export const otherWords = ['help'] as const

/** Fails with code "unknown-command", "unknown-option", "value-missing", "value-not-taken", "twice". */
export function parseWords(command: Command, words: readonly string[]): Result<Arguments> {
  const known = optionsOf(command)
  const joined = valuesJoined(words, known)
  if (!joined.ok) return joined
  const { tokens } = parseArgs({
    args: joined.value,
    options: {
      ...Object.fromEntries(known.map(({ name, value }) => [name, { type: value === null ? ('boolean' as const) : ('string' as const) }])),
      help: { type: 'boolean', short: 'h' },
    },
    strict: false,
    allowPositionals: true,
    tokens: true,
  })
  const plans: string[] = []
  const values = new Map<string, string[]>()
  for (const token of tokens) {
    if (token.kind === 'positional') plans.push(token.value)
    if (token.kind !== 'option') continue
    const entry = known.find(({ name }) => name === token.name)
    if (entry === undefined) return unknownOption(command, token.rawName, known)
    if (entry.value === null && token.value !== undefined) {
      return fail('value-not-taken', `--${entry.name} takes no value`, null, `write --${entry.name} alone`)
    }
    if (entry.value !== null && (token.value === undefined || token.value === '')) return valueMissing(entry)
    const before = values.get(entry.name)
    if (before !== undefined && entry.value !== null && entry.repeatable !== true) {
      return fail('twice', `--${entry.name} stands there twice`, null, 'give it once')
    }
    values.set(entry.name, [...(before ?? []), ...(token.value === undefined ? [] : [token.value])])
  }
  return ok({ command, plans, values })
}

/**
 * `--void -3,4` becomes `--void=-3,4`, which the parser does not take for two options. A word with two minus signs is
 * never a value.
 */
function valuesJoined(words: readonly string[], known: readonly OptionEntry[]): Result<string[]> {
  const joined: string[] = []
  for (let at = 0; at < words.length; at += 1) {
    const word = words[at]
    if (word === '--') return ok([...joined, ...words.slice(at)])
    const entry = known.find(({ name, value }) => value !== null && word === `--${name}`)
    if (entry === undefined) {
      joined.push(word)
      continue
    }
    const next: string | undefined = words[at + 1]
    if (next === undefined || next.startsWith('--')) return valueMissing(entry)
    joined.push(`${word}=${next}`)
    at += 1
  }
  return ok(joined)
}

const valueMissing = ({ name, value }: OptionEntry): Result<never> =>
  fail('value-missing', `--${name} needs a value`, null, `write --${name} ${value ?? ''}`)

function unknownOption(command: Command, word: string, known: readonly OptionEntry[]): Result<never> {
  const nearest = nearestWord(word.replace(/^-+/, ''), known.map(({ name }) => name))
  const cure = nearest === null ? `panewise ${command} --help lists all` : `perhaps --${nearest} is meant`
  return fail('unknown-option', `there is no option ${word}`, null, cure)
}

export function unknownCommand(word: string): Result<never> {
  const nearest = nearestWord(word, [...commands, ...otherWords])
  const cure = nearest === null ? `the commands are ${commands.join(', ')}` : `perhaps "${nearest}" is meant`
  return fail('unknown-command', `there is no command "${word}"`, null, cure)
}
