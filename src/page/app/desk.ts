/** The page's one object: its state, the worker it asks, and every command as a method that components and keys call. */
import { counted, figure } from '../../paper/drawing/figures.ts'
import type { Selection } from '../../paper/drawing/plan-drawing.ts'
import { fail, type Problem, type Result } from '../../base/result.ts'
import { emptyBrief, type Brief } from '../../plan/project/brief.ts'
import type { Condition } from '../../plan/project/condition.ts'
import { softened, switched, withCondition, withoutConditions, withRise } from '../../plan/project/edits.ts'
import { projectOf } from '../../plan/project/project-record.ts'
import { withVoids } from '../../plan/project/turned-face.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { briefInUnit, openBrief } from './brief-file.ts'
import type { Engine, NamedBytes } from './engine.ts'
import { answered, switchedLayer, turnedVoid } from './opening.ts'
import { openProject } from './project-file.ts'
import { initialState, openingOptions, type Doc, type OpeningOptions, type State, type Step } from './state.ts'
import { gone, held, putDown, taken } from './steps.ts'
import { createStore, type Store } from './store.ts'

/** After this long a question shows its bar. */
const busyAfter = 1000

/** Slope below which panels of a new plan are marked: where water is said to stay on glass, common practice, no source. */
const usualLeastSlope_deg = 3

export class Desk {
  readonly store: Store<State>
  private readonly engine: Engine
  private asked: Doc | null = null
  private question = 0
  /** A newer document waits for the running question to end. */
  private behind = false
  private readonly answers = new WeakMap<Doc, Answer>()

  constructor(engine: Engine, initial: Partial<State> = {}) {
    this.engine = engine
    this.store = createStore<State>({ ...initialState, ...initial })
  }

  get state(): State {
    return this.store.state()
  }

  /** The document that an edit starts from: that of the last step, also while another edit is in hand. */
  get standing(): Doc | null {
    return this.state.steps[this.state.at]?.doc ?? null
  }

  set(change: Partial<State>): void {
    this.store.update((state) => ({ ...state, ...change }))
  }

  select(selection: Selection | null): void {
    this.set({ selection })
  }

  /** Back to a stock view, or to the same one again. */
  view(side: State['side']): void {
    this.set({ side, turned: null, views: this.state.views + 1 })
  }

  showDesk(desk: State['desk']): void {
    this.set({ desk })
    if (desk === 'ways' && this.state.ways === null) void this.askWays()
  }

  /** Lays an earlier step beside the one in force. */
  compare(step: number | null): void {
    this.set({ compared: step })
  }

  /** The answer that a step had, if it was shown. */
  answerOf(step: number): Answer | null {
    const doc = this.state.steps[step]?.doc
    return doc === undefined ? null : (this.answers.get(doc) ?? null)
  }

  // Opening

  /** A project opens as it was left; anything else is a drawing, to be read and accepted. */
  async openFile(name: string, bytes: Uint8Array, more: { readonly brief?: string; readonly scale?: number | null } = {}): Promise<void> {
    const brief = /\.json$/i.test(name) ? openBrief(name, new TextDecoder().decode(bytes)) : null
    if (brief !== null) return this.layBrief(brief, name)
    const project = /\.json$/i.test(name) ? openProject(name, bytes) : null
    if (project === null) {
      this.set({ opening: null })
      const beside = more.brief === undefined ? null : openBrief(name, more.brief)
      await this.open({ name, bytes }, { ...openingOptions, scale: more.scale ?? null }, beside !== null && beside.ok ? beside.value : null)
    } else if (project.ok) this.begin(project.value, 'Opened', name)
    else this.set({ problem: project.problem, opening: null })
  }

  /** Goes on with a project that this browser kept. */
  goOn(saved: { readonly name: string; readonly text: string }): void {
    const project = openProject('kept.panewise.json', new TextEncoder().encode(saved.text))
    if (project === null) return
    if (project.ok) this.begin(project.value, 'Gone on with', 'as this browser kept it')
    else this.set({ problem: project.problem })
  }

