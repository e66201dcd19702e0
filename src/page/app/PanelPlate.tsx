/** A panel in hand: its slope and the way it falls as fields, and what lies round it to go on to. */
import { panelName, nodeName, jointName } from '../../plan/names.ts'
import { heldPlane } from '../../plan/project/edits.ts'
import { fallBearing, slopeOf } from '../../paper/drawing/fall.ts'
import { compassPoint, figure } from '../../paper/drawing/figures.ts'
import { toSheet } from '../../paper/drawing/plan-window.ts'
import type { Plan } from '../../plan/plan.ts'
import { useDesk, useDeskState } from './context.ts'
import { NumberField, typable } from './Fields.tsx'
import { plateAt, type Placed } from './plate.ts'

export function PanelPlate({ panel, answer, window, size }: Placed & { readonly panel: number }) {
  const desk = useDesk()
  const conditions = useDeskState((state) => state.doc?.brief.conditions ?? [])
  const gathered = useDeskState((state) => state.gathered)
  const { plan, roof } = answer
  const [x, y] = toSheet(window, ...middleOf(plan, panel))
  const name = panelName(panel)
  const existing = conditions.find((condition) => condition.name === heldPlane(panel, 0, 0).name)
  const soft = existing?.soft ?? null
  if (roof === null) return null
  const slope = slopeOf(roof.gradient, panel)
  const bearing = fallBearing(roof.gradient, panel)
  const isLevel = Number.isNaN(bearing)
  const hold = (pitch_deg: number, bearing_deg: number): void => desk.condition(heldPlane(panel, pitch_deg, bearing_deg, soft), `${name} ${figure(pitch_deg, 1)}° ${compassPoint(bearing_deg)}`)
  const corners = Array.from(plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1]))
  const joints = Array.from(plan.cornerHalf.subarray(plan.panelStart[panel], plan.panelStart[panel + 1]), (half) => half >> 1).filter((edge) => edge < plan.jointCount)
  return (
    <div className="plate" style={plateAt(x, y, { answer, window, size })}>
      <b>{name}</b> {figure(slope, 1)}° {isLevel ? 'level' : compassPoint(bearing)}
      <NumberField label="slope °" start={typable(slope, 1)} from={0} below={90} onValue={(value) => hold(value, isLevel ? 180 : bearing)} />
      <NumberField label="falls to °" start={isLevel ? '' : typable(bearing)} onValue={(value) => hold(slope, value)} />
      <p>{existing !== undefined
        ? <button className="word spaced" data-release onClick={() => desk.release([existing.name])}>Release <kbd>X</kbd></button>
        : <button className="word spaced" data-hold onClick={() => hold(slope, isLevel ? 180 : bearing)}>Hold <kbd>H</kbd></button>}
      <button className="word spaced" onClick={() => desk.gather({ kind: 'panel', index: panel })}>{gathered?.kind === 'panel' && gathered.indices.includes(panel) ? 'Gathered' : 'Gather'} <kbd>G</kbd></button>
      <button className="word" onClick={() => desk.turnToVoid(panel)}>Make it a void</button></p>
      <small className="round">Nodes {corners.slice(0, 8).map((node) => <button key={node} className="word" onClick={() => desk.select({ kind: 'node', index: node })}>{nodeName(node)}</button>)}</small>
      {joints.length > 0 && <small className="round">Joints {joints.slice(0, 8).map((joint) => <button key={joint} className="word" onClick={() => desk.select({ kind: 'joint', index: joint })}>{jointName(joint)}</button>)}</small>}
    </div>
  )
}

/** Mean of the corners, in the plan's unit. */
export function middleOf(plan: Plan, panel: number): [number, number] {
  const corners = plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1])
  let x = 0, y = 0
  for (const node of corners) {
    x += plan.x[node] / corners.length
    y += plan.y[node] / corners.length
  }
  return [x, y]
}
