/** The main job as a recipe: read, ask the plan, hold the conditions, raise, measure, say. */
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { interiorNodeCount, voidCount, type Plan } from '../plan/plan.ts'
import { jointName, nodeName, panelName } from '../plan/names.ts'
import { wishesOf, type Wishes } from '../plan/project/wishes.ts'
import type { ReadPlan } from '../plan/read-plan.ts'
import type { Answer, PlanFacts, Roof, RoofFacts, StressFacts, Summary } from '../roof/answer/answer.ts'
import { caution } from '../roof/answer/caution.ts'
import { conditionRows, type ConditionRows } from '../roof/conditions/condition-rows.ts'
import { largestZone } from '../roof/raise/flatness.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { raised, type Raised } from '../roof/raise/raise.ts'
import { outerRimNodes, rimVariation, riseOf, type RiseRule } from '../roof/raise/rise.ts'
import type { UnderConditions } from '../roof/raise/under-conditions.ts'
import { freeRim, type FreeRim } from '../roof/stress/free-rim.ts'
import { conversion } from '../base/length.ts'
import { withinPlan, type WithinPlan } from './plan-tolerance.ts'
import { planQuestion, type PlanQuestion } from './question.ts'
import { reasonFor } from './reason.ts'
import type { Request } from './request.ts'
import { targetOf } from './target.ts'
import { flatnessFacts, writtenCoordinates, type Written } from './written.ts'

export interface Checked {
  readonly answer: Answer
  readonly wishes: Wishes
  readonly rows: ConditionRows
  /** For the next question about the same plan. */
  readonly free: FreeRim
  readonly under: UnderConditions
}

/** The answer to a request; `version` and `sha256` go into its summary. */
export function* check(request: Request, version: string, sha256: string): Steps<Result<Checked>> {
  const question = yield* planQuestion(request, version, sha256)
  return question.ok ? yield* answerTo(question.value) : question
}

/** The second half of the job, which every edit of the brief repeats; the factor of the plan is found once and kept. */
export function* answerTo({ request, version, sha256, read, brief, target: byHand, free: known, space }: PlanQuestion): Steps<Result<Checked>> {
  const { plan } = read
  const wishes = wishesOf(brief, request.options, plan.unit)
  if (!wishes.ok) return wishes
  const target = yield* targetOf(request, wishes.value, read, byHand ?? null)
  if (!target.ok) return target
  const rows = conditionRows(plan, wishes.value.conditions, wishes.value.datum ?? 0)
  if (!rows.ok) return rows

  const free = known ?? (yield* freeRim(plan, space ?? null))
  const question = questionOf(plan, wishes.value, rows.value, target.value.heights)
  const result = yield* raised(plan, free, nodeAreas(plan), question, space ?? null)
  const within = yield* withinPlan(plan, result, wishes.value, rows.value, question, request.options, brief)
  if (!within.ok) return within
  const answer = yield* answerOf({
    request, version, sha256, read, wishes: wishes.value, rows: rows.value, free, result, within: within.value, notices: target.value.notices,
  })
  return ok({ answer, wishes: wishes.value, rows: rows.value, free, under: result.under })
}

/** The wishes in working measure: heights (z - datum) / span. */
export function questionOf(plan: Plan, wishes: Wishes, rows: ConditionRows, target: Float64Array | null): Parameters<typeof raised>[3] {
  const { span } = plan.frame
  const datum = wishes.datum ?? 0
  const tolerance = wishes.flat_mm * conversion('mm', plan.unit)
  return {
    rows, names: wishes.conditions.map(({ name }) => name), shape: wishes.shape ?? 'dome',
    target: target === null ? null : inSpans(target, datum, span),
    rise: wishes.rise === null ? null : wishes.rise / span,
    rule: { down: wishes.down, datum: wishes.datum === null ? null : 0 },
    pitched: wishes.pitch !== null,
    within: (heights) => largestZone(plan, plan.x, plan.y, heights.map((h) => h * span), tolerance) <= tolerance,
  }
}

interface Pieces {
  readonly request: Request
  readonly version: string
  readonly sha256: string
  readonly read: ReadPlan
  readonly wishes: Wishes
  readonly rows: ConditionRows
  readonly free: FreeRim
  readonly result: Raised
  /** The shift by which the plan lifts within its tolerance; null: it does not, or need not. */
  readonly within: WithinPlan | null
  readonly notices: readonly string[]
}

