/** A node in hand: a handle that is dragged up and down, and its height as a field. */
import { useRef, type PointerEvent } from 'react'
import { conversion } from '../../base/length.ts'
import { nodeName } from '../../plan/names.ts'
import { heldNode } from '../../plan/project/edits.ts'
import { signed } from '../../paper/drawing/figures.ts'
import { toSheet } from '../../paper/drawing/plan-window.ts'
import { useDesk, useDeskState } from './context.ts'
import { LengthField, typable } from './Fields.tsx'
import { plateAt, type Placed } from './plate.ts'

/** A pixel of the drag, in mm; with Shift a tenth. */
const perPixel_mm = 10

export function NodePlate({ node, answer, window, size }: Placed & { readonly node: number }) {
  const desk = useDesk()
  const conditions = useDeskState((state) => state.doc?.brief.conditions ?? [])
  const { plan, roof } = answer
  const [x, y] = toSheet(window, plan.x[node], plan.y[node])
  const name = nodeName(node)
  const height = roof?.heights[node] ?? 0
  const mm = conversion(plan.unit, 'mm')
  const start = useRef<{ y: number; level: number } | null>(null)
  const existing = conditions.find((condition) => condition.name === heldNode(node, 0).name)
  const soft = existing?.soft ?? null

  const words = (level: number): string => `${name} ${signed(level * mm)} mm`
  const ask = (level: number): void => desk.condition(heldNode(node, level, soft), words(level))
  const stepOf = (shift: boolean): number => (shift ? perPixel_mm / 10 : perPixel_mm) / mm
  const onMove = (event: PointerEvent<HTMLButtonElement>): void => {
    if (start.current === null || event.buttons === 0) return
    const level = start.current.level + (start.current.y - event.clientY) * stepOf(event.shiftKey)
    desk.holdCondition(heldNode(node, level, soft), words(level), `was ${signed(start.current.level * mm)}`)
  }
  const onEnd = (keep: boolean) => (): void => {
    start.current = null
    desk.putDown(keep)
  }
  return (
    <>
      <button className="handle" style={{ left: x - 12, top: y - 12 }} aria-label={`${name}: drag up or down, or use the arrow keys, to set its height`}
        onPointerDown={(event) => { event.currentTarget.setPointerCapture(event.pointerId); start.current = { y: event.clientY, level: height } }}
        onPointerMove={onMove} onPointerUp={onEnd(true)} onPointerCancel={onEnd(false)}
        onKeyDown={(event) => {
          const direction = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0
          if (direction === 0) return
          event.preventDefault()
          ask(height + direction * stepOf(event.shiftKey))
        }}><span /></button>
      <div className="plate" style={plateAt(x, y, { answer, window, size })}>
        <b>{name}</b> {roof === null ? '' : `${signed(height * mm)} mm`}
        <LengthField label="height" bare="mm" to={plan.unit} start={roof === null ? '' : typable(Math.round(height * mm))} onValue={ask} />
        {existing !== undefined && 'level' in existing && existing.level !== null && <small>asked {signed(existing.level * mm)} mm{existing.off === true ? ', off' : soft === null ? '' : ', softly'}</small>}
        <p>
          {existing === undefined
            ? <button className="word" data-hold onClick={() => ask(height)}>Hold <kbd>H</kbd></button>
            : <button className="word" data-release onClick={() => desk.release([existing.name])}>Release <kbd>X</kbd></button>}
          {' '}<button className="word" onClick={() => desk.condition(heldNode(node, null, soft), `${name} at the datum`)}>at the datum</button>
        </p>
        <small>Shift and click another node picks the run between them; Ctrl and click gathers.</small>
      </div>
    </>
  )
}
