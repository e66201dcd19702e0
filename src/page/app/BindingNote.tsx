/** What a condition that bounds one side costs: whether it holds the roof, where, and how much rise that takes; or that it is not kept. */
import { figure } from '../../paper/drawing/figures.ts'
import { indexOfName } from '../../plan/names.ts'
import type { HeldFacts } from '../../roof/answer/answer.ts'
import { useDesk } from './context.ts'

/** Rises below this, in mm, are none. */
const noRise_mm = 0.5

export function BindingNote({ name, held }: { readonly name: string; readonly held: HeldFacts }) {
  const desk = useDesk()
  const binding = held.binding?.find(({ condition }) => condition === name)
  const unmet = held.unmet?.find(({ condition }) => condition === name)
  if (binding === undefined && unmet === undefined) return null
  const at = (place: string) => <button className="word" onClick={() => desk.select({ kind: place.startsWith('P') ? 'panel' : place.startsWith('J') ? 'joint' : 'node', index: Math.max(0, indexOfName(place, place.startsWith('P') ? 'P' : place.startsWith('J') ? 'J' : 'N')) })}>{place}</button>
  if (unmet !== undefined) return <p className="fault binding">Not kept: no roof near the asked one keeps it, the worst at {at(unmet.at)}.</p>
  if (binding === undefined) return null
  const { rise_mm, move_mm } = binding
  return (
    <p className="binding">
      <b>Binds</b> at {at(binding.at)}: costs {rise_mm < noRise_mm ? 'no rise' : `${figure(rise_mm)} mm of rise`}; without it nodes move by up to {move_mm < 1 ? 'less than 1' : figure(move_mm)} mm.
    </p>
  )
}
