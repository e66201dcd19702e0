/** A joint in hand: a cross-bar that is pulled across it, its form force as a field; a frozen one says why it is. */
import { useEffect, useRef, useState, type PointerEvent } from 'react'
import { jointName } from '../../plan/names.ts'
import type { Fold } from '../../plan/project/condition.ts'
import { heldForce } from '../../plan/project/edits.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { jointKinds } from '../../paper/drawing/joint-kinds.ts'
import { toSheet } from '../../paper/drawing/plan-window.ts'
import type { FrozenReason } from '../../job/session.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { NumberField, typable } from './Fields.tsx'
import { plateAt, type Placed } from './plate.ts'
import { jointsOf } from './useReading.ts'

/** A form force as words: its way and its size. */
export const forceWords = (force: number): string => (force === 0 ? 'flush' : `${force < 0 ? 'ridge' : 'valley'} ${figure(Math.abs(force), 3)}`)

/** Pulled across its joint this far, a cross-bar asks for the 95th percentile of the forces; nearer to the middle than the snap, for none. */
const barReach = 50
const barSnap = 4

export function JointPlate({ joint, answer, window, size }: Placed & { readonly joint: number }) {
  const desk = useDesk()
  const conditions = useDeskState((state) => state.doc?.brief.conditions ?? [])
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
  const existing = conditions.find((condition) => condition.name === heldForce(joint, 0).name)
  const soft = existing?.soft ?? null
  const start = useRef<{ x: number; y: number; force: number } | null>(null)
  const perPx = (joints.force95 > 0 ? joints.force95 : 0.1) / barReach
  const offset = Math.max(-70, Math.min(70, force / perPx))

  const ask = (asked: number | Fold): void => desk.condition(heldForce(joint, asked, soft), `${name} ${typeof asked === 'string' ? asked : forceWords(asked)}`)
  const onMove = (event: PointerEvent<HTMLButtonElement>): void => {
    if (start.current === null || event.buttons === 0) return
    const across = start.current.force / perPx + (event.clientX - start.current.x) * ux + (event.clientY - start.current.y) * uy
    const asked = Math.abs(across) < barSnap ? 0 : across * perPx
    desk.holdCondition(heldForce(joint, asked, soft), `${name} ${forceWords(asked)}`, `was ${forceWords(start.current.force)}`)
  }
  const onEnd = (keep: boolean) => (): void => {
    start.current = null
    desk.putDown(keep)
  }
  return (
    <>
      {kind !== 'frozen' && (
        <>
          <svg className="over" width={size.width} height={size.height} aria-hidden="true"><line className="bar-line" x1={x - ux * barReach} y1={y - uy * barReach} x2={x + ux * barReach} y2={y + uy * barReach} /></svg>
          <button className="handle" style={{ left: x + ux * offset - 12, top: y + uy * offset - 12, cursor: 'move' }} aria-label={`${name}, ${forceWords(force)}: pull across the joint, or use the arrow keys, to change its form force`}
            onPointerDown={(event) => { event.currentTarget.setPointerCapture(event.pointerId); start.current = { x: event.clientX, y: event.clientY, force } }}
            onPointerMove={onMove} onPointerUp={onEnd(true)} onPointerCancel={onEnd(false)}
            onKeyDown={(event) => {
              const direction = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0
              if (direction === 0) return
              event.preventDefault()
              ask(force + direction * 5 * perPx)
            }}><span /></button>
        </>
      )}
      <div className="plate" style={plateAt(x, y, { answer, window, size })}>
        <b>{name}</b> {kind}{kind === 'ridge' || kind === 'valley' ? ` ${figure(joints.force[joint], 3)}` : ''}
        {kind === 'frozen' ? <WhyFrozen joint={joint} answer={answer} /> : <small>{figure(joints.fold_deg[joint], 1)}° between its panels. Form force: no load, not a member force.</small>}
        {kind !== 'frozen' && <NumberField label="force" start={(force < 0 ? '\u2212' : '') + typable(Math.abs(force), 3)} onValue={ask} />}
        {(kind !== 'frozen' || existing !== undefined) && (
          <p>{kind !== 'frozen' && (['ridge', 'valley', 'flush'] as const).map((fold) => <button key={fold} className="word spaced" onClick={() => ask(fold)}>{fold}</button>)}
            {existing !== undefined ? <button className="word" data-release onClick={() => desk.release([existing.name])}>Release <kbd>X</kbd></button>
              : <button className="word" data-hold onClick={() => ask(force)}>Hold <kbd>H</kbd></button>}</p>
        )}
      </div>
    </>
  )
}

/** The reason, with what it speaks of to go to, and the conditions to let go of. */
function WhyFrozen({ joint, answer }: { readonly joint: number; readonly answer: Answer }) {
  const desk = useDesk()
  const [reason, setReason] = useState<FrozenReason | null>(null)
  useEffect(() => {
    let isHere = true
    void desk.whyFrozen(joint).then((found) => { if (isHere) setReason(found) })
    return () => { isHere = false }
  }, [desk, joint, answer])
  if (reason === null) return <small>{answer.frozenFree[joint] === 1 ? 'It folds in no roof on this plan.' : 'The conditions keep it from folding.'}</small>
  return (
    <div className="why">
      <small>{sentenceOf(reason.words)}</small>
      {reason.joints.length > 0 && <p>{reason.joints.slice(0, 6).map((other) => <button key={other} className="word spaced" onClick={() => desk.select({ kind: 'joint', index: other })}>{jointName(other)}</button>)}</p>}
      {reason.conditions.slice(0, 4).map((name) => <p key={name}><button className="word" onClick={() => desk.release([name])}>Release {name}</button></p>)}
    </div>
  )
}

/** At most some forty names: a flat group may have hundreds. */
const sentenceOf = (words: string): string => `${words.length > 320 ? `${words.slice(0, 300)} …` : words}.`
