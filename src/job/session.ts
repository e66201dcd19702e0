/**
 * One plan and many questions about it: what the page's worker holds between edits. The plan is read once and its factor
 * found once; every further answer costs what the conditions and the wish cost.
 */
import { fail, ok, type Result } from '../base/result.ts'
import { cancelled, drive, type DriveOptions } from '../base/steps.ts'
import { emptyBrief, type Brief } from '../plan/project/brief.ts'
import { heldNode } from '../plan/project/edits.ts'
import { noOptions, type NamedFile, type Options } from '../plan/project/options.ts'
import { wishesOf } from '../plan/project/wishes.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import { mirrorLines, type MirrorLine } from '../plan/symmetry.ts'
import type { Cure } from '../roof/answer/cure.ts'
import type { FreeRim } from '../roof/stress/free-rim.ts'
import { oneWaySentences } from '../paper/report/one-way-sentences.ts'
import type { OneWayFacts } from '../roof/answer/answer.ts'
import { linearSolver } from '../roof/cures/folds/linear-program.ts'
import { answerTo, type Checked } from './check.ts'
import { withOneWay } from './one-way.ts'
import type { PlanQuestion } from './question.ts'
import { curesOf, type CuresFound } from './cures.ts'
import { filesOf, type OutputFile } from './files.ts'
import { defaultPlanTolerance_mm } from './plan-tolerance.ts'
import { liveBalance, type LiveBalance, type LiveDensities } from './live-balance.ts'
import { releasesOf, type Release } from './releases.ts'
import { targetOf } from './target.ts'
import { version } from './run.ts'
import { waysOf, type Way } from './ways.ts'
import { whyFrozen, type FrozenReason } from './why-frozen.ts'

export type { FrozenReason, LiveBalance, LiveDensities, MirrorLine, Release, Way }

/** The answer to "can all fold one way?" in the words of the report, and the roof where they can (in the plan's unit). */
export interface OneWayTold {
  readonly facts: OneWayFacts
  readonly sentence: string
  readonly heights: Float64Array | null
}

/** The cures as plain records. */
export interface CureList extends Pick<CuresFound, 'answer' | 'asDrawn' | 'blocking'> {
  readonly cures: readonly Cure[]
}

export interface AppliedCure {
  readonly read: ReadPlan
  readonly brief: Brief
  readonly options: Options
  readonly target: Float64Array | null
  /** Whether nodes, panels or joints are others than before. */
  readonly changesPlan: boolean
}

export class Session {
  private free: FreeRim | null = null
  private last: Checked | null = null
  private question: PlanQuestion | null = null
  private found: CuresFound | null = null
  private readonly read: ReadPlan
  private readonly name: string

  /** `name`: what the drawing goes by in sentences. */
  constructor(read: ReadPlan, name: string) {
    this.read = read
    this.name = name
  }

  /**
   * The answer under a brief and options; code "cancelled" when the signal was aborted. `target`: heights per node that
   * take the place of the drawing's own, null: as drawn.
   */
  async answer(brief: Brief, options: Options, target: Float64Array | null, driven: DriveOptions = {}): Promise<Result<Checked>> {
    // Heights set by hand are the target whatever the options say of the drawing's.
    const asked = target === null ? options : { ...options, target: null, shape: null }
    const request = { command: 'check', source: { name: this.name, bytes: new Uint8Array() }, options: asked, brief: null, levels: null, given: {} } as const
    const question = { request, version, sha256: '', read: this.read, brief, target, free: this.free }
    const made = await drive(answerTo({ ...question, space: this.last?.under.space ?? null }), driven)
    if (made === cancelled) return fail('cancelled', 'stopped before the end')
    if (made.ok) {
      this.free = made.value.free
      this.last = made.value
      this.question = question
      this.found = null
    }
    return made
  }

  /**
   * Asks what a hand would that drags a node, a few times, and forgets the answers: what they run is compiled by the time the
   * hand comes. Ends early when the signal is aborted.
   */
  async rehearse(times: number, driven: DriveOptions = {}): Promise<void> {
    const { question, last } = this
    const heights = last?.answer.roof?.heights
    if (question === null || last === null || heights === undefined) return
    const node = this.read.plan.nodeCount >> 1
    let { space } = last.under
    for (let time = 1; time <= times; time += 1) {
      const condition = heldNode(node, heights[node] + 1e-3 * time * this.read.plan.frame.span)
      const conditions = [...question.brief.conditions.filter(({ name }) => name !== condition.name), condition]
      const made = await drive(answerTo({ ...question, brief: { ...question.brief, conditions }, free: last.free, space }), driven)
      if (made === cancelled || !made.ok) return
      space = made.value.under.space
    }
  }

