/** Several panels, nodes or joints in hand together, and what can be asked of them as one. */
import type { ReactNode } from 'react'
import { conversion } from '../../base/length.ts'
import { jointName, nodeName, panelName } from '../../plan/names.ts'
import type { Condition } from '../../plan/project/condition.ts'
import { compassPoint, figure, signed } from '../../paper/drawing/figures.ts'
import { fallBearing, slopeOf } from '../../paper/drawing/fall.ts'
import { toSheet } from '../../paper/drawing/plan-window.ts'
import { useDesk } from './context.ts'
import { LengthField, NumberField, typable } from './Fields.tsx'
import { middleOf } from './PanelPlate.tsx'
import { plateAt, type Placed } from './plate.ts'
import type { Gathered } from '../store/state.ts'

export function GatheredPlate({ gathered, answer, window, size }: Placed & { readonly gathered: Gathered }) {
  const desk = useDesk()
  const { plan, roof } = answer
  const { kind } = gathered
  const count = { node: plan.nodeCount, joint: plan.jointCount, panel: plan.panelCount }[kind]
  const indices = gathered.indices.filter((index) => index < count)
  const names = indices.map({ node: nodeName, joint: jointName, panel: panelName }[kind])
  const mm = conversion(plan.unit, 'mm')
  const places = indices.map((index) => kind === 'panel' ? middleOf(plan, index) : kind === 'node' ? [plan.x[index], plan.y[index]] as const
    : [(plan.x[plan.origin[2 * index]] + plan.x[plan.origin[2 * index + 1]]) / 2, (plan.y[plan.origin[2 * index]] + plan.y[plan.origin[2 * index + 1]]) / 2] as const)
  const [lastX, lastY] = toSheet(window, ...(places[places.length - 1] ?? [0, 0]))
  const take = (what: string, asked: Asked): void => {
    const others = desk.standing?.brief.conditions ?? []
    const name = calledBy(what, names)
    // A long list is cut in the name: another one that begins alike keeps its own.
    const isOther = others.some((other) => other.name === name && JSON.stringify(other.at) !== JSON.stringify(asked.at))
    desk.condition({ ...asked, name: isOther ? `${name} (${others.length})` : name, soft: null } as Condition, `${what} ${shortList(names)}`)
  }
  const panels = { panels: names }
  const nodes = { nodes: names }
  const joints = { joints: names }
  const first = indices[0]
  const slope = roof === null || kind !== 'panel' ? 0 : slopeOf(roof.gradient, first)
  const bearing = roof === null || kind !== 'panel' || Number.isNaN(fallBearing(roof.gradient, first)) ? 180 : fallBearing(roof.gradient, first)
  const level = roof === null || kind !== 'node' ? 0 : roof.heights[first]
  const word = (title: string, onClick: () => void): ReactNode => <button key={title} className="word spaced" onClick={onClick}>{title}</button>
  return (
    <>
      <svg className="over gathered" width={size.width} height={size.height} aria-hidden="true">
        {kind === 'panel' ? indices.map((panel) => <polygon key={panel} points={Array.from(plan.corner.subarray(plan.panelStart[panel], plan.panelStart[panel + 1]), (node) => toSheet(window, plan.x[node], plan.y[node]).join(',')).join(' ')} />)
          : kind === 'joint' ? indices.map((joint) => {
            const [[ax, ay], [bx, by]] = [0, 1].map((end) => toSheet(window, plan.x[plan.origin[2 * joint + end]], plan.y[plan.origin[2 * joint + end]]))
            return <line key={joint} x1={ax} y1={ay} x2={bx} y2={by} />
          }) : places.map(([px, py], k) => { const [x, y] = toSheet(window, px, py); return <circle key={k} cx={x} cy={y} r={6} /> })}
      </svg>
      <div className="plate" style={plateAt(lastX, lastY, { answer, window, size })} role="group" aria-label={`${figure(indices.length)} ${kind}s gathered`}>
        <b>{shortList(names)}</b>
        {kind === 'panel' && <>
          <p>{word('In one plane', () => take('one plane', { kind: 'coplanar', at: panels }))}{word('No ponding', () => take('no ponding', { kind: 'no-ponding', at: panels }))}{word('No valley between', () => take('no valley', { kind: 'one-way', at: panels, fold: 'no-valley' }))}</p>
          <NumberField label="at least °" start="" from={0} below={90} onValue={(least_deg) => take(`least slope ${figure(least_deg, 1)}°`, { kind: 'slope', at: panels, least_deg, most_deg: null })} />
          <NumberField label="slope of each °" start={typable(slope, 1)} from={0} below={90} onValue={(pitch_deg) => take(`slope ${figure(pitch_deg, 1)}° ${compassPoint(bearing)}`, { kind: 'plane', at: panels, pitch_deg, bearing_deg: bearing })} />
          <LengthField label="level at" bare="mm" to={plan.unit} start="" onValue={(value) => take(`level ${signed(value * mm)} mm`, { kind: 'level', at: panels, level: value })} />
        </>}
        {kind === 'node' && <>
          <p>{word('At one level, wherever', () => take('one level', { kind: 'equal', at: nodes }))}{word('At the datum', () => take('at the datum', { kind: 'level', at: nodes, level: null }))}</p>
          <LengthField label="level at" bare="mm" to={plan.unit} start={typable(level * mm)} onValue={(value) => take(`level ${signed(value * mm)} mm`, { kind: 'level', at: nodes, level: value })} />
          <LengthField label="no lower than" bare="mm" to={plan.unit} start="" onValue={(least) => take(`lowest ${signed(least * mm)} mm`, { kind: 'bounds', at: nodes, least, most: null })} />
          <LengthField label="no higher than" bare="mm" to={plan.unit} start="" onValue={(most) => take(`highest ${signed(most * mm)} mm`, { kind: 'bounds', at: nodes, least: null, most })} />
        </>}
        {kind === 'joint' && <>
          <p>{word('flush', () => take('flush', { kind: 'flush', at: joints }))}{(['ridge', 'valley'] as const).map((fold) => word(fold, () => take(fold, { kind: 'form-force', at: joints, force: fold })))}{word('no valley', () => take('no valley', { kind: 'one-way', at: joints, fold: 'no-valley' }))}</p>
          <NumberField label="force of each" start="" onValue={(force) => take(`force ${figure(force, 3)}`, { kind: 'form-force', at: joints, force })} />
        </>}
        <p>{word('Put down', () => desk.set({ gathered: null }))}</p>
        <small>Ctrl and click, or G, adds one or takes it out.</small>
      </div>
    </>
  )
}

/** A condition without its name. */
type Asked = { readonly kind: Condition['kind']; readonly at: Condition['at'] } & Readonly<Record<string, unknown>>

const shortList = (names: readonly string[]): string => (names.length <= 4 ? names.join(', ') : `${names.slice(0, 3).join(', ')} and ${figure(names.length - 3)} more`)

/** A condition is called by what it asks and of what, so the same again takes its place. */
const calledBy = (what: string, names: readonly string[]): string => `${what.replace(/ [\d\u2212+\u202f].*$/, '')} of ${names.length <= 8 ? names.join(' ') : `${names.slice(0, 7).join(' ')} and ${names.length - 7} more`}`
