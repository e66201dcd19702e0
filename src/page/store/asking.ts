/** The half of the desk that asks: the store, the worker's answers about the document in force, and what is asked besides. */
import { fail, type Problem, type Result } from '../../base/result.ts'
import type { FrozenReason } from '../../job/session.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { Engine, NamedBytes } from './engine.ts'
import { openProject } from './project-file.ts'
import { initialState, type Beside, type Doc, type State, type Step } from './state.ts'
import { gone, held, putDown, taken } from './steps.ts'
import { createStore, type Store } from './store.ts'

/** After this long a question shows its bar. */
const busyAfter = 1000

export class Asking {
  readonly store: Store<State>
  protected readonly engine: Engine
  private asked: Doc | null = null
  private question = 0
  /** A newer document waits for the running question to end. */
  private behind = false
  protected readonly answers = new WeakMap<Doc, Answer>()

  /** For a project beside the one in hand: a worker of its own, so that this one keeps its factor. */
  private readonly another: () => Engine

  constructor(engine: Engine, another: () => Engine, initial: Partial<State> = {}) {
    this.engine = engine
    this.another = another
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

  /** The answer that a step had, if it was shown. */
  answerOf(step: number): Answer | null {
    const doc = this.state.steps[step]?.doc
    return doc === undefined ? null : (this.answers.get(doc) ?? null)
  }

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
    performance.measure('answer', { start: performance.now() - answerMs, end: performance.now() })
    // The plan stays here: it does not come back with every answer.
    const answer = { ...result.value, plan: doc.read.plan }
    this.answers.set(doc, answer)
    this.set({ answer, fresh: isNow, problem: null, answerMs, releases: null, cures: null, oneWay: null })
    // Where nothing lifts, what it takes stands in the place of the ways left.
    if (this.state.desk === 'ways' && answer.summary.verdict === 'does not lift') this.set({ desk: 'cures' })
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

  /** Asks what letting go of one condition gives. */
  async askReleases(): Promise<void> {
    const { doc, answer } = this.state
    if (doc === null || answer === null) return
    const result = await this.engine.releases(doc)
    if (result !== null && result.ok && this.state.answer === answer) this.set({ releases: result.value })
  }

  protected async askMirrors(): Promise<void> {
    const { doc } = this.state
    if (doc === null) return
    const result = await this.engine.mirrors(doc)
    if (result !== null && result.ok && this.state.doc?.read === doc.read) this.set({ mirrors: result.value })
  }

  /** Why a joint cannot fold; null: it can, or it is not known. */
  async whyFrozen(joint: number): Promise<FrozenReason | null> {
    const { doc } = this.state
    const result = doc === null ? null : await this.engine.whyFrozen(doc, joint)
    return result !== null && result.ok ? result.value : null
  }

  take(step: Step): void {
    this.store.update((state) => ({ ...taken(state, step), before: null, balance: null }))
    void this.ask()
  }

  /** An edit in hand takes the place of the plan being balanced, as it does of any other. */
  hold(step: Step): void {
    this.store.update((state) => ({ ...held(state, step), balance: null }))
    void this.ask()
  }

  putDown(keep: boolean): void {
    if (this.state.inHand === null) return
    this.store.update((state) => ({ ...putDown(state, keep), balance: null }))
    void this.ask()
  }

  /** Nothing that was picked or found on the plan before means anything on another. */
  protected otherPlan(answer: Answer | null): void {
    this.set({ selection: null, picked: [], gathered: null, mirror: null, mirrors: null, answer })
    void this.askMirrors()
  }

  files(): Promise<Result<readonly NamedBytes[]> | null> {
    const { doc } = this.state
    if (doc === null) return Promise.resolve(fail('nothing-open', 'no drawing is open', null, 'open one first'))
    return this.engine.files(doc)
  }

  /** Stops the work in hand and goes back to the last step that was answered. */
  stop(): void {
    const answering = this.asked !== null
    this.engine.stop()
    this.asked = null
    this.set({ busy: null, fresh: true })
    // What is asked besides is stopped alone: the answer stands.
    if (!answering) return
    if (this.state.inHand !== null) this.store.update((state) => putDown(state, false))
    else if (this.state.answer !== null && this.state.at > 0) this.store.update((state) => ({ ...gone(state, state.at - 1), fresh: true }))
  }

  protected async working<T>(work: (onProgress: (progress: { stage: string; done: number }) => void) => Promise<T>): Promise<T> {
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

  /** Another project and its answer; null: stopped. */
  protected async answerOfProject(file: NamedBytes, then: (engine: Engine, doc: Doc) => Promise<unknown> = async () => null): Promise<Result<Beside> | null> {
    const opened = openProject(file.name, file.bytes)
    if (opened === null) return fail('not-a-project', 'this is not a project', { file: file.name }, 'take the other one away as panewise.json first')
    if (!opened.ok) return opened
    const doc = opened.value
    const engine = this.another()
    try {
      return await this.working(async (onProgress) => {
        const made = await engine.answer(doc, onProgress)
        if (made === null || !made.ok) return made
        await then(engine, doc)
        return { ok: true, value: { doc, answer: { ...made.value, plan: doc.read.plan } } } as const
      })
    } finally {
      engine.close()
    }
  }
}

function bug(error: unknown): Problem {
  return { code: 'bug', message: `the program has made a mistake: ${error instanceof Error ? error.message : String(error)}`, where: null, cure: 'undo the last step and report it' }
}
