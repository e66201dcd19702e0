/**
 * What the hand finds at the selection: a handle that is dragged up and down at a node, and over everything the plate that
 * is typed over. It stands beside the selection, on the emptier side.
 */
import { useEffect, useRef, useState, type PointerEvent } from 'react'
import { conversion, parseLength } from '../../base/length.ts'
import { jointName, nodeName, panelName } from '../../plan/names.ts'
import { fallBearing, slopeOf } from '../../paper/drawing/fall.ts'
import { compassPoint, figure, signed } from '../../paper/drawing/figures.ts'
import { jointKinds } from '../../paper/drawing/joint-kinds.ts'
import { toSheet, type PlanWindow } from '../../paper/drawing/plan-window.ts'
import type { Condition, Fold } from '../../plan/project/condition.ts'
import type { Plan } from '../../plan/plan.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { jointsOf } from './useReading.ts'

interface Props {
  readonly answer: Answer
  readonly window: PlanWindow
  readonly picked: readonly number[]
  readonly size: { readonly width: number; readonly height: number }
}

export function PlanHand({ answer, window, picked, size }: Props) {
  const selection = useDeskState((state) => state.selection)
  const { plan } = answer
  return (
    <>
      {picked.length > 1 && (
        <svg className="over" width={size.width} height={size.height} aria-hidden="true">
          <polyline points={picked.map((node) => toSheet(window, plan.x[node], plan.y[node]).join(',')).join(' ')} />
          {picked.map((node) => {
            const [x, y] = toSheet(window, plan.x[node], plan.y[node])
            return <circle key={node} cx={x} cy={y} r={4} />
          })}
        </svg>
      )}
      {selection?.kind === 'node' && selection.index < plan.nodeCount && <NodeHand key={selection.index} node={selection.index} answer={answer} window={window} size={size} />}
      {selection?.kind === 'joint' && selection.index < plan.jointCount && <JointPlate key={selection.index} joint={selection.index} answer={answer} window={window} size={size} />}
      {selection?.kind === 'panel' && selection.index < plan.panelCount && <PanelPlate key={selection.index} panel={selection.index} answer={answer} window={window} size={size} />}
    </>
  )
}

type Placed = Pick<Props, 'answer' | 'window' | 'size'>

function plateAt(x: number, y: number, size: { width: number; height: number }): React.CSSProperties {
  // In the corner that is farther off: beside the selection it would cover what moves with it.
  const right = x < size.width / 2
  return { ...(right ? { right: 50 } : { left: 12 }), ...(y < size.height * 0.42 ? { bottom: 74 } : { top: 6 }) }
}

