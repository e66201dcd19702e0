/** What is said of joints that were asked to fold all one way; `withWeights`: where the summary is not at hand. */
import { significant } from '../../base/decimal.ts'
import type { Summary } from '../../roof/answer/answer.ts'
import { listWords } from './figures.ts'

export function oneWaySentences({ oneWay }: Summary, withWeights = false): string[] {
  if (oneWay === undefined) return []
  const { margin, joints, certificate, decided, held, steps } = oneWay
  const under = held ? ' under these conditions' : ' (rim free)'
  const which = joints === 1 ? 'The joint' : joints === 2 ? 'Both joints' : `All ${joints} joints`
  if (margin > 0) return [`${which} can be ${joints === 1 ? 'a ridge' : 'ridges at once'}${under}: the weakest of them then folds ${significant(margin, 3)} times as much as the strongest joint.`]
  if (!decided) return [`Whether ${joints === 1 ? 'this joint can be a ridge' : `these ${joints} joints can all be ridges`} is not decided${steps === undefined ? '' : ` within ${steps} steps of the linear program`}${under}.`]
  const names = certificate.map(({ joint }) => joint)
  if (names.length === 1) return [`${names[0]} cannot be a ridge: no roof folds it${under}.`]
  const shown = names.length <= 12 ? names.join(', ') : listWords(names)
  return [`${shown} cannot all be ridges: in every roof${under} their folds cancel, ${withWeights ? `weighted ${listWords(certificate.map(({ weight }) => significant(weight, 3)))}` : 'each weighted as "oneWay" in the summary says'}.`]
}
