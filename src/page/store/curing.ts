/** The part of the desk that makes plans lift: cures listed, drawn and applied, one-way folds, the plan balanced in hand. */
import { counted, figure } from '../../paper/drawing/figures.ts'
import { jointName } from '../../plan/names.ts'
import { withChangedPlan } from '../../plan/project/changed-plan.ts'
import { withRise } from '../../plan/project/edits.ts'
import { indexOfName } from '../../plan/names.ts'
import { ok, type Result } from '../../base/result.ts'
import type { AppliedCure, LiveBalance, LiveDensities } from '../../job/session.ts'
import type { Cure } from '../../roof/answer/cure.ts'
import { Asking } from './asking.ts'
import { briefInUnit } from './brief-file.ts'
import type { Doc } from './state.ts'
import { held } from './steps.ts'

const densityWords = { uniform: 'uniform densities', length: 'densities by length', fit: 'fitted densities' } as const

export class Curing extends Asking {
  /** Asks what it takes; nothing while something is in hand or the answer is a plain yes. */
  async askCures(): Promise<void> {
    const { doc, answer, fresh, inHand } = this.state
    if (doc === null || answer === null || !fresh || inHand !== null || answer.summary.verdict === 'lifts') return
    const result = await this.working((onProgress) => this.engine.cures(doc, onProgress))
    if (result === null || this.state.answer !== answer) return
    if (!result.ok) return this.set({ problem: result.problem })
    const moving = result.value.cures.find(({ code }) => code === 'move-nodes')
    const applied = moving === undefined ? null : await this.engine.applied(doc, moving)
    if (this.state.answer !== answer) return
    this.set({ cures: { list: result.value, moved: applied !== null && applied.ok ? applied.value.read.plan : null, drawn: -1 } })
  }

  /** Draws a cure on the plan, or takes it off again. */
  drawCure(place: number): void {
    const { cures } = this.state
    if (cures !== null) this.set({ cures: { ...cures, drawn: cures.drawn === place ? -1 : place } })
  }

  /** Applies a cure as a step of its own. */
  async applyCure(cure: Cure): Promise<void> {
    const { doc, answer } = this.state
    if (doc === null || answer === null) return
    const applied = await this.engine.applied(doc, cure)
    if (applied === null || this.state.doc !== doc) return
    const made = applied.ok ? curedDoc(doc, applied.value, cure) : applied
    if (!made.ok) return this.set({ problem: made.problem })
    const isOther = made.value.read !== doc.read
    if (isOther) this.set({ answer: null })
    this.take({ doc: made.value, ...stepWords(cure) })
    if (isOther) this.otherPlan(null)
  }

  /** Asks whether these joints can all fold one way; those that cannot together are picked on the plan. */
  async askOneWay(joints: readonly number[] | null): Promise<void> {
    const { doc, answer } = this.state
    if (doc === null || answer === null) return
    this.set({ oneWay: null })
    const result = await this.working((onProgress) => this.engine.oneWay(doc, joints === null ? 'all' : joints.map(jointName), onProgress))
    if (result === null || this.state.answer !== answer) return
    if (!result.ok) return this.set({ problem: result.problem })
    this.set({ oneWay: result.value })
    if (result.value.facts.certificate.length > 0) this.pickCertificate()
  }

  pickCertificate(): void {
    const indices = this.state.oneWay?.facts.certificate.map(({ joint }) => indexOfName(joint, 'J')) ?? []
    if (indices.length > 0) this.set({ gathered: { kind: 'joint', indices }, selection: { kind: 'joint', index: indices[0] }, picked: [] })
  }

  /** The roof in which they all fold one way becomes the one to come near to. */
  takeOneWay(): void {
    const { doc, oneWay } = this.state
    if (doc === null || oneWay === null || oneWay.heights === null) return
    this.take({ doc: { ...withRise(doc, null), target: oneWay.heights }, what: 'Folded one way', before: `${counted(oneWay.facts.joints, 'joint')} as ridges` })
  }

  /** Balances the plan of the last step with these densities: it is in hand until it is kept or put away. */
  async balance(densities: LiveDensities): Promise<void> {
    const doc = this.standing
    if (doc === null) return
    const last = this.state.balance?.last ?? null
    this.set({ balance: { densities, last } })
    const result = await this.working((onProgress) => this.engine.balance(doc, densities, onProgress))
    if (result === null || this.standing !== doc || this.state.balance?.densities !== densities) return
    if (!result.ok) return this.set({ problem: result.problem })
    const made = balancedDoc(doc, result.value, densities)
    if (!made.ok) return this.set({ problem: made.problem })
    this.set({ balance: { densities, last: result.value }, problem: null })
    if (made.value === null) return
    const { largest_mm } = result.value
    const step = { doc: made.value, what: `Balanced with ${densityWords[densities.from]}${densities.typed.length > 0 ? `, ${densities.typed.length} typed` : ''}`, before: `nodes moved by at most ${figure(largest_mm, largest_mm < 10 ? 1 : 0)} mm` }
    this.store.update((state) => held(state, step))
    void this.ask()
  }

  /** Keeps the balanced plan as a step, or goes back to the plan before. */
  endBalance(keep: boolean): void {
    this.putDown(keep)
    this.set({ balance: null })
    if (keep) void this.askMirrors()
  }
}

/** The document with a cure applied: what it held of the plan changes only where the cure changes the plan. */
function curedDoc(doc: Doc, { read, brief, target, changesPlan }: AppliedCure, cure: Cure): Result<Doc> {
  const asked = { ...doc, brief: briefInUnit(brief, doc.read.plan.unit), target }
  return changesPlan ? withChangedPlan(asked, read, `Done to the drawing: ${cure.message}`) : ok(asked)
}

function balancedDoc(doc: Doc, { next }: LiveBalance, { from }: LiveDensities): Result<Doc | null> {
  if (next === null) return ok(null)
  const asked = { ...doc, brief: { ...doc.brief, shape: null }, target: next.heights }
  return withChangedPlan(asked, { plan: next.plan, heights: doc.read.heights }, `Done to the drawing: balanced with ${densityWords[from]}.`)
}

/** A cure as a step of the list: what was done, what was before. */
function stepWords({ code, name, count, largest_mm }: Cure): { what: string; before: string } {
  const mm = largest_mm === null ? '' : ` by at most ${figure(largest_mm, largest_mm < 10 ? 1 : 0)} mm`
  switch (code) {
    case 'accept-deviation': return { what: 'Built as drawn', before: `corners out of plane${mm}` }
    case 'move-nodes': return { what: `Nodes moved${mm}`, before: 'were as drawn' }
    case 'pack-rim': return { what: `Rim packed${mm}`, before: 'was at its levels' }
    case 'add-diagonals': return { what: counted(count, 'diagonal'), before: 'panels were undivided' }
    case 'remove-joints': return { what: `${counted(count, 'joint')} left out`, before: 'folded in no roof' }
    case 'release': return { what: `${name ?? 'condition'} released`, before: 'was held' }
  }
}