  /** The ways left under the conditions of the last answer, smoothest first, at most `count`. */
  ways(count: number): Result<readonly Way[]> {
    if (this.last === null) return fail('no-answer', 'there is no answer yet')
    return ok(waysOf(this.last, count))
  }

  /** Why a joint cannot fold in any roof of the last answer; null: it can. */
  whyFrozen(joint: number): Result<FrozenReason | null> {
    if (this.last === null) return fail('no-answer', 'there is no answer yet')
    const { answer, free, under, rows } = this.last
    return ok(whyFrozen(answer.plan, free, under, rows, joint))
  }

  /** What letting go of one condition of the last answer would give. */
  async releases(driven: DriveOptions = {}): Promise<Result<readonly Release[]>> {
    if (this.last === null || this.question === null) return fail('no-answer', 'there is no answer yet')
    const made = await drive(releasesOf(this.question, this.last), driven)
    return made === cancelled ? fail('cancelled', 'stopped before the end') : made
  }

  /** What it takes where the last answer is not a plain yes; see `Cure`. */
  async cures(driven: DriveOptions = {}): Promise<Result<CureList>> {
    if (this.last === null || this.question === null) return fail('no-answer', 'there is no answer yet')
    const made = await drive(curesOf(this.question, this.last), driven)
    if (made === cancelled) return fail('cancelled', 'stopped before the end')
    if (!made.ok) return made
    this.found = made.value
    const { answer, asDrawn, blocking, cures } = made.value
    return ok({ answer, asDrawn, blocking, cures: cures.map(({ cure }) => cure) })
  }

  /** Plan, brief and options with one of the cures of `cures` applied, for a session of its own; the older ones are the undo. */
  applied({ code, name }: Pick<Cure, 'code' | 'name'>): Result<AppliedCure> {
    const chosen = this.found?.cures.find(({ cure }) => cure.code === code && cure.name === name)
    if (chosen === undefined || this.question === null) return fail('no-such-cure', 'this cure was not offered')
    const { read, brief, target = null, request } = chosen.attempt.next ?? this.question
    return ok({ read, brief, options: request.options, target, changesPlan: chosen.attempt.changesPlan })
  }

  /** Whether these joints can all fold one way, all joints where none are named; the solver comes with the first such question. */
  async oneWay(asked: NonNullable<Options['oneWay']>, driven: DriveOptions = {}): Promise<Result<OneWayTold>> {
    if (this.last === null) return fail('no-answer', 'there is no answer yet')
    const made = await drive(withOneWay(this.last, asked, await linearSolver()), driven)
    if (made === cancelled) return fail('cancelled', 'stopped before the end')
    if (!made.ok) return made
    const { summary, oneWayHeights = null } = made.value.answer
    const { oneWay: facts } = summary
    return facts === undefined ? fail('no-joints', 'there are no joints to ask about') : ok({ facts, sentence: oneWaySentences(summary, true).join(' '), heights: oneWayHeights })
  }

  /** The plan that forces of these densities balance, its rim as it stands; see `liveBalance`. */
  async balanced(brief: Brief, densities: LiveDensities, driven: DriveOptions = {}): Promise<Result<LiveBalance>> {
    const made = await drive(liveBalance(this.read.plan, brief, densities), driven)
    return made === cancelled ? fail('cancelled', 'stopped before the end') : made
  }

  /** Lines that the plan is symmetric about, within what a drawing is exact to. */
  mirrors(): readonly MirrorLine[] {
    return mirrorLines(this.read.plan, defaultPlanTolerance_mm)
  }

  /** Heights of a second surface over every node; fails where it does not lie over the plan. */
  async surface(file: NamedFile, driven: DriveOptions = {}): Promise<Result<Float64Array>> {
    const wishes = wishesOf(emptyBrief, { ...noOptions, target: file }, this.read.plan.unit)
    if (!wishes.ok) return wishes
    const request = { command: 'check', source: { name: this.name, bytes: new Uint8Array() }, options: noOptions, brief: null, levels: null, given: {} } as const
    const made = await drive(targetOf(request, wishes.value, this.read, null), driven)
    if (made === cancelled) return fail('cancelled', 'stopped before the end')
    if (!made.ok) return made
    return made.value.heights === null ? fail('no-target', 'the file has no surface', { file: file.name }) : ok(made.value.heights)
  }

  /** The files of the last answer. A near roof is among them and says so. */
  async files(csv: 'comma' | 'semicolon', driven: DriveOptions = {}): Promise<Result<readonly OutputFile[]>> {
    if (this.last === null) return fail('no-answer', 'there is no answer yet')
    const made = await drive(filesOf({ ...this.last, wishes: { ...this.last.wishes, csv, near: true } }), driven)
    return made === cancelled ? fail('cancelled', 'stopped before the end') : ok(made)
  }
}
