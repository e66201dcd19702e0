/** Rise and flatness of the roof as sentences. */
import type { Answer, RoofFacts } from '../../roof/answer/answer.ts'
import type { Unit } from '../../base/length.ts'
import { panelName } from '../../plan/names.ts'
import { flatnessWords, isFlat, isNothing, lengthWords, listWords } from './figures.ts'

export function roofSentences(answer: Answer): string[] {
  const { roof, plan, near, verdict } = answer.summary
  if (roof === null) return []
  const isNear = near === true || answer.roof?.isNear === true
  const sentences = [riseSentence(roof, plan.unit, answer.summary.options), flatnessSentence(answer, roof)]
  if (isNear && verdict === 'does not lift') sentences.unshift('What follows is the nearest roof; its panels are not flat.')
  if (isNear && roof.heightError !== undefined) sentences.push(`Its heights differ from the wish by ${lengthWords(roof.heightError, plan.unit)} (root mean square).`)
  if (roof.worstPanels.length > 0) {
    sentences.push(`Over the tolerance, worst first: ${listWords(roof.worstPanels.map(({ name, corner_mm }) => `${name} ${flatnessWords(corner_mm)}`))} at the corner.`)
  }
  return sentences
}

function riseSentence({ rise, riseAsked }: RoofFacts, unit: Unit, options: Readonly<Record<string, unknown>>): string {
  const height = lengthWords(rise, unit)
  const words = options['down'] === true ? `It hangs ${height} below the highest node of its rim` : `It rises ${height} above its springing`
  if (riseAsked === null) return `${words}.`
  // A rise that nobody asked for is the default.
  const isAsked = options['rise'] !== undefined || options['brief'] !== undefined
  if (isNothing(rise - riseAsked, unit)) return `${words}${isAsked ? ', as asked' : ''}.`
  return `${words}; the ${lengthWords(riseAsked, unit)} ${isAsked ? 'asked' : 'of the default'} cannot be had under the conditions.`
}

function flatnessSentence({ roof }: Answer, facts: RoofFacts): string {
  if (isFlat(facts.cornerMax_mm)) return 'Every panel is flat to better than 0.01 mm as written.'
  let worst = 0
  const corner = roof?.corner_mm ?? new Float64Array(0)
  for (let panel = 1; panel < corner.length; panel += 1) if (corner[panel] > corner[worst]) worst = panel
  const name = corner.length > 0 ? ` ${panelName(worst)}` : ''
  return (
    `As written, the worst panel${name} has a corner ${flatnessWords(facts.cornerMax_mm)} out of the plane of the others; ` +
    `the largest distance of two parallel planes that enclose a panel is ${flatnessWords(facts.flatnessMax_mm)}.`
  )
}
