/**
 * One plan and many questions about it: what the page's worker holds between edits. The plan is read once and its factor
 * found once; every further answer costs what the conditions and the wish cost.
 */
import { fail, type Result } from '../base/result.ts'
import { cancelled, drive, type DriveOptions } from '../base/steps.ts'
import type { Brief } from '../plan/project/brief.ts'
import type { Options } from '../plan/project/options.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import type { FreeRim } from '../roof/stress/free-rim.ts'
import { answerTo, type Checked } from './check.ts'
import { version } from './run.ts'

export class Session {
  private free: FreeRim | null = null
  private readonly read: ReadPlan
  private readonly name: string

  /** `name`: what the drawing goes by in sentences. */
  constructor(read: ReadPlan, name: string) {
    this.read = read
    this.name = name
  }

  /** The answer under a brief and options; code "cancelled" when the signal was aborted. */
  async answer(brief: Brief, options: Options, given: Readonly<Record<string, unknown>>, drive_: DriveOptions = {}): Promise<Result<Checked>> {
    const request = { command: 'check', source: { name: this.name, bytes: new Uint8Array() }, options, brief: null, levels: null, given } as const
    const made = await drive(answerTo({ request, version, sha256: '', read: this.read, brief, free: this.free }), drive_)
    if (made === cancelled) return fail('cancelled', 'stopped before the end')
    if (made.ok) this.free = made.value.free
    return made
  }
}