function NodeHand({ node, answer, window, size }: Placed & { readonly node: number }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  const inHand = useDeskState((state) => state.inHand)
  const { plan, roof } = answer
  const [x, y] = toSheet(window, plan.x[node], plan.y[node])
  const name = nodeName(node)
  const height = roof?.heights[node] ?? 0
  const mm = height * conversion(plan.unit, 'mm')
  const conditionName = `height of ${name}`
  const existing = doc?.brief.conditions.find((condition) => condition.name === conditionName)
  const start = useRef<{ y: number; level: number } | null>(null)

  const step = (level: number): { condition: Condition; what: string } => ({
    condition: { name: conditionName, kind: 'level', at: { nodes: [name] }, level, soft: null },
    what: `${name} ${signed(level * conversion(plan.unit, 'mm'))} mm`,
  })
  const onDown = (event: PointerEvent<HTMLButtonElement>): void => {
    event.currentTarget.setPointerCapture(event.pointerId)
    start.current = { y: event.clientY, level: height }
  }
  const onMove = (event: PointerEvent<HTMLButtonElement>): void => {
    if (start.current === null || event.buttons === 0) return
    // 10 mm a pixel, 1 mm with Shift.
    const level = start.current.level + (start.current.y - event.clientY) * (event.shiftKey ? 1 : 10) * conversion('mm', plan.unit)
    const base = desk.state.steps[desk.state.at]?.doc
    if (base === undefined) return
    const { condition, what } = step(level)
    const conditions = [...base.brief.conditions.filter((other) => other.name !== condition.name), condition]
    desk.hold({ doc: { ...base, brief: { ...base.brief, conditions } }, what, before: `was ${signed(mm)}` })
  }
  const onUp = (): void => {
    start.current = null
    desk.putDown(true)
  }
  const asked = inHand === null ? undefined : inHand.doc.brief.conditions.find((condition) => condition.name === conditionName)
  return (
    <>
      <button className="handle" style={{ left: x - 12, top: y - 12 }} aria-label={`${name}: drag up or down, or use the arrow keys, to set its height`}
        onPointerDown={onDown} onPointerMove={onMove} onPointerUp={onUp} onPointerCancel={() => { start.current = null; desk.putDown(false) }}
        onKeyDown={(event) => {
          const direction = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0
          if (direction === 0) return
          event.preventDefault()
          const { condition, what } = step(height + direction * (event.shiftKey ? 1 : 10) * conversion('mm', plan.unit))
          desk.condition(condition, what)
        }}><span /></button>
      <div className="plate" style={plateAt(x, y, size)}>
        <b>{name}</b> {roof === null ? '' : `${signed(mm)} mm`}
        <LengthField label="height" bare="mm" to={plan.unit} start={roof === null ? '' : figure(Math.round(mm)).replace(/\u202f/g, '')} onValue={(level) => {
          const { condition, what } = step(level)
          desk.condition(condition, what)
        }} />
        {asked !== undefined && 'level' in asked && asked.level !== null && <small>asked {signed(asked.level * conversion(plan.unit, 'mm'))} mm</small>}
        <p>
          {existing === undefined
            ? <button className="word" data-hold onClick={() => { const { condition, what } = step(height); desk.condition(condition, what) }}>Hold <kbd>H</kbd></button>
            : <button className="word" data-release onClick={() => desk.release([conditionName])}>Release <kbd>X</kbd></button>}
        </p>
        <small>Shift and click another node picks the run between them.</small>
      </div>
    </>
  )
}

/** A form force as words: its way and its size. */
const forceWords = (force: number): string => (force === 0 ? 'flush' : `${force < 0 ? 'ridge' : 'valley'} ${figure(Math.abs(force), 3)}`)

/** Pulled across its joint this far, a cross-bar asks for the 95th percentile of the forces; nearer to the middle than the snap, for none. */
const barReach = 50
const barSnap = 4

