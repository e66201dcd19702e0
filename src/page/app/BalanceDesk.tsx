/** The plan shaped freely: its rim stays, the nodes inside go where the forces of their joints balance, and it lifts as it is. */
import { figure } from '../../paper/drawing/figures.ts'
import { jointName } from '../../plan/names.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { LiveDensities } from '../../job/session.ts'
import { useDesk, useDeskState } from './context.ts'
import { NumberField, typable } from './Fields.tsx'

const kinds = [['uniform', 'uniform'], ['length', 'by length'], ['fit', 'fitted to the plan']] as const

/** The slider goes from a hundredth to a hundred times, by tenths of a decade in hundred steps. */
const decades = 2
const stepsADecade = 50

export function BalanceDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const balance = useDeskState((state) => state.balance)
  const isInHand = useDeskState((state) => state.balance !== null && state.inHand !== null)
  const selection = useDeskState((state) => state.selection)
  const gathered = useDeskState((state) => state.gathered)
  const { plan } = answer
  if (plan.jointCount === 0) return <p className="entry note">One panel has nothing to balance.</p>
  const densities: LiveDensities = balance?.densities ?? { from: 'uniform', typed: [] }
  const last = balance?.last ?? null
  const joints = (gathered?.kind === 'joint' && gathered.indices.length > 1 ? gathered.indices : selection?.kind === 'joint' ? [selection.index] : []).filter((joint) => joint < plan.jointCount)
  const type = (density: number): void => void desk.balance({ ...densities, typed: [...densities.typed.filter(({ joint }) => !joints.includes(joint)), ...joints.map((joint) => ({ joint, density }))] })
  const density = joints.length === 0 ? 1 : (densities.typed.find(({ joint }) => joint === joints[0])?.density ?? last?.density[joints[0]] ?? 1)
  return (
    <>
      <p className="entry note">The rim stays. Every other node goes where the forces of its joints balance: force is density times length. The plan then lifts with those forces. A denser joint is shorter.</p>
      <p className="entry switch" role="radiogroup" aria-label="Densities">
        <span>Densities</span>
        {kinds.map(([from, title]) => <button key={from} role="radio" aria-checked={balance !== null && densities.from === from} className={balance !== null && densities.from === from ? 'chosen' : ''} onClick={() => void desk.balance({ from, typed: [] })}>{title}</button>)}
      </p>
      {joints.length === 0 ? <p className="entry note">Select a joint on the plan to change its own density; Ctrl and click gathers several.</p> : (
        <div className="entry density" role="group" aria-label={`Density of ${joints.map(jointName).join(', ')}`}>
          <span>{joints.length <= 3 ? joints.map(jointName).join(', ') : `${jointName(joints[0])} and ${figure(joints.length - 1)} more`}</span>
          <input type="range" aria-label="Density, by hand" min={-decades * stepsADecade} max={decades * stepsADecade} step={1} value={density > 0 ? Math.round(Math.log10(density) * stepsADecade) : 0}
            onChange={(event) => type(Number((10 ** (Number(event.target.value) / stepsADecade)).toPrecision(3)))} />
          <NumberField label="density" start={typable(density, density < 10 ? 2 : 1)} onValue={type} />
        </div>
      )}
      {last !== null && last.next === null && <p className="entry fault" role="status">{last.crossed.length === 0 ? 'Panels' : last.crossed.slice(0, 6).join(', ')} would turn inside out or cross with these; the plan stays as it was last. Densities of one sign on a rim without inward corners never cross.</p>}
      {isInHand && last !== null && (
        <p className="entry" role="status" data-balanced>
          Balanced: nodes moved by at most {lengthWords(last.largest_mm)} (RMS {lengthWords(last.rms_mm)}){densities.typed.length > 0 ? `, ${figure(densities.typed.length)} ${densities.typed.length === 1 ? 'density' : 'densities'} typed` : ''}.{' '}
          <button className="word" onClick={() => desk.endBalance(true)}>Keep this plan</button>{' '}
          <button className="word" onClick={() => desk.endBalance(false)}>Put it away</button>
        </p>
      )}
    </>
  )
}

const lengthWords = (mm: number): string => (mm < 0.05 ? 'less than 0.1 mm' : `${figure(mm, mm < 10 ? 1 : 0)} mm`)
