/** The page's one object: its state, the worker it asks, and every command as a method that components and keys call. */
import { counted, figure } from '../../paper/drawing/figures.ts'
import type { Selection } from '../../paper/drawing/plan-drawing.ts'
import { fail, type Result } from '../../base/result.ts'
import { emptyBrief, type Brief } from '../../plan/project/brief.ts'
import type { Condition } from '../../plan/project/condition.ts'
import { softened, switched, withCondition, withoutConditions, withRise } from '../../plan/project/edits.ts'
import { indexOfName, panelName } from '../../plan/names.ts'
import { projectOf } from '../../plan/project/project-record.ts'
import { asymmetry, imageName, symmetricConditions, symmetricHeights } from '../../plan/project/mirrored.ts'
import { turnedFace, withVoids } from '../../plan/project/turned-face.ts'
import type { MirrorLine } from '../../job/session.ts'
import { briefInUnit, openBrief } from './brief-file.ts'
import { Curing } from './curing.ts'
import type { NamedBytes } from './engine.ts'
import { answered, switchedLayer, turnedVoid } from './opening.ts'
import { openProject } from './project-file.ts'
import { openingOptions, type Doc, type OpeningOptions, type State } from './state.ts'
import { gone } from './steps.ts'

/** Slope below which panels of a new plan are marked: where water is said to stay on glass, common practice, no source. */
const usualLeastSlope_deg = 3

export class Desk extends Curing {
  select(selection: Selection | null): void {
    this.set({ selection })
  }

  /** Adds a thing to those picked together, or takes it out again; another kind starts anew. */
  gather({ kind, index }: Selection): void {
    const { gathered, selection } = this.state
    const before = gathered !== null && gathered.kind === kind ? gathered.indices : selection !== null && selection.kind === kind && selection.index !== index ? [selection.index] : []
    const indices = before.includes(index) ? before.filter((other) => other !== index) : [...before, index]
    this.set({ gathered: indices.length === 0 ? null : { kind, indices }, selection: { kind, index }, picked: [] })
  }

  /** Picks on the plan what a condition holds. */
  locate({ name }: Condition): void {
    const held = this.state.answer?.conditions.find((condition) => condition.name === name)
    const at = this.state.doc?.brief.conditions.find((condition) => condition.name === name)?.at
    const named = (spots: readonly unknown[], letter: 'P' | 'J'): number[] => spots.flatMap((spot) => (typeof spot === 'string' ? [indexOfName(spot, letter)] : [])).filter((index) => index >= 0)
    const together = (kind: Selection['kind'], indices: readonly number[]): void => this.set({ selection: indices.length === 1 ? { kind, index: indices[0] } : null, gathered: indices.length > 1 ? { kind, indices } : null, picked: [] })
    if (at === undefined) return
    if ('panels' in at && at.panels !== 'all') together('panel', named(at.panels, 'P'))
    else if ('joints' in at) together('joint', named(at.joints, 'J'))
    else if (held !== undefined) {
      if ('run' in at || 'rim' in at) this.set({ picked: Array.from(held.nodes), selection: null, gathered: null })
      else together('node', Array.from(held.nodes))
    }
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
    this.set({ compared: step, beside: null })
  }