function JointPlate({ joint, answer, window, size }: Placed & { readonly joint: number }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  const { plan } = answer
  const a = plan.origin[2 * joint]
  const b = plan.origin[2 * joint + 1]
  const [ax, ay] = toSheet(window, plan.x[a], plan.y[a])
  const [bx, by] = toSheet(window, plan.x[b], plan.y[b])
  const [x, y] = [(ax + bx) / 2, (ay + by) / 2]
  const length = Math.hypot(bx - ax, by - ay) || 1
  // Across the joint on the sheet; pulled this way it is a valley, the other way a ridge.
  const [ux, uy] = [-(by - ay) / length, (bx - ax) / length]
  const name = jointName(joint)
  const joints = jointsOf(answer)
  const kind = jointKinds[joints.kind[joint]]
  const force = (kind === 'ridge' ? -1 : 1) * joints.force[joint]
  const conditionName = `force of ${name}`
  const held = doc?.brief.conditions.some((condition) => condition.name === conditionName) === true
  const start = useRef<{ x: number; y: number; force: number } | null>(null)
  const perPx = (joints.force95 > 0 ? joints.force95 : 0.1) / barReach
  const offset = Math.max(-70, Math.min(70, force / perPx))

  const condition = (asked: number | Fold): Condition => ({ name: conditionName, kind: 'form-force', at: { joints: [name] }, force: asked, soft: null })
  const ask = (asked: number | Fold): void => desk.condition(condition(asked), `${name} ${typeof asked === 'string' ? asked : forceWords(asked)}`)
  const onMove = (event: PointerEvent<HTMLButtonElement>): void => {
    if (start.current === null || event.buttons === 0) return
    const across = start.current.force / perPx + (event.clientX - start.current.x) * ux + (event.clientY - start.current.y) * uy
    const asked = Math.abs(across) < barSnap ? 0 : across * perPx
    const base = desk.state.steps[desk.state.at]?.doc
    if (base === undefined) return
    const conditions = [...base.brief.conditions.filter((other) => other.name !== conditionName), condition(asked)]
    desk.hold({ doc: { ...base, brief: { ...base.brief, conditions } }, what: `${name} ${forceWords(asked)}`, before: `was ${forceWords(start.current.force)}` })
  }
  return (
    <>
      {kind !== 'frozen' && (
        <>
          <svg className="over" width={size.width} height={size.height} aria-hidden="true"><line className="bar-line" x1={x - ux * barReach} y1={y - uy * barReach} x2={x + ux * barReach} y2={y + uy * barReach} /></svg>
          <button className="handle" style={{ left: x + ux * offset - 12, top: y + uy * offset - 12, cursor: 'move' }} aria-label={`${name}, ${forceWords(force)}: pull across the joint to change its form force`}
            onPointerDown={(event) => { event.currentTarget.setPointerCapture(event.pointerId); start.current = { x: event.clientX, y: event.clientY, force } }}
            onPointerMove={onMove} onPointerUp={() => { start.current = null; desk.putDown(true) }} onPointerCancel={() => { start.current = null; desk.putDown(false) }}><span /></button>
        </>
      )}
      <div className="plate" style={plateAt(x, y, size)}>
        <b>{name}</b> {kind}{kind === 'ridge' || kind === 'valley' ? ` ${figure(joints.force[joint], 3)}` : ''}
        <small>{kind === 'frozen'
          ? (answer.frozenFree[joint] === 1 ? 'Frozen: it folds in no roof on this plan.' : 'Frozen by the conditions: it folds with a free rim.')
          : `${figure(joints.fold_deg[joint], 1)}° between its panels. Form force: no load, not a member force.`}</small>
        {kind !== 'frozen' && (
          <>
            <NumberField label="force" start={(force < 0 ? '\u2212' : '') + figure(Math.abs(force), 3)} onValue={ask} />
            <p>{(['ridge', 'valley', 'flush'] as const).map((fold) => <button key={fold} className="word spaced" onClick={() => ask(fold)}>{fold}</button>)}
              {held ? <button className="word" data-release onClick={() => desk.release([conditionName])}>Release <kbd>X</kbd></button>
                : <button className="word" data-hold onClick={() => ask(force)}>Hold <kbd>H</kbd></button>}</p>
          </>
        )}
      </div>
    </>
  )
}

function PanelPlate({ panel, answer, window, size }: Placed & { readonly panel: number }) {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  const { plan, roof } = answer
  let cx = 0
  let cy = 0
  const count = plan.panelStart[panel + 1] - plan.panelStart[panel]
  for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
    cx += plan.x[plan.corner[c]] / count
    cy += plan.y[plan.corner[c]] / count
  }
  const [x, y] = toSheet(window, cx, cy)
  const name = panelName(panel)
  const conditionName = `slope of ${name}`
  const held = doc?.brief.conditions.some((condition) => condition.name === conditionName) === true
  if (roof === null) return null
  const slope = slopeOf(roof.gradient, panel)
  const bearing = fallBearing(roof.gradient, panel)
  const hold = (pitch_deg: number, bearing_deg: number): void =>
    desk.condition({ name: conditionName, kind: 'plane', at: { panels: [name] }, pitch_deg, bearing_deg, soft: null }, `${name} ${figure(pitch_deg, 1)}° ${compassPoint(bearing_deg)}`)
  return (
    <div className="plate" style={plateAt(x, y, size)}>
      <b>{name}</b> {figure(slope, 1)}° {Number.isNaN(bearing) ? 'level' : compassPoint(bearing)}
      <NumberField label="slope °" start={figure(slope, 1)} onValue={(value) => value >= 0 && value < 90 && hold(value, Number.isNaN(bearing) ? 180 : bearing)} />
      <NumberField label="falls to °" start={Number.isNaN(bearing) ? '' : figure(bearing, 0)} onValue={(value) => hold(slope, value)} />
      <p>{held
        ? <button className="word" data-release onClick={() => desk.release([conditionName])}>Release <kbd>X</kbd></button>
        : <button className="word" data-hold onClick={() => hold(slope, Number.isNaN(bearing) ? 180 : bearing)}>Hold <kbd>H</kbd></button>}</p>
      <p><button className="word" onClick={() => desk.condition({ name: `one plane at ${name}`, kind: 'coplanar', at: { panels: [name, ...neighbours(plan, panel).map(panelName)] }, soft: null }, `${name} and its neighbours in one plane`)}>One plane with its neighbours</button></p>
    </div>
  )
}

