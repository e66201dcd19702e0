#!/usr/bin/env node
/** The command line: the first word chooses what is done; the exit code is the verdict. */
import { fail, type Problem } from '../base/result.ts'
import { version } from '../job/run.ts'
import { answerInThread, isThread } from '../job/worker/node-pool.ts'
import { adjustPlans } from './adjust.ts'
import { parseWords, unknownCommand } from './arguments.ts'
import { balancePlans } from './balance.ts'
import { checkPlans } from './check.ts'
import { gaveUp, type Run } from './each-plan.ts'
import { badUse, stopped, type ExitCode } from './exit-code.ts'
import { commandHelp, usage } from './help.ts'
import { helpTopic } from './help-topics.ts'
import { commands, type Command } from './option-table.ts'
import { raisePlans } from './raise.ts'
import { raisedPlan, type RaiseTask } from './raised-plan.ts'
import { readPlans } from './read.ts'
import { Screen } from './screen.ts'

const work: Readonly<Record<Command, (run: Run) => Promise<ExitCode>>> = { read: readPlans, check: checkPlans, raise: raisePlans, adjust: adjustPlans, balance: balancePlans }

/** Exit code of a process that was asked to end (SIGTERM): 128 and the signal's number, as shells count. */
const ended = 143

async function main(words: readonly string[]): Promise<number> {
  const [first, ...rest] = words
  const screen = new Screen({ json: words.includes('--json'), quiet: words.includes('--quiet') })
  const plain = new Screen({ json: false, quiet: false })
  if (first === undefined) {
    screen.complain(fail('no-command', 'no command is given', null, 'panewise --help lists them').problem)
    return badUse
  }
  if (first === '--version') {
    plain.say(`${version}\n`)
    return 0
  }
  if (first === '--help' || first === '-h' || first === 'help') return help(plain, rest)
  const command = commands.find((name) => name === first)
  if (command === undefined) return gaveUp(screen, problemOf(unknownCommand(first)))
  const args = parseWords(command, rest)
  if (!args.ok) return gaveUp(screen, args.problem)
  if (args.value.values.has('help')) {
    plain.say(commandHelp(command))
    return 0
  }
  const controller = new AbortController()
  let bySignal: number = stopped
  const stop = (code: number) => (): void => {
    bySignal = code
    controller.abort()
    // Whoever waits for standard input waits no longer.
    process.stdin.destroy()
  }
  // Once: a second Ctrl-C ends the process where it stands; what lies aside is removed by the next run.
  process.once('SIGINT', stop(stopped))
  for (const signal of ['SIGTERM', 'SIGHUP'] as const) process.once(signal, stop(ended))
  const exit = await work[command]({ args: args.value, screen, signal: controller.signal, script: new URL(import.meta.url) })
  if (exit === stopped) {
    gaveUp(screen, fail('cancelled', command === 'raise' || command === 'adjust' || command === 'balance' ? 'stopped, nothing was written' : 'stopped').problem)
    return bySignal
  }
  return screen.failed ? badUse : exit
}

function help(screen: Screen, [topic]: readonly string[]): number {
  if (topic === undefined) {
    screen.say(usage)
    return 0
  }
  const text = commands.some((name) => name === topic) ? commandHelp(topic as Command) : helpTopic(topic)
  if (text === null) {
    screen.complain(fail('unknown-topic', `there is no help on "${topic}"`, null, 'there is panewise help brief, formats and codes').problem)
    return badUse
  }
  screen.say(text)
  return 0
}

const problemOf = (failed: { readonly ok: boolean; readonly problem?: Problem }): Problem => failed.problem ?? fail('unknown-command', 'no such command').problem

if (isThread) answerInThread((task: RaiseTask, onProgress) => raisedPlan(task, { onProgress }))
else try {
  process.exitCode = await main(process.argv.slice(2))
} catch (error) {
  // A broken invariant of ours: one sentence for the user; the trace only for whoever asks for it.
  const message = error instanceof Error ? error.message : String(error)
  process.stderr.write(`This is a fault of panewise, not of the plan: ${message}. Nothing was written; please report it with the plan.\n`)
  if (process.env['PANEWISE_TRACE'] !== undefined && error instanceof Error) process.stderr.write(`${error.stack ?? ''}\n`)
  if (process.argv.includes('--json')) process.stdout.write(`${JSON.stringify({ error: { code: 'fault', message, where: null, cure: null } })}\n`)
  process.exitCode = badUse
}