  /** A brief that is dropped takes the place of what was asked before. */
  private layBrief(brief: Result<Brief>, name: string): void {
    const { doc, opening } = this.state
    if (!brief.ok) this.set({ problem: brief.problem })
    else if (opening !== null) void this.open(opening.file, opening.options, brief.value)
    else if (doc !== null) this.layOver(doc, briefInUnit(brief.value, doc.read.plan.unit), name)
    else this.set({ problem: fail('no-drawing', 'a brief needs a drawing', { file: name }, 'open the drawing first').problem })
  }

  /** Voids that it names become voids of the plan; heights set by hand give way to what it asks. */
  private layOver(doc: Doc, brief: Brief, name: string): void {
    const made = withVoids({ ...doc, brief: { ...brief, voids: null }, target: null }, brief.voids ?? [])
    if (!made.ok) return this.set({ problem: made.problem })
    // The plan is another one where a face turned: what was picked on it is put down.
    const isOther = made.value.read !== doc.read
    if (isOther) this.set({ selection: null, picked: [], answer: null })
    this.take({ doc: made.value, what: name, before: 'brief laid over the plan' })
  }

  /** A second surface for the roof to come near to. */
  async nearSurface(file: NamedBytes): Promise<void> {
    const { doc } = this.state
    if (doc === null) return
    const made = await this.working(() => this.engine.surface(doc, file))
    if (made === null || this.state.doc !== doc) return
    if (!made.ok) this.set({ problem: made.problem })
    else this.take({ doc: { ...withRise(doc, null), target: made.value }, what: `Near to ${file.name}`, before: 'was another shape' })
  }

  chooseRepair(repair: number): void {
    const { opening } = this.state
    if (opening !== null) this.set({ opening: { ...opening, chosenRepair: opening.chosenRepair === repair ? -1 : repair } })
  }

  /** A face clicked turns from panel to void or back. */
  toggleVoid(x: number, y: number): void {
    const { opening } = this.state
    const change = opening === null ? null : turnedVoid(opening, x, y)
    if (change !== null) this.reopen(change)
  }

  switchLayer(layer: string): void {
    const { opening } = this.state
    if (opening !== null) this.reopen(switchedLayer(opening, layer))
  }

  /** Answers a reader's question with one of the options it names. */
  answerQuestion(option: string): void {
    const { opening } = this.state
    const change = opening === null ? null : answered(opening.options, option)
    if (change !== null) this.reopen(change)
  }

  async open(file: NamedBytes, options: OpeningOptions = openingOptions, brief: Brief | null = this.state.opening?.brief ?? null): Promise<void> {
    const started = performance.now()
    const before = this.state.opening
    this.set({ problem: null, opening: { file, read: before?.read ?? null, problem: null, options, layers: before?.layers ?? [], chosenRepair: -1, sha256: null, brief, ms: 0 } })
    const result = await this.working((onProgress) => this.engine.read(file, options, onProgress))
    if (result === null || this.state.opening?.file !== file || this.state.opening.options !== options) return
    const ms = performance.now() - started
    if (!result.ok) {
      // Outside a drawing the sentence sits in the verdict cell, and the open project is untouched.
      if (before === null || before.read === null) this.set({ opening: null, problem: result.problem })
      else this.set({ opening: { ...this.state.opening, problem: result.problem, ms } })
      return
    }
    const { read, layers, sha256 } = result.value
    const voids = brief === null ? null : briefInUnit(brief, read.plan.unit).voids
    if (voids !== null && before === null && options.voids.length === 0) {
      await this.open(file, { ...options, voids }, brief)
      return
    }
    // Switched off layers stay on the list.
    const known = before !== null && before.file === file ? before.layers : layers
    this.set({ opening: { ...this.state.opening, read, layers: known, sha256, problem: null, ms } })
  }