function neighbours(plan: Plan, panel: number): number[] {
  const out: number[] = []
  for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
    const other = plan.panelOf[plan.cornerHalf[c] ^ 1]
    if (other >= 0 && !out.includes(other)) out.push(other)
  }
  return out
}

/** A length typed as people type it; what was understood is echoed, what was not is said. */
export function LengthField({ label, bare, to, start, onValue }: {
  readonly label: string
  readonly bare: 'mm' | 'cm' | 'm' | 'in' | 'ft'
  readonly to: 'mm' | 'cm' | 'm' | 'in' | 'ft'
  readonly start: string
  readonly onValue: (value: number) => void
}) {
  const [text, setText] = useState(start)
  const [typed, setTyped] = useState(false)
  useEffect(() => { if (!typed) setText(start) }, [start, typed])
  const parsed = parseLength(text, bare, to)
  return (
    <label className="field">
      {label !== '' && <span>{label}</span>}
      <input value={text} size={9} inputMode="text" aria-invalid={typed && !parsed.ok}
        onChange={(event) => { setText(event.target.value); setTyped(true) }}
        onBlur={() => setTyped(false)}
        onKeyDown={(event) => {
          if (event.key === 'Escape') { setText(start); setTyped(false); event.currentTarget.blur() }
          if (event.key === 'Enter' && parsed.ok) { onValue(parsed.value); setTyped(false); event.currentTarget.blur() }
          if (event.key === 'Escape' || event.key === 'Enter') event.stopPropagation()
        }} />
      <small>{!typed ? bare : parsed.ok ? `= ${figure(parsed.value * conversion(to, 'mm'))} mm, Enter` : parsed.problem.cure}</small>
    </label>
  )
}

export function NumberField({ label, start, onValue }: { readonly label: string; readonly start: string; readonly onValue: (value: number) => void }) {
  const [text, setText] = useState(start)
  const [typed, setTyped] = useState(false)
  useEffect(() => { if (!typed) setText(start) }, [start, typed])
  const value = Number(text.trim().replace(',', '.').replace('\u2212', '-').replace(/°$/, ''))
  const good = text.trim() !== '' && Number.isFinite(value)
  return (
    <label className="field">
      {label !== '' && <span>{label}</span>}
      <input value={text} size={7} inputMode="decimal" aria-invalid={typed && !good}
        onChange={(event) => { setText(event.target.value); setTyped(true) }}
        onBlur={() => setTyped(false)}
        onKeyDown={(event) => {
          if (event.key === 'Escape') { setText(start); setTyped(false); event.currentTarget.blur() }
          if (event.key === 'Enter' && good) { onValue(value); setTyped(false); event.currentTarget.blur() }
          if (event.key === 'Escape' || event.key === 'Enter') event.stopPropagation()
        }} />
      {typed && <small>{good ? 'Enter' : 'not a number'}</small>}
    </label>
  )
}
