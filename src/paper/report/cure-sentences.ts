/** Cures in the words of a facade office: what to do, with its figures, and what it leaves. */
import type { Summary } from '../../roof/answer/answer.ts'
import type { AsDrawn, Blocking, Cure } from '../../roof/answer/cure.ts'
import { counted, flatnessWords, isFlat, lengthWords, listWords } from './figures.ts'

/** The answer before and after. */
export interface CureWords {
  readonly before: Summary
  readonly after: Summary
  /** Whether a rise that was asked for is not had then. */
  readonly riseMissed: boolean
}

type Figures = Omit<Cure, 'message' | 'leaves' | 'option'>

/** Packing beyond this, in mm, is more than a bracket takes up. Common practice, no source. */
const mostPacked_mm = 50

/** What is to be done, as a sentence. */
export function cureSentence(cure: Figures, { before, after }: CureWords): string {
  const { plan } = before
  const mm = (value: number | null): string => millimetres(value ?? 0)
  switch (cure.code) {
    case 'accept-deviation':
      return `Build it as drawn: all ${counted(plan.panels, 'panel')} are within the tolerance, the worst corner ${flatnessWords(cure.largest_mm ?? 0)} out of plane (RMS ${flatnessWords(cure.rms_mm ?? 0)}).`
    case 'move-nodes': {
      const within = cure.withinTolerance === true ? ', within the plan tolerance' : ''
      const over = cure.count === 0 ? 'none by more than 1 mm' : `${cure.count} of ${counted(plan.nodes, 'node')} by more than 1 mm`
      return `Move nodes by at most ${mm(cure.largest_mm)} (RMS ${mm(cure.rms_mm)}, ${over})${within}.`
    }
    case 'pack-rim': {
      const [worst] = cure.packing ?? []
      const where = worst === undefined ? '' : `, most at ${worst.node}`
      const more = (cure.largest_mm ?? 0) > mostPacked_mm ? ': more than packing takes up, so the rim would follow the roof' : ''
      return `Pack the rim up or down by at most ${mm(cure.largest_mm)} (RMS ${mm(cure.rms_mm)}, ${counted(cure.count, 'node')} by more than 1 mm${where})${more}.`
    }
    case 'add-diagonals':
      return `Divide ${counted(new Set(cure.where).size, 'panel')} by ${counted(cure.count, 'diagonal')}: ${listWords((cure.diagonals ?? []).map(({ panel, from, to }) => `${panel} from ${from} to ${to}`), 6)}.`
    case 'remove-joints': {
      const one = cure.count === 1
      return `Leave out ${counted(cure.count, 'joint')} that ${one ? 'folds' : 'fold'} in no roof (${someOf(cure.where, cure.count)}): ${counted(plan.panels, 'panel')} become ${cure.panels ?? after.plan.panels}.`
    }
    case 'release':
      return `Release "${cure.name ?? ''}"${missWords(cure)}.`
  }
}

/** What the cured plan still lacks, as a clause without a full stop. */
export function leavesClause(cure: Figures, { after, riseMissed }: CureWords): string {
  const { plan, roof, stress, verdict } = after
  if (cure.code === 'accept-deviation') return `panels that are not exactly flat, by at most ${flatnessWords(roof?.flatnessMax_mm ?? 0)}`
  const parts: string[] = []
  if (verdict === 'lifts in part') parts.push(`${cure.frozenJoints} of ${counted(plan.joints, 'joint')} unfolded`)
  if (roof !== null && riseMissed) parts.push(`a rise of ${lengthWords(roof.rise, plan.unit)} where ${lengthWords(roof.riseAsked ?? 0, plan.unit)} was asked`)
  if (roof !== null && !isFlat(roof.cornerMax_mm) && after.near === true) parts.push(`corners ${flatnessWords(roof.cornerMax_mm)} out of plane`)
  const left = stress.freedomLeft ?? 0
  const free = left === 0 ? 'exactly one roof' : `${counted(left, 'adjustment')} to choose the roof by`
  return parts.length === 0 ? `nothing unsolved: every joint folds, ${free}` : `${parts.join(', ')}; ${free}`
}

/** What the panels of the nearest roof are bent by. */
export function asDrawnSentence({ cornerMax_mm, cornerRms_mm, over, flat_mm }: AsDrawn, panels: number): string {
  return `As drawn, the nearest roof has corners up to ${flatnessWords(cornerMax_mm)} out of plane (RMS ${flatnessWords(cornerRms_mm)}); ${over} of ${counted(panels, 'panel')} are over the tolerance of ${Number(flat_mm.toPrecision(3))} mm.`
}

/** "Yes, if one of these is done:", "No, because ..". null for a plain yes. */
export function answerLine({ answer, cures = [], reason, verdict }: Summary): string | null {
  if (answer === undefined || answer === 'yes') return null
  if (answer === 'no, because') return `No, because ${reason?.replace(/\.$/, '') ?? 'nothing folds'}; nothing that was tried helps.`
  if (cures.length === 0) return 'Yes, if it may stay as it is; nothing that was tried betters it.'
  const few = cures.length === 1 ? 'this is done' : 'one of these is done'
  return verdict === 'lifts in part' ? `Yes, if joints may stay unfolded, or ${few}:` : `Yes, if ${few}:`
}

/** One line a cure: the sentence, what it leaves, the option. */
export function cureLines({ cures = [] }: Summary): string[] {
  return cures.map(({ message, leaves, option }, k) => `${k + 1}. ${message} Leaves ${leaves}. (${option})`)
}

/** The conditions that stand in the way, none of them to be spared; null where that is said already. */
export function blockingSentence({ conditions, leaves, frozenJoints, flatGroups }: Blocking, joints: number): string {
  const names = listWords(conditions.map((name) => `"${name}"`))
  const alone = conditions.length === 1 ? `${names} alone` : `${names} together`
  if (leaves === 'no roof') return `${alone} ${conditions.length === 1 ? 'leaves' : 'leave'} no roof; with any one of them let go this clash is gone.`
  return `${alone} ${conditions.length === 1 ? 'keeps' : 'keep'} ${frozenJoints === joints ? `all ${joints} joints` : `${frozenJoints} of ${joints} joints`} unfolded: ${flatGroups === 1 ? 'all panels stay in one plane' : counted(flatGroups, 'plane')}.`
}

const missWords = ({ largest_mm, rms_mm }: Figures): string =>
  largest_mm === null ? '' : isFlat(largest_mm) ? ': the roof of choice keeps it all the same' : `: the roof then misses it by at most ${millimetres(largest_mm)} (RMS ${millimetres(rms_mm ?? 0)})`

/** "J2, J3, J7, J9 and 92 more". */
function someOf(names: readonly string[], count: number): string {
  return count <= 5 ? listWords(names) : `${names.slice(0, 4).join(', ')} and ${count - 4} more`
}

function millimetres(mm: number): string {
  if (mm < 0.005) return 'less than 0.01 mm'
  if (mm < 10) return `${Number(mm.toPrecision(2))} mm`
  return mm < 10_000 ? `${mm.toFixed(0)} mm` : `${(mm / 1000).toFixed(2)} m`
}