  /** Lays another project beside the one in hand; null: puts it away. */
  async compareWith(file: NamedBytes | null): Promise<void> {
    if (file === null) return this.set({ beside: null })
    const made = await this.answerOfProject(file)
    if (made === null) return
    if (!made.ok) this.set({ problem: made.problem })
    else this.set({ beside: made.value, compared: null })
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
  goOn(saved: { readonly id: string; readonly text: string }): void {
    const project = openProject('kept.panewise.json', new TextEncoder().encode(saved.text))
    if (project === null) return
    if (project.ok) this.begin(project.value, 'Gone on with', 'as this browser kept it', saved.id)
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
    if (isOther) this.set({ answer: null })
    this.take({ doc: made.value, what: name, before: 'brief laid over the plan' })
    if (isOther) this.otherPlan(null)
  }

  /** A second surface for the roof to come near to: a file with heights, or the roof of another project. */
  async nearSurface(file: NamedBytes): Promise<void> {
    const { doc } = this.state
    if (doc === null) return
    const surface = await this.surfaceIn(file)
    if (surface === null) return
    const made = surface.ok ? await this.working(() => this.engine.surface(doc, surface.value)) : surface
    if (made === null || this.state.doc !== doc) return
    if (!made.ok) this.set({ problem: made.problem })
    else this.take({ doc: { ...withRise(doc, null), target: made.value }, what: `Near to ${file.name}`, before: 'was another shape' })
  }

  private async surfaceIn(file: NamedBytes): Promise<Result<NamedBytes> | null> {
    if (openProject(file.name, file.bytes) === null) return { ok: true, value: file }
    let roof: NamedBytes | undefined
    const made = await this.answerOfProject(file, async (engine, doc) => {
      const files = await engine.files(doc)
      if (files !== null && files.ok) roof = files.value.find(({ name }) => name === 'roof.obj')
    })
    if (made === null || !made.ok) return made
    return roof === undefined ? fail('no-target', 'this project has no roof', { file: file.name }) : { ok: true, value: roof }
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
  begin(opened: Doc, what: string, before: string, keptAs: string | null = null): void {
    // Edits of the page are in the plan's unit.
    const doc = { ...opened, brief: briefInUnit(opened.brief, opened.read.plan.unit) }
    this.store.update((state) => ({ ...state, opening: null, problem: null, doc, steps: [{ doc, what, before }], at: 0, inHand: null, before: null, answer: null, fresh: false, selection: null, picked: [], ways: null, compared: null, beside: null, releases: null, cures: null, oneWay: null, balance: null, mirrors: null, mirror: null, gathered: null, elsewhere: '', saved: '', keptAs }))
    void this.ask()
    void this.askMirrors()
  }

  putAway(): void {
    this.engine.stop()
    this.set({ opening: null, busy: null })
    if (!this.state.fresh) void this.ask()
  }

  // Steps

  undo(): void {
    this.goTo(this.state.at - 1)
  }

  redo(): void {
    this.goTo(this.state.at + 1)
  }

  goTo(step: number): void {
    const before = this.state.doc?.read
    this.store.update((state) => gone(state, step))
    const { doc } = this.state
    // What was answered once is shown at once; the worker is asked all the same, since files and ways come from its last answer.
    const known = doc === null ? undefined : this.answers.get(doc)
    if (known !== undefined) this.set({ answer: known, ways: null, releases: null, cures: null, oneWay: null })
    if (doc?.read !== before) this.otherPlan(known ?? null)
    void this.ask()
  }

  /** Changes the brief as a named step. */
  brief(change: Partial<Doc['brief']>, what: string, before: string): void {
    const { doc } = this.state
    if (doc !== null) this.take({ doc: { ...doc, brief: { ...doc.brief, ...change } }, what, before })
  }

  /** Puts a condition down, in the place of the one of its name; with its image where symmetry is kept. */
  condition(condition: Condition, what: string): void {
    const doc = this.standing
    const next = doc === null ? null : this.withKept(doc, condition)
    if (doc !== null && next !== null) this.take({ doc: next, what, before: wasWords(doc, condition) })
  }

  /** The same while the hand still moves it. */
  holdCondition(condition: Condition, what: string, before: string | null = null): void {
    const doc = this.standing
    const next = doc === null ? null : this.withKept(doc, condition)
    if (doc !== null && next !== null) this.hold({ doc: next, what, before: before ?? wasWords(doc, condition) })
  }

  private withKept(doc: Doc, condition: Condition): Doc | null {
    const { mirror } = this.state
    if (mirror === null) return withCondition(doc, condition)
    const made = symmetricConditions(doc.read.plan, mirror, condition)
    if (made.ok) return made.value.reduce(withCondition, doc)
    this.set({ problem: made.problem })
    return null
  }

  /** These conditions and, where symmetry is kept, those that are their images. */
  private paired(doc: Doc, names: readonly string[]): readonly string[] {
    const { mirror } = this.state
    if (mirror === null) return names
    const images = names.map((name) => imageName(doc.read.plan, mirror, name))
    return doc.brief.conditions.map(({ name }) => name).filter((name) => names.includes(name) || images.includes(name))
  }

  /** Keeps the roof symmetric about a line from now on: conditions get their images, the roof comes near to itself and its image. */
  keepSymmetric(mirror: MirrorLine | null): void {
    const { doc, answer } = this.state
    this.set({ mirror })
    if (mirror === null || doc === null) return
    const { plan } = doc.read
    let next: Doc = doc
    for (const condition of doc.brief.conditions) {
      const made = symmetricConditions(plan, mirror, condition)
      if (!made.ok) return this.set({ problem: made.problem, mirror: null })
      next = made.value.reduce((before, one) => (one.name !== condition.name && doc.brief.conditions.some(({ name }) => name === one.name) ? before : withCondition(before, one)), next)
    }
    const heights = answer?.roof?.heights
    const isEven = heights === undefined || asymmetry(mirror, heights) < evenShare * plan.frame.span
    if (!isEven) next = { ...withRise(next, null), target: symmetricHeights(mirror, heights) }
    const grown = next.brief.conditions.length - doc.brief.conditions.length
    if (!isEven || grown > 0) this.take({ doc: next, what: 'Symmetric', before: grown > 0 ? `${counted(grown, 'condition')} mirrored` : 'was not' })
  }

  release(names: readonly string[]): void {
    const { doc } = this.state
    if (doc === null || names.length === 0) return
    this.take({ doc: withoutConditions(doc, this.paired(doc, names)), what: names.length === 1 ? `${names[0]} released` : `${names.length} conditions released`, before: 'was held' })
  }

  switchCondition(name: string): void {
    const { doc } = this.state
    const condition = doc?.brief.conditions.find((other) => other.name === name)
    if (doc === null || condition === undefined) return
    const isOff = condition.off === true
    this.take({ doc: this.paired(doc, [name]).reduce((next, each) => switched(next, each, !isOff), doc), what: `${name} ${isOff ? 'on' : 'off'}`, before: isOff ? 'was off' : 'was on' })
  }

  /** Takes a panel out of the roof: it is a void from now on. Conditions go with what they hold. */
  turnToVoid(panel: number): void {
    const { doc } = this.state
    if (doc === null) return
    const face = Array.from(doc.faces.isVoid.keys()).filter((f) => doc.faces.isVoid[f] === 0)[panel]
    const made = turnedFace(doc, face)
    if (!made.ok) return this.set({ problem: made.problem })
    const { project, released } = made.value
    this.set({ answer: null })
    this.take({ doc: project, what: `${panelName(panel)} is a void`, before: released.length === 0 ? 'was a panel' : `${released.join(', ')} released` })
    this.otherPlan(null)
  }

  /** Exact, or soft with a weight. */
  soften(name: string, soft: number | null): void {
    const { doc } = this.state
    const was = doc?.brief.conditions.find((other) => other.name === name)
    if (doc === null || was === undefined || was.soft === soft) return
    this.take({ doc: this.paired(doc, [name]).reduce((next, each) => softened(next, each, soft), doc), what: soft === null ? `${name} exactly` : `${name} softly, weight ${figure(soft, 2)}`, before: was.soft === null ? 'was exact' : `was soft, weight ${figure(was.soft, 2)}` })
  }
}

/** A roof that differs from its image by less of the span is symmetric. */
const evenShare = 1e-7

const wasWords = (doc: Doc, { name }: Condition): string => (doc.brief.conditions.some((other) => other.name === name) ? 'was otherwise' : 'was free')
