/**
 * What a run says, and where: results on standard output, problems and progress on standard error. A reader that closes
 * the pipe early (`| head`) is no error: the rest is dropped, the run goes on and its exit code is the verdict's.
 */
import { sentence, type Problem } from '../base/result.ts'
import { jsonText } from '../formats/write-json.ts'
import type { OpenQuestion } from '../job/question.ts'
import { questionSentence } from '../paper/report/drawing-sentences.ts'
import { printable } from '../paper/report/printable.ts'
import { osCode, osReason } from './os-reason.ts'
import { ProgressBar } from './progress-bar.ts'

export interface Manner {
  readonly json: boolean
  readonly quiet: boolean
}

export class Screen {
  private isClosed = false
  private hasFailed = false

  constructor(
    readonly manner: Manner,
    private readonly out: NodeJS.WriteStream = process.stdout,
    private readonly err: NodeJS.WriteStream = process.stderr,
    private readonly environment: Readonly<Record<string, string | undefined>> = process.env,
  ) {
    out.on('error', (error: unknown) => {
      this.isClosed = true
      if (osCode(error) === 'EPIPE') return
      this.hasFailed = true
      this.err.write(`Standard output cannot be written, since ${osReason(error)}.\n`)
      process.exitCode = 2
    })
    err.on('error', () => {
      // Nobody is left to be told.
    })
  }

  /** Whether standard output could not take what was printed, other than by a closed pipe. */
  get failed(): boolean {
    return this.hasFailed
  }

  /** Text for people: not with --json or --quiet. */
  say(text: string): void {
    if (!this.manner.json && !this.manner.quiet) this.print(text)
  }

  /** The one object of --json. */
  give(record: unknown): void {
    if (this.manner.json) this.print(`${jsonText(record)}\n`)
  }

  /** A problem as a sentence; a name that stands first keeps its letters. */
  complain(problem: Problem): void {
    const words = printable('questions' in problem ? openQuestion(problem as OpenQuestion) : sentence(problem))
    this.err.write(`${problem.where === null ? words.slice(0, 1).toUpperCase() + words.slice(1) : words}\n`)
  }

  /** Marks text on a terminal that shows it; NO_COLOR (no-color.org) asks for none. */
  strong(text: string): string {
    const { NO_COLOR, TERM } = this.environment
    const isPlain = this.out.isTTY !== true || (NO_COLOR !== undefined && NO_COLOR !== '') || TERM === 'dumb'
    return isPlain ? text : `\u001b[1m${text}\u001b[22m`
  }

  bar(): ProgressBar {
    return new ProgressBar(this.err, !this.manner.quiet && this.environment['TERM'] !== 'dumb')
  }

  private print(text: string): void {
    if (!this.isClosed) this.out.write(text)
  }
}

/** What is asked, and what answers it. */
function openQuestion({ questions, where }: OpenQuestion): string {
  return `${where?.file === undefined ? '' : `${where.file}: `}${questions.map(questionSentence).join(' ')}`
}

/** A problem as `--json` prints it. */
export function problemRecord(problem: Problem): Record<string, unknown> {
  const { code, message, where, cure } = problem
  return { error: { code, message, where, cure }, ...('questions' in problem ? { questions: problem.questions } : {}) }
}
