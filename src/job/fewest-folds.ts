/** The starting shape of few folds: the roof of an answer, folded along as few joints as a linear program finds for its rise. */
import { ok, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { fewestFolds } from '../roof/cures/folds/fewest-folds.ts'
import type { LinearSolver } from '../roof/cures/folds/linear-program.ts'
import { nodeAreas } from '../roof/raise/nearest.ts'
import { outerRimNodes, riseOf } from '../roof/raise/rise.ts'
import { answerTo } from './check.ts'
import type { Solved } from './solve.ts'

/** The answer with that roof for its target, and a notice that says how many joints it folds, or why it was left. */
export function* withFewestFolds(solved: Solved, solver: LinearSolver): Steps<Result<Solved>> {
  const { checked, question } = solved
  const { answer, under, wishes } = checked
  const { plan, roof } = answer
  if (roof === null || roof.isNear || !under.scaleFree) return ok(noted(solved, 'Few folds are looked for only where an exact roof keeps the conditions at any rise; the roof is the nearest one.'))
  const datum = wishes.datum ?? 0
  const wish = roof.heights.map((height) => (height - datum) / plan.frame.span)
  const areas = nodeAreas(plan)
  const found = yield* fewestFolds(under.space, wish, areas, solver)
  if (found === null) return ok(noted(solved, 'No roof of fewer folds was found for this rise; the roof is the nearest one.'))
  const rim = outerRimNodes(plan)
  const rule = { down: wishes.down, datum: wishes.datum === null ? null : 0 }
  const made = riseOf(found.heights, rim, rule)
  const scale = made > 0 ? riseOf(wish, rim, rule) / made : 1
  const target = found.heights.map((height) => height * scale * plan.frame.span + datum)
  const request = { ...question.request, options: { ...question.request.options, shape: null, target: null } }
  const next = { ...question, request, target }
  const again = yield* answerTo(next)
  if (!again.ok) return again
  const after = { ...solved, checked: again.value, question: next }
  return ok(noted(after, `Folded along ${found.folded.length} of ${plan.jointCount} joints: few for this rise, though not proved to be the fewest.`))
}

function noted(solved: Solved, notice: string): Solved {
  const { checked } = solved
  const { summary } = checked.answer
  return { ...solved, checked: { ...checked, answer: { ...checked.answer, summary: { ...summary, notices: [...summary.notices, notice] } } } }
}
