/** What the page asks of the worker. `null` stands for work that was cancelled or overtaken by a newer question. */
import type { Result } from '../../base/result.ts'
import type { Progress } from '../../base/steps.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { Cure } from '../../roof/answer/cure.ts'
import type { AppliedCure, CureList, FrozenReason, LiveBalance, LiveDensities, MirrorLine, OneWayTold, Release, Way } from '../../job/session.ts'
import type { Doc, OpeningOptions } from './state.ts'

export interface NamedBytes {
  readonly name: string
  readonly bytes: Uint8Array
}

/** A drawing read, with the layers it has. */
export interface DrawingRead {
  readonly read: ReadPlan
  readonly layers: readonly string[]
  /** Of the file's bytes; null: not known. */
  readonly sha256: string | null
}

export interface Engine {
  read(file: NamedBytes, options: OpeningOptions, onProgress: (progress: Progress) => void): Promise<Result<DrawingRead> | null>
  /** The last question wins: earlier ones come back as null. */
  answer(doc: Doc, onProgress: (progress: Progress) => void): Promise<Result<Omit<Answer, 'plan'>> | null>
  /** The independent ways left under the last answer's conditions, smoothest first. */
  ways(doc: Doc, count: number): Promise<Result<readonly Way[]> | null>
  /** Why a joint cannot fold in any roof of the last answer; null: it can. */
  whyFrozen(doc: Doc, joint: number): Promise<Result<FrozenReason | null> | null>
  /** What letting go of one condition of the last answer would give. */
  releases(doc: Doc): Promise<Result<readonly Release[]> | null>
  /** What it takes where the last answer is not a plain yes. */
  cures(doc: Doc, onProgress: (progress: Progress) => void): Promise<Result<CureList> | null>
  /** One of the cures that were listed last, applied. */
  applied(doc: Doc, cure: Pick<Cure, 'code' | 'name'>): Promise<Result<AppliedCure> | null>
  /** Whether joints can all fold one way in a roof of the last answer. */
  oneWay(doc: Doc, joints: 'all' | readonly string[], onProgress: (progress: Progress) => void): Promise<Result<OneWayTold> | null>
  /** The plan that densities balance; the last question wins. */
  balance(doc: Doc, densities: LiveDensities, onProgress: (progress: Progress) => void): Promise<Result<LiveBalance> | null>
  mirrors(doc: Doc): Promise<Result<readonly MirrorLine[]> | null>
  /** Heights of a second surface over the plan's nodes. */
  surface(doc: Doc, file: NamedBytes): Promise<Result<Float64Array> | null>
  /** Files to take away: model and lists. */
  files(doc: Doc): Promise<Result<readonly NamedBytes[]> | null>
  stop(): void
  /** Ends the worker. */
  close(): void
}
