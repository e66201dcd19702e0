/**
 * Answers that are linear in what is asked: the last few are kept as an orthonormal basis of questions q_k with their answers
 * a_k, so that a new question costs a solve for its remainder only,
 *     question = sum c_k q_k + remainder        answer = sum c_k a_k + answer(remainder)
 * and none where that is rounding: a level or a height that is dragged, another rise, a wish gone back to. Each a_k is solved
 * to its own full accuracy, so that small differences of questions are answered as well as large ones.
 */
import { dot } from '../../base/dot.ts'
import type { Steps } from '../../base/steps.ts'
import { addTo } from '../stress/lift-basis.ts'

/** Questions kept; at 100,000 panels of six corners each is 5 MB with its answer. */
const mostKept = 4

/** A remainder below this share of its question is what the arithmetic of questions leaves. */
const roundingShare = 1e-13

/** A remainder below this share has too few digits of its own to be a basis for others. */
const leastKept = 1e-6

export interface LinearAnswers {
  /** The answer (`length` numbers) to a question, which is overwritten; `solved` answers what is left of it, where anything is. */
  readonly to: (question: Float64Array, length: number, solved: (remainder: Float64Array) => Steps<Float64Array>) => Steps<Float64Array>
}

export function linearAnswers(): LinearAnswers {
  const questions: Float64Array[] = []
  const answers: Float64Array[] = []
  function* to(question: Float64Array, length: number, solved: (remainder: Float64Array) => Steps<Float64Array>): Steps<Float64Array> {
    const size = Math.sqrt(dot(question, question))
    const known = new Float64Array(length)
    for (let pass = 0; pass < 2; pass += 1) {
      for (const [k, other] of questions.entries()) {
        const share = dot(other, question)
        if (share === 0) continue
        addTo(question, other, -share)
        addTo(known, answers[k], share)
      }
    }
    const left = Math.sqrt(dot(question, question))
    if (left <= roundingShare * size) return known
    const answer = yield* solved(question)
    addTo(known, answer, 1)
    if (left <= leastKept * size) return known
    if (questions.length === mostKept) {
      // The eldest goes; the others stay orthonormal.
      questions.shift()
      answers.shift()
    }
    questions.push(scaled(question, 1 / left))
    answers.push(scaled(answer, 1 / left))
    return known
  }
  return { to }
}

function scaled(values: Float64Array, by: number): Float64Array {
  const out = values.slice()
  for (let i = 0; i < out.length; i += 1) out[i] *= by
  return out
}

/** Two vectors as one. */
export function together(a: Float64Array, b: Float64Array): Float64Array {
  const both = new Float64Array(a.length + b.length)
  both.set(a)
  both.set(b, a.length)
  return both
}