  reopen(change: Partial<OpeningOptions>): void {
    const { opening } = this.state
    if (opening !== null) void this.open(opening.file, { ...opening.options, ...change })
  }

  accept(): void {
    const { opening } = this.state
    if (opening === null || opening.read === null || opening.problem !== null) return
    const brief = briefInUnit(opening.brief ?? emptyBrief, opening.read.plan.unit)
    const doc = projectOf(opening.read, { name: opening.file.name, sha256: opening.sha256, brief: { ...brief, voids: null }, target: null, leastSlope: usualLeastSlope_deg })
    const { panels, repairs } = { panels: opening.read.plan.panelCount, repairs: opening.read.repairs.length }
    this.begin(doc, 'Opened', `${counted(panels, 'panel')}, ${counted(repairs, 'repair')}`)
  }

  /** Starts anew with a document: its first step. */
  begin(opened: Doc, what: string, before: string): void {
    // Edits of the page are in the plan's unit.
    const doc = { ...opened, brief: briefInUnit(opened.brief, opened.read.plan.unit) }
    this.store.update((state) => ({ ...state, opening: null, problem: null, doc, steps: [{ doc, what, before }], at: 0, inHand: null, before: null, answer: null, fresh: false, selection: null, picked: [], ways: null, compared: null, saved: '' }))
    void this.ask()
  }

  putAway(): void {
    this.engine.stop()
    this.set({ opening: null, busy: null })
    if (!this.state.fresh) void this.ask()
  }

  // Steps

  take(step: Step): void {
    this.store.update((state) => ({ ...taken(state, step), before: null }))
    void this.ask()
  }

  hold(step: Step): void {
    this.store.update((state) => held(state, step))
    void this.ask()
  }

  putDown(keep: boolean): void {
    if (this.state.inHand === null) return
    this.store.update((state) => putDown(state, keep))
    void this.ask()
  }

  undo(): void {
    this.goTo(this.state.at - 1)
  }

  redo(): void {
    this.goTo(this.state.at + 1)
  }

  goTo(step: number): void {
    this.store.update((state) => gone(state, step))
    // What was answered once is shown at once; the worker is asked all the same, since files and ways come from its last answer.
    const known = this.state.doc === null ? undefined : this.answers.get(this.state.doc)
    if (known !== undefined) this.set({ answer: known, ways: null })
    void this.ask()
  }

  /** Changes the brief as a named step. */
  brief(change: Partial<Doc['brief']>, what: string, before: string): void {
    const { doc } = this.state
    if (doc !== null) this.take({ doc: { ...doc, brief: { ...doc.brief, ...change } }, what, before })
  }

  /** Puts a condition down, in the place of the one of its name. */
  condition(condition: Condition, what: string): void {
    const doc = this.standing
    if (doc !== null) this.take({ doc: withCondition(doc, condition), what, before: wasWords(doc, condition) })
  }

  /** The same while the hand still moves it. */
  holdCondition(condition: Condition, what: string, before: string | null = null): void {
    const doc = this.standing
    if (doc !== null) this.hold({ doc: withCondition(doc, condition), what, before: before ?? wasWords(doc, condition) })
  }

  release(names: readonly string[]): void {
    const { doc } = this.state
    if (doc === null || names.length === 0) return
    this.take({ doc: withoutConditions(doc, names), what: names.length === 1 ? `${names[0]} released` : `${names.length} conditions released`, before: 'was held' })
  }

  switchCondition(name: string): void {
    const { doc } = this.state
    const condition = doc?.brief.conditions.find((other) => other.name === name)
    if (doc === null || condition === undefined) return
    const isOff = condition.off === true
    this.take({ doc: switched(doc, name, !isOff), what: `${name} ${isOff ? 'on' : 'off'}`, before: isOff ? 'was off' : 'was on' })
  }

