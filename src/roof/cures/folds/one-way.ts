/**
 * Is there a roof whose chosen joints all fold one way? With F the form forces (the slope jumps) of a lift, a linear program:
 *
 *   maximise t   subject to   -F_e >= t for the chosen joints,   |F_e| <= 1 for all
 *
 * over the lifts that keep the hard conditions with their values zero. t > 0: yes, and the roof is there. t = 0: no, and the
 * multipliers are a certificate: weights w >= 0 on a few joints with sum w_e F_e = 0 in every lift (Farkas), so that they
 * cannot all be ridges, and not all valleys either. Plans that have such a roof are the power diagrams, or regular
 * subdivisions (Aurenhammer 1987; Gelfand, Kapranov, Zelevinsky 1994).
 *
 * Neither answer is taken from the solver: the roof is brought to the lifts and its margin measured on it; the certificate
 * is checked against all lifts at once.
 */
import type { Steps } from '../../../base/steps.ts'
import { broughtFlat } from '../../raise/nearest.ts'
import { forces, stressOfGradients } from '../../stress/forces.ts'
import type { LiftSpace } from '../../stress/lift-space.ts'
import { panelPlanes } from '../../stress/panel-bases.ts'
import type { LinearSolver } from './linear-program.ts'
import { provenCertificate, type Certificate } from './one-way-certificate.ts'
import { basisProgram, heightsProgram, type OneWayProgram } from './one-way-program.ts'

export interface OneWay {
  /** Least form force of the chosen joints, the largest of any joint being 1; 0 where no roof folds them all one way. */
  readonly margin: number
  /** Working heights of a roof with that margin, all chosen joints ridges, no value of the conditions in it; null: there is none. */
  readonly heights: Float64Array | null
  /** What proves margin 0; null where the margin is more, or where it could not be proved. */
  readonly certificate: Certificate | null
  /** Where the program was given up: after so many steps of the simplex method; else null. */
  readonly givenUpAfter: number | null
}

/** Margins below this are rounding of the solver's tolerance, 1e-9. */
const leastMargin = 1e-7

/** Up to this many independent folds the program is written over a basis of the lifts, above it over the heights: cells of 2,500
 * panels take 0.4 s over the basis and 23 s over the heights, triangles of 1,000 nodes 3 s over the heights, of 3,000 minutes. */
const mostBasis = 200

/** `chosen`: joints, each once; `frozen`: 1 for each joint that no lift of the space folds; `tilts`: dimensions that fold nothing. */
export function* oneWay(space: LiftSpace, tilts: number, frozen: Uint8Array, chosen: Int32Array, solver: LinearSolver): Steps<OneWay> {
  const stuck = chosen.find((joint) => frozen[joint] === 1)
  if (stuck !== undefined) {
    return { margin: 0, heights: null, certificate: yield* provenCertificate(space, Int32Array.of(stuck), Float64Array.of(1)), givenUpAfter: null }
  }
  const folding = space.dimension - tilts
  const program = folding <= mostBasis ? yield* basisProgram(space, folding, chosen) : heightsProgram(space, chosen)
  return yield* answered(space, chosen, program, solver)
}

/** The program solved, and the answer checked on exact lifts. */
export function* answered(space: LiftSpace, chosen: Int32Array, program: OneWayProgram, solver: LinearSolver): Steps<OneWay> {
  const answer = yield* solver.solved(program.program, 'Folding one way')
  if (answer.status !== 'optimal') return { margin: 0, heights: null, certificate: null, givenUpAfter: answer.steps }
  const roof = yield* broughtFlat(space, program.heights(answer.x), 2)
  const { margin, largest } = marginOf(space, roof, chosen)
  if (margin > leastMargin) return { margin, heights: roof.map((height) => height / largest), certificate: null, givenUpAfter: null }
  const weights = Float64Array.from(chosen, (_, k) => Math.abs(answer.rowDual[k]))
  return { margin: 0, heights: null, certificate: yield* provenCertificate(space, chosen, weights), givenUpAfter: null }
}

/** Margin of a roof: its least ridge among the chosen joints over its largest form force. */
export function marginOf({ plan, bases }: LiftSpace, heights: Float64Array, chosen: Int32Array): { margin: number; largest: number } {
  const force = forces(plan, stressOfGradients(plan, panelPlanes(plan, bases, heights).gradient))
  const largest = force.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  const least = chosen.reduce((low, joint) => Math.min(low, -force[joint]), Infinity)
  return { margin: largest > 0 ? least / largest : 0, largest }
}
