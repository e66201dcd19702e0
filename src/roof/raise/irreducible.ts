/**
 * An irreducible subset that still has a property which supersets keep (to clash, to leave no fold): members are left out in
 * shrinking blocks and stay out while the property holds (delta debugging, Zeller and Hildebrandt 2002). Not the smallest
 * there is: none of its members can be spared. One pass over single members is enough: what could not be spared from a
 * larger set cannot be spared from a smaller one.
 */
import type { Steps } from '../../base/steps.ts'

export interface Irreducible {
  readonly kept: readonly number[]
  /** False where `mostTrials` ended it: members may then be left that could be spared. */
  readonly finished: boolean
}

/** `holds` is asked of proper subsets that are not empty. */
export function* irreducible(all: readonly number[], holds: (subset: readonly number[]) => Steps<boolean>, mostTrials: number): Steps<Irreducible> {
  let kept = all
  let trials = 0
  for (let block = Math.ceil(kept.length / 2); block >= 1 && kept.length > 1; block = block > 1 ? Math.ceil(block / 2) : 0) {
    for (let from = 0; from < kept.length && kept.length > 1; ) {
      if (trials >= mostTrials) return { kept, finished: false }
      yield { stage: 'Looking for the clash', done: trials / mostTrials }
      const rest = kept.filter((_, k) => k < from || k >= from + block)
      trials += 1
      if (rest.length > 0 && (yield* holds(rest))) kept = rest
      else from += block
    }
  }
  return { kept, finished: true }
}
