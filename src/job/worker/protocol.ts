/**
 * What the page and its worker say to one another. Every question carries an id; the worker answers each exactly once,
 * with progress in between. Inputs are copied, never transferred: the page keeps its own.
 */
import type { Result } from '../../base/result.ts'
import type { Progress } from '../../base/steps.ts'
import type { Brief } from '../../plan/project/brief.ts'
import type { NamedFile, Options } from '../../plan/project/options.ts'
import type { ReadAnswer } from '../run.ts'
import type { Request } from '../request.ts'
import type { OutputFile } from '../files.ts'
import type { AppliedCure, CureList, FrozenReason, LiveBalance, LiveDensities, MirrorLine, OneWayTold, Release, Way } from '../session.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { Cure } from '../../roof/answer/cure.ts'

/** What each question holds and what comes back for it. */
export interface Questions {
  /** Reads a drawing. */
  read: { ask: Request; tell: Result<ReadAnswer> }
  /** Takes a plan as the one that `answer`, `ways` and `files` speak of; `plan` is the page's number for it. */
  base: { ask: { plan: number; read: ReadAnswer['readPlan']; name: string }; tell: Result<null> }
  /** `target`: heights that take the place of the drawing's own. */
  answer: { ask: { plan: number; brief: Brief; options: Options; target: Float64Array | null }; tell: Result<Omit<Answer, 'plan'>> }
  /** The independent ways left under the brief of the last answer, smoothest first. */
  ways: { ask: { plan: number; count: number }; tell: Result<readonly Way[]> }
  /** Why a joint cannot fold in any roof of the last answer; null: it can. */
  frozen: { ask: { plan: number; joint: number }; tell: Result<FrozenReason | null> }
  /** What letting go of one condition of the last answer would give. */
  releases: { ask: { plan: number }; tell: Result<readonly Release[]> }
  /** What it takes where the last answer is not a plain yes, and one of these applied. */
  cures: { ask: { plan: number }; tell: Result<CureList> }
  applied: { ask: { plan: number; cure: Pick<Cure, 'code' | 'name'> }; tell: Result<AppliedCure> }
  /** Whether joints can all fold one way. */
  oneWay: { ask: { plan: number; joints: 'all' | readonly string[] }; tell: Result<OneWayTold> }
  /** The plan that densities balance. */
  balance: { ask: { plan: number; brief: Brief; densities: LiveDensities }; tell: Result<LiveBalance> }
  /** Lines that the plan is symmetric about. */
  mirrors: { ask: { plan: number }; tell: Result<readonly MirrorLine[]> }
  /** Heights of a second surface over the nodes of the plan. */
  surface: { ask: { plan: number; file: NamedFile }; tell: Result<Float64Array> }
  /** Files of the last answer. */
  files: { ask: { plan: number; csv: 'comma' | 'semicolon' }; tell: Result<readonly OutputFile[]> }
}

export type Kind = keyof Questions

export type ToWorker =
  | { readonly [K in Kind]: { readonly id: number; readonly kind: K; readonly ask: Questions[K]['ask'] } }[Kind]
  | { readonly kind: 'cancel'; readonly id: number }

export type FromWorker =
  | { readonly kind: 'progress'; readonly id: number; readonly progress: Progress }
  | { readonly kind: 'told'; readonly id: number; readonly tell: unknown }
  | { readonly kind: 'bug'; readonly id: number; readonly message: string }
