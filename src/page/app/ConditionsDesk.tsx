/** What the roof must keep, listed as it was put down, with how much freedom it leaves and what clashes. */
import { conversion } from '../../base/length.ts'
import { figure, signed, compassPoint } from '../../paper/drawing/figures.ts'
import type { Condition, Point } from '../../plan/project/condition.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'

export function ConditionsDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  if (doc === null) return null
  const { conditions } = doc.brief
  const mm = conversion(doc.read.plan.unit, 'mm')
  const { freedomLeft } = answer.summary.stress
  const clashes = answer.summary.held.clashes
  return (
    <>
      <RimRow answer={answer} />
      {conditions.length === 0 ? <p className="entry note">Nothing is held. Select a node, a joint or a panel on the plan and hold it; Shift and a second node picks a run.</p> : (
        <table className="conditions">
          <thead><tr><th>Held</th><th>asked</th><th>how</th><th /></tr></thead>
          <tbody>
            {conditions.map((condition) => {
              const off = condition.off === true
              const clashing = clashes.some((clash) => clash.conditions.includes(condition.name))
              return (
                <tr key={condition.name} className={off ? 'off' : clashing ? 'clash' : ''}>
                  <td><label><input type="checkbox" checked={!off} aria-label={`${condition.name} on`} onChange={() => desk.switchCondition(condition.name)} /> {condition.name}</label></td>
                  <td>{askedWords(condition, mm)}</td>
                  <td><button className="word" title="exact or soft" onClick={() => desk.condition({ ...condition, soft: condition.soft === null ? 1 : null }, `${condition.name} ${condition.soft === null ? 'softly' : 'exactly'}`)}>{condition.soft === null ? 'exact' : `soft \u00d7${condition.soft}`}</button></td>
                  <td><button className="word" aria-label={`Release ${condition.name}`} onClick={() => desk.release([condition.name])}>Release</button></td>
                </tr>
              )
            })}
          </tbody>
        </table>
      )}
      <p className="entry">
        {freedomLeft === null ? <b className="fault">No roof meets all of these.</b> : conditions.length === 0 ? `Freedom with the rim free: ${figure(answer.summary.stress.freedom)}, tilts not counted.` : freedomLeft === 0 ? (answer.summary.held.frozenJoints === answer.plan.jointCount ? 'Only one roof meets these, and no joint folds in it.' : 'Exactly one roof meets these.') : `Freedom left: ${figure(freedomLeft)}, tilts counted.`}
        {clashes.map((clash, i) => <span key={i} className="fault"> {clash.conditions.join(' and ')} clash{clash.conditions.length === 1 ? 'es with the flatness of the panels' : ''}, by {figure(clash.misfit_mm, 1)} mm.</span>)}
        {conditions.length > 1 && <> <button className="word" onClick={() => desk.release(conditions.map(({ name }) => name))}>Release all</button></>}
      </p>
    </>
  )
}

export function askedWords(condition: Condition, mm: number): string {
  switch (condition.kind) {
    case 'level': return condition.level === null ? 'at the datum' : `${signed(condition.level * mm)} mm`
    case 'fall': return `${figure(condition.per_mille, 1)} \u2030`
    case 'plane': return `${figure(condition.pitch_deg, 1)}° ${compassPoint(condition.bearing_deg)}`
    case 'profile': return 'arc' in condition.section ? `arc, rise ${figure(condition.section.arc.rise * mm)} mm` : 'pitch_deg' in condition.section ? `pitch ${figure(condition.section.pitch_deg, 1)}°` : `${condition.section.points.length} levels`
    case 'straight': return 'straight'
    case 'equal': return 'equal levels'
    case 'coplanar': return 'one plane'
    case 'flush': return 'flush'
    case 'form-force': return typeof condition.force === 'string' ? condition.force : `${condition.force < 0 ? 'ridge' : condition.force > 0 ? 'valley' : 'flush'} ${figure(Math.abs(condition.force), 3)}`
  }
}

/** Each rim: free, level, equal levels. */
function RimRow({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  if (doc === null) return null
  const rims: { title: string; at: 'outer' | Point }[] = [{ title: 'rim', at: 'outer' }]
  for (const [k, at] of voidPoints(answer.plan).entries()) rims.push({ title: `rim of void ${k + 1}`, at })
  return (
    <>
      {rims.slice(0, 6).map(({ title, at }) => {
        const held = doc.brief.conditions.find((condition) => condition.name === title || ('rim' in condition.at && String(condition.at.rim) === String(at)))
        const name = held?.name ?? title
        const hold = (kind: 'level' | 'equal'): void => desk.condition(
          kind === 'level' ? { name, kind, at: { rim: at }, level: null, soft: null } : { name, kind, at: { rim: at }, soft: null }, `${name} ${kind === 'level' ? 'level at the datum' : 'level, wherever'}`)
        return (
          <p key={title} className="entry switch" role="radiogroup" aria-label={title}>
            <span>{title === 'rim' ? 'Rim' : title.replace('rim', 'Rim')}</span>
            <button role="radio" aria-checked={held === undefined} className={held === undefined ? 'chosen' : ''} onClick={() => held !== undefined && desk.release([name])}>free</button>
            <button role="radio" aria-checked={held?.kind === 'level'} className={held?.kind === 'level' ? 'chosen' : ''} onClick={() => hold('level')}>level at the datum</button>
            <button role="radio" aria-checked={held?.kind === 'equal'} className={held?.kind === 'equal' ? 'chosen' : ''} onClick={() => hold('equal')}>level, wherever</button>
          </p>
        )
      })}
    </>
  )
}

/** A point in each void: beside the middle of its first edge, a little inwards. */
export function voidPoints(plan: Plan): Point[] {
  const points: Point[] = []
  for (let l = 0; l + 1 < plan.rimStart.length; l += 1) {
    if (plan.rimIsVoid[l] === 0) continue
    const half = plan.rimHalf[plan.rimStart[l]]
    const a = plan.origin[half]
    const b = plan.origin[half ^ 1]
    const dx = plan.x[b] - plan.x[a]
    const dy = plan.y[b] - plan.y[a]
    // The void lies on the left of its rim's half-edges.
    points.push([(plan.x[a] + plan.x[b]) / 2 - dy * 0.02, (plan.y[a] + plan.y[b]) / 2 + dx * 0.02])
  }
  return points
}
