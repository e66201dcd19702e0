/** The page's one object: its state, the worker it asks, and every command as a method that components and keys call. */
import { counted } from '../../paper/drawing/figures.ts'
import { isUnit } from '../../base/length.ts'
import { fail, type Problem, type Result } from '../../base/result.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { panelAt } from './picking.ts'
import { openProject } from './project-file.ts'
import type { Brief } from '../../plan/project/brief.ts'
import { briefInUnit, openBrief } from './brief-file.ts'
import type { Condition } from '../../plan/project/condition.ts'
import type { Selection } from '../../paper/drawing/plan-drawing.ts'
import type { Engine, NamedBytes } from './engine.ts'
import { initialState, newDoc, openingOptions, type Doc, type OpeningOptions, type State, type Step } from './state.ts'
import { gone, held, putDown, taken } from './steps.ts'
import { createStore, type Store } from './store.ts'

/** After this long a question shows its bar. */
const busyAfter = 1000

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
    else if (doc !== null) this.take({ doc: { ...doc, brief: { ...briefInUnit(brief.value, doc.plan.unit), voids: null } }, what: name, before: 'brief laid over the plan' })
    else this.set({ problem: fail('no-drawing', 'a brief needs a drawing', { file: name }, 'open the drawing first').problem })
  }

  /** A second surface for the roof to come near to. */
  async nearSurface(file: NamedBytes): Promise<void> {
    const { doc } = this.state
    if (doc === null) return
    const made = await this.working(() => this.engine.surface(doc, file))
    if (made === null || this.state.doc !== doc) return
    if (!made.ok) this.set({ problem: made.problem })
    else this.take({ doc: { ...doc, target: made.value, brief: { ...doc.brief, rise: null } }, what: `Near to ${file.name}`, before: 'was another shape' })
  }

  chooseRepair(repair: number): void {
    const { opening } = this.state
    if (opening !== null) this.set({ opening: { ...opening, chosenRepair: opening.chosenRepair === repair ? -1 : repair } })
  }

  /** A face clicked turns from panel to void or back. */
  toggleVoid(x: number, y: number): void {
    const { opening } = this.state
    if (opening === null || opening.read === null) return
    const { voids } = opening.options
    const { plan } = opening.read
    if (panelAt(plan, x, y) >= 0) {
      this.reopen({ voids: [...voids, [x, y]] })
      return
    }
    // A point within the void that was clicked: take away the one that lies in the same face.
    const nearest = voids.map(([vx, vy], i) => ({ i, d: Math.hypot(vx - x, vy - y) })).sort((a, b) => a.d - b.d)[0]
    if (nearest !== undefined && nearest.d < plan.frame.span) this.reopen({ voids: voids.filter((_, i) => i !== nearest.i) })
  }

  switchLayer(layer: string): void {
    const { opening } = this.state
    if (opening === null) return
    const on = opening.options.layers ?? opening.layers
    const layers = on.includes(layer) ? on.filter((name) => name !== layer) : [...on, layer]
    this.reopen({ layers: layers.length === opening.layers.length ? null : layers })
  }

  /** Answers a reader's question with one of the options it names, as typed on a command line. */
  answerQuestion(option: string): void {
    const match = /^--([a-z-]+)[ =](.+)$/.exec(option)
    if (match === null) return
    const [, name, value] = match
    if (name === 'unit' && isUnit(value)) this.reopen({ unit: value })
    else if (name === 'scale') this.reopen({ scale: Number(value.replace(/^1:/, '')) })
    else if (name === 'accept') this.reopen({ accept: [...(this.state.opening?.options.accept ?? []), value] })
    else if (name === 'snap') this.reopen({ snap_mm: Number.parseFloat(value) })
    else if (name === 'layers' || name === 'layer') this.reopen({ layers: value.split(',') })
  }

  async open(file: NamedBytes, options: OpeningOptions = openingOptions, brief: Brief | null = this.state.opening?.brief ?? null): Promise<void> {
    const started = performance.now()
    const before = this.state.opening
    this.set({ problem: null, opening: { file, read: before?.read ?? null, problem: null, options, layers: before?.layers ?? [], chosenRepair: -1, brief, ms: 0 } })
    const result = await this.working((onProgress) => this.engine.read(file, options, onProgress))
    if (result === null || this.state.opening?.file !== file || this.state.opening.options !== options) return
    const ms = performance.now() - started
    if (!result.ok) {
      // Outside a drawing the sentence sits in the verdict cell, and the open project is untouched.
      if (before === null || before.read === null) this.set({ opening: null, problem: result.problem })
      else this.set({ opening: { ...this.state.opening, problem: result.problem, ms } })
      return
    }
    const { read, layers } = result.value
    const voids = brief === null ? null : briefInUnit(brief, read.plan.unit).voids
    if (voids !== null && before === null && options.voids.length === 0) {
      await this.open(file, { ...options, voids }, brief)
      return
    }
    // Switched off layers stay on the list.
    const known = before !== null && before.file === file ? before.layers : layers
    this.set({ opening: { ...this.state.opening, read, layers: known, problem: null, ms } })
  }

  reopen(change: Partial<OpeningOptions>): void {
    const { opening } = this.state
    if (opening !== null) void this.open(opening.file, { ...opening.options, ...change })
  }

  accept(): void {
    const { opening } = this.state
    if (opening === null || opening.read === null || opening.problem !== null) return
    const brief = opening.brief === null ? undefined : briefInUnit(opening.brief, opening.read.plan.unit)
    const doc = newDoc(opening.file.name, opening.read, brief)
    const { panels, repairs } = { panels: opening.read.plan.panelCount, repairs: opening.read.repairs.length }
    this.begin(doc, 'Opened', `${counted(panels, 'panel')}, ${counted(repairs, 'repair')}`)
  }

  /** Starts anew with a document: its first step. */
  begin(doc: Doc, what: string, before: string): void {
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

  condition(condition: Condition, what: string): void {
    const { doc } = this.state
    if (doc === null) return
    const others = doc.brief.conditions.filter(({ name }) => name !== condition.name)
    const was = others.length === doc.brief.conditions.length ? 'was free' : 'was otherwise'
    this.brief({ conditions: [...others, condition] }, what, was)
  }

  release(names: readonly string[]): void {
    const { doc } = this.state
    if (doc === null || names.length === 0) return
    this.brief({ conditions: doc.brief.conditions.filter(({ name }) => !names.includes(name)) }, names.length === 1 ? `${names[0]} released` : `${names.length} conditions released`, 'was held')
  }

  switchCondition(name: string): void {
    const { doc } = this.state
    if (doc === null) return
    const isOff = doc.off.includes(name)
    this.take({ doc: { ...doc, off: isOff ? doc.off.filter((n) => n !== name) : [...doc.off, name] }, what: `${name} ${isOff ? 'on' : 'off'}`, before: isOff ? 'was off' : 'was on' })
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
    const answer = { ...result.value, plan: doc.plan }
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

function bug(error: unknown): Problem {
  return { code: 'bug', message: `the program has made a mistake: ${error instanceof Error ? error.message : String(error)}`, where: null, cure: 'undo the last step and report it' }
}