function* answerOf(pieces: Pieces): Steps<Answer> {
  const { request, read, wishes, rows, free, result } = pieces
  const { plan } = read
  const { span } = plan.frame
  const mm = conversion(plan.unit, 'mm')
  const heights = result.roof === null ? null : inUnit(result.roof.heights, span, wishes.datum ?? 0)
  const written = heights === null ? null : yield* writtenCoordinates(plan, heights, wishes.decimals)
  const { reason, reasonKind } = reasonFor(plan, free, result, rows, wishes.datum ?? 0)
  const isNear = result.roof !== null && !result.roof.exact
  const summary: Summary = {
    version: pieces.version,
    input: { name: request.source.name, sha256: pieces.sha256 },
    options: request.given,
    plan: planFacts(plan),
    repairs: read.repairs,
    questions: read.questions,
    leftOut: read.leftOut,
    notices: [...read.notices, ...pieces.notices, ...result.notices],
    stress: stressFacts(plan, free, result, wishes.full),
    held: {
      freedomLeft: result.under.freedomLeft,
      frozenJoints: sum(result.under.frozen),
      flatGroups: result.under.groupCount,
      clashes: result.clashes.map(({ conditions, misfit }) => ({ conditions, misfit_mm: misfit * span * mm })),
      ...boundFacts(result, wishes, span * mm),
    },
    verdict: pieces.within === null ? result.verdict : 'lifts within plan tolerance',
    ...(pieces.within === null ? {} : { planShift: pieces.within }),
    reason,
    reasonKind,
    roof: result.roof === null || written === null ? null : roofFacts(plan, wishes, result, written),
    ...(isNear ? { near: true } : {}),
    caution,
  }
  const roof: Roof | null =
    result.roof === null || written === null || heights === null ? null : {
      heights, written: written.z, writtenX: written.x, writtenY: written.y, gradient: result.roof.gradient,
      stress: inSpans(result.roof.stress, 0, span), corner_mm: written.flat.corner, flatness_mm: written.flat.zone, isNear,
    }
  return {
    summary, plan, frozenFree: free.frozen, frozenHeld: result.under.frozen, flatGroup: result.under.groupOf,
    conditions: rows.held, roof, ...(read.barWidth === undefined ? {} : { barWidth: read.barWidth }),
  }
}

/** What bounds cost, and those that are missed; `mm`: a span. */
function boundFacts({ prices, unmet }: Raised, { conditions }: Wishes, mm: number): Pick<Summary['held'], 'binding' | 'unmet'> {
  const binding = prices.map(({ condition, node, rise, move }) => ({ condition: conditions[condition].name, at: nodeName(node), rise_mm: rise * mm, move_mm: move * mm }))
  const missed = unmet.map(({ condition, miss }) => ({ condition: conditions[condition].name, at: miss.panel < 0 ? nodeName(miss.node) : panelName(miss.panel) }))
  return { ...(binding.length > 0 ? { binding } : {}), ...(missed.length > 0 ? { unmet: missed } : {}) }
}

/** The facts of a plan as read. */
export function planFacts(plan: Plan): PlanFacts {
  return {
    panels: plan.panelCount, joints: plan.jointCount, rimEdges: plan.edgeCount - plan.jointCount, nodes: plan.nodeCount,
    interiorNodes: interiorNodeCount(plan), voids: voidCount(plan), parts: plan.partCount, unit: plan.unit,
  }
}

function stressFacts(plan: Plan, free: FreeRim, result: Raised, full: boolean): StressFacts {
  return {
    freedom: free.freedom, count: free.count, freedomLeft: result.under.freedomLeft, gap: free.gap,
    residual: result.roof === null ? null : result.roof.residual, decided: free.decided,
    ...(free.decided ? {} : { countAt: free.countAt }),
    frozenJoints: sum(free.frozen), flatGroups: free.groupCount,
    ...(full ? namedGroups(plan, free) : {}),
  }
}

function namedGroups(plan: Plan, free: FreeRim): Pick<StressFacts, 'frozenJointNames' | 'flatGroupPanels'> {
  const groups: string[][] = Array.from({ length: free.groupCount }, () => [])
  for (let p = 0; p < plan.panelCount; p += 1) groups[free.groupOf[p]].push(panelName(p))
  return { frozenJointNames: [...free.frozen.keys()].filter((j) => free.frozen[j] === 1).map(jointName), flatGroupPanels: groups }
}

function roofFacts(plan: Plan, wishes: Wishes, result: Raised, written: Written): RoofFacts {
  const { span } = plan.frame
  const rim = outerRimNodes(plan)
  const rule: RiseRule = { down: wishes.down, datum: wishes.datum }
  const hasWish = result.roof !== null && (result.riseAsked === null || !result.roof.exact)
  return {
    rise: riseOf(written.z, rim, rule),
    riseAsked: result.riseAsked === null ? null : result.riseAsked * span,
    rimVariation: rimVariation(written.z, rim),
    ...flatnessFacts(written, wishes.flat_mm),
    closingError: (result.roof?.closingError ?? 0) * span,
    ...(hasWish && wishes.pitch === null ? { heightError: (result.roof?.heightError ?? 0) * span } : {}),
  }
}

function sum(flags: Uint8Array): number {
  let total = 0
  for (let i = 0; i < flags.length; i += 1) total += flags[i]
  return total
}

/** Working heights in the plan's unit. */
function inUnit(heights: Float64Array, span: number, datum: number): Float64Array {
  const out = heights.slice()
  for (let i = 0; i < out.length; i += 1) out[i] = out[i] * span + datum
  return out
}

/** (values - datum) / span. */
function inSpans(values: Float64Array, datum: number, span: number): Float64Array {
  const out = values.slice()
  for (let i = 0; i < out.length; i += 1) out[i] = (out[i] - datum) / span
  return out
}