  /** Exact, or soft with a weight. */
  soften(name: string, soft: number | null): void {
    const { doc } = this.state
    const was = doc?.brief.conditions.find((other) => other.name === name)
    if (doc === null || was === undefined || was.soft === soft) return
    this.take({ doc: softened(doc, name, soft), what: soft === null ? `${name} exactly` : `${name} softly, weight ${figure(soft, 2)}`, before: was.soft === null ? 'was exact' : `was soft, weight ${figure(was.soft, 2)}` })
  }

  // Answers

  /**
   * Asks the worker about the document in force; the last question wins, stale answers are dropped. While something is in
   * hand a running question is let finish and the newest follows it: cancelling each for the next would show none at all.
   */
  async ask(): Promise<void> {
    const { doc, inHand } = this.state
    if (doc === null || this.asked === doc) return
    if (this.asked !== null && inHand !== null) {
      this.behind = true
      return
    }
    this.asked = doc
    this.behind = false
    const started = performance.now()
    const result = await this.working((onProgress) => this.engine.answer(doc, onProgress))
    if (this.asked === doc) this.asked = null
    const isNow = this.state.doc === doc
    if (result !== null && (isNow || this.state.inHand !== null)) this.show(doc, result, isNow, performance.now() - started)
    if (this.behind && this.asked === null) {
      this.behind = false
      void this.ask()
    }
  }

  private show(doc: Doc, result: Result<Omit<Answer, 'plan'>>, isNow: boolean, answerMs: number): void {
    if (!result.ok) {
      this.set({ problem: result.problem, fresh: true })
      return
    }
    // The plan stays here: it does not come back with every answer.
    const answer = { ...result.value, plan: doc.read.plan }
    this.answers.set(doc, answer)
    this.set({ answer, fresh: isNow, problem: null, answerMs })
    if (this.state.inHand === null && this.state.desk === 'ways') void this.askWays()
    else this.set({ ways: this.state.inHand === null ? null : this.state.ways })
  }

  /** Asks for the ways left; they are shown only on the desk that lists them. */
  async askWays(): Promise<void> {
    const { doc, answer } = this.state
    if (doc === null || answer === null) return
    const result = await this.engine.ways(doc, 12)
    if (result !== null && result.ok && this.state.answer === answer) this.set({ ways: result.value })
  }

  files(): Promise<Result<readonly NamedBytes[]> | null> {
    const { doc } = this.state
    if (doc === null) return Promise.resolve(fail('nothing-open', 'no drawing is open', null, 'open one first'))
    return this.engine.files(doc)
  }

  /** Stops the work in hand and goes back to the last step that was answered. */
  stop(): void {
    this.engine.stop()
    this.asked = null
    this.set({ busy: null, fresh: true })
    if (this.state.inHand !== null) this.store.update((state) => putDown(state, false))
    else if (this.state.answer !== null && this.state.at > 0) this.store.update((state) => ({ ...gone(state, state.at - 1), fresh: true }))
  }

  private async working<T>(work: (onProgress: (progress: { stage: string; done: number }) => void) => Promise<T>): Promise<T> {
    const question = (this.question += 1)
    const since = performance.now()
    try {
      return await work((progress) => {
        if (question === this.question && performance.now() - since > busyAfter) this.set({ busy: { ...progress, since } })
      })
    } catch (error) {
      this.set({ problem: bug(error) })
      return null as T
    } finally {
      if (question === this.question && this.state.busy !== null) this.set({ busy: null })
    }
  }
}

const wasWords = (doc: Doc, { name }: Condition): string => (doc.brief.conditions.some((other) => other.name === name) ? 'was otherwise' : 'was free')

function bug(error: unknown): Problem {
  return { code: 'bug', message: `the program has made a mistake: ${error instanceof Error ? error.message : String(error)}`, where: null, cure: 'undo the last step and report it' }
}
