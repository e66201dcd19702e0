/**
 * The only road from the outside to an answer. The work itself is steppable (see `check.ts`); here it is driven, so that
 * progress shows and an abort signal stops it between two steps.
 */
import { fail, ok, type Result } from '../base/result.ts'
import { cancelled, drive, type DriveOptions, type Steps } from '../base/steps.ts'
import type { Repair, LeftOut, Question } from '../base/repair.ts'
import type { PlanFacts } from '../roof/answer/answer.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import { linearSolver } from '../roof/cures/folds/linear-program.ts'
import { adjust, type AdjustAnswer } from './adjust.ts'
import { adjustFiles } from './adjust-files.ts'
import { balance, type BalanceAnswer, type Densities } from './balance.ts'
import { balanceFiles } from './balance-files.ts'
import { check, planFacts, type Checked } from './check.ts'
import { withFewestFolds } from './fewest-folds.ts'
import type { OutputFile } from './files.ts'
import { withOneWay } from './one-way.ts'
import { reading } from './reading.ts'
import { solvedWith, withCures, type Solved } from './solve.ts'
import type { Request } from './request.ts'

declare const __VERSION__: string

/** Version of the program, put in by the build. */
export const version = typeof __VERSION__ === 'string' ? __VERSION__ : '0.0.0'

/** What `panewise read --json` prints; `readPlan` holds the arrays behind it. */
export interface ReadAnswer {
  readonly summary: {
    readonly version: string
    readonly input: { readonly name: string; readonly sha256: string }
    readonly plan: PlanFacts
    readonly repairs: readonly Repair[]
    readonly questions: readonly Question[]
    readonly leftOut: readonly LeftOut[]
    readonly notices: readonly string[]
  }
  readonly readPlan: ReadPlan
  readonly layers: readonly string[]
}

/** Reads, checks and raises; nothing is written. Code "cancelled" when the signal was aborted. */
export async function run(request: Request, options: DriveOptions = {}): Promise<Result<Checked>> {
  const sha256 = await sha256Of(request.source.bytes)
  const checked = await driven(check(request, version, sha256), options)
  const { oneWay } = request.options
  if (!checked.ok || oneWay === null) return checked
  return driven(withOneWay(checked.value, oneWay, await linearSolver()), options)
}

/** The same with these cures applied ("release:south gutter"), and in the summary what else it takes where the answer is not a plain yes. */
export async function solve(request: Request, cures: readonly string[], options: DriveOptions = {}): Promise<Result<Solved>> {
  const sha256 = await sha256Of(request.source.bytes)
  let solved = await driven(solvedWith(request, version, sha256, cures), options)
  const { oneWay, fewestFolds = false } = request.options
  if (solved.ok && fewestFolds) solved = await driven(withFewestFolds(solved.value, await linearSolver()), options)
  if (solved.ok && oneWay !== null) {
    const asked = await driven(withOneWay(solved.value.checked, oneWay, await linearSolver()), options)
    if (!asked.ok) return asked
    solved = ok({ ...solved.value, checked: asked.value })
  }
  return solved.ok ? driven(withCures(solved.value), options) : solved
}

/** Reads, checks, moves nodes until the plan lifts, and checks again; nothing is written. */
export async function adjustPlan(request: Request, options: DriveOptions = {}): Promise<Result<AdjustAnswer>> {
  const sha256 = await sha256Of(request.source.bytes)
  return driven(adjust(request, version, sha256), options)
}

/** The files of an adjusted plan. */
export async function adjustedFiles(adjusted: AdjustAnswer, options: DriveOptions = {}): Promise<Result<OutputFile[]>> {
  const made = await drive(adjustFiles(adjusted), options)
  return made === cancelled ? fail('cancelled', 'stopped before the end') : ok(made)
}

/** Reads, balances the plan by force densities, and checks it; nothing is written. */
export async function balancePlan(request: Request, densities: Densities, options: DriveOptions = {}): Promise<Result<BalanceAnswer>> {
  const sha256 = await sha256Of(request.source.bytes)
  return driven(balance(request, densities, version, sha256), options)
}

/** The files of a balanced plan. */
export async function balancedFiles(balanced: BalanceAnswer, options: DriveOptions = {}): Promise<Result<OutputFile[]>> {
  const made = await drive(balanceFiles(balanced), options)
  return made === cancelled ? fail('cancelled', 'stopped before the end') : ok(made)
}

/** Reads the plan only. */
export async function read(request: Request, options: DriveOptions = {}): Promise<Result<ReadAnswer>> {
  const sha256 = await sha256Of(request.source.bytes)
  const made = await driven(reading(request), options)
  if (!made.ok) return made
  const { read: readPlan, layers } = made.value
  const { repairs, questions, leftOut, notices, plan } = readPlan
  return ok({
    summary: { version, input: { name: request.source.name, sha256 }, plan: planFacts(plan), repairs, questions, leftOut, notices },
    readPlan,
    layers,
  })
}

async function driven<T>(steps: Steps<Result<T>>, options: DriveOptions): Promise<Result<T>> {
  const value = await drive(steps, options)
  return value === cancelled ? fail('cancelled', 'stopped before the end', null, null) : value
}

/** Hexadecimal SHA-256 of the bytes; empty where the platform offers none (a page that is not served securely). */
async function sha256Of(bytes: Uint8Array): Promise<string> {
  if (globalThis.crypto?.subtle === undefined) return ''
  const digest = await globalThis.crypto.subtle.digest('SHA-256', bytes as Uint8Array<ArrayBuffer>)
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, '0')).join('')
}
