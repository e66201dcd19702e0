/** The independent ways that the present conditions leave, smoothest first, each with a picture and a slider in mm at its peak. */
import { useEffect, useMemo, useRef, useState } from 'react'
import { conversion } from '../../base/length.ts'
import { figure, signed } from '../../paper/drawing/figures.ts'
import { nodeName } from '../../plan/names.ts'
import { movedAlong } from '../../plan/project/edits.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { Way } from '../../job/session.ts'
import { useDesk, useDeskState } from './context.ts'
import { NumberField } from './Fields.tsx'
import { evenWays } from '../store/even-ways.ts'
import { wayPicture } from '../store/way-picture.ts'

export function WaysDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const ways = useDeskState((state) => state.ways)
  const fresh = useDeskState((state) => state.fresh)
  const mirror = useDeskState((state) => state.mirror)
  useEffect(() => { if (ways === null && fresh) void desk.askWays() }, [ways, fresh, desk])
  const shown = useMemo(() => (ways === null || mirror === null ? ways : evenWays(mirror, ways)), [ways, mirror])
  const { freedom, freedomLeft } = answer.summary.stress
  const left = answer.conditions.some(({ soft }) => !soft) ? (freedomLeft ?? 0) : freedom
  if (left === 0) return <p className="entry note">No way is left: {answer.conditions.length > 0 ? 'the conditions leave exactly this roof.' : 'no joint can fold.'}</p>
  if (shown === null) return <p className="entry note">Looking for the ways.</p>
  if (shown.length === 0) return <p className="entry note">{mirror === null ? 'Only tilts are left.' : 'None of the smoothest ways keeps the halves alike.'}</p>
  return (
    <>
      <p className="entry note">{figure(left)} left, {mirror !== null ? `${figure(shown.length)} of the smoothest that keep the halves alike` : shown.length === left ? 'the lot' : `the ${figure(shown.length)} smoothest`} here. Each moves the roof and keeps every panel flat and every condition. Rings mark the node that moves most.</p>
      <ol className="ways">{shown.map((way, k) => <WayCard key={k} number={k + 1} way={way} answer={answer} />)}</ol>
    </>
  )
}

/** What a pixel of the slider may reach, as a share of the span: as far as a roof is likely to go. */
const reach = 0.05

function WayCard({ number, way, answer }: { readonly number: number; readonly way: Way; readonly answer: Answer }) {
  const desk = useDesk()
  const [value, setValue] = useState(0)
  const start = useRef<Float64Array | null>(null)
  const { plan } = answer
  const mm = conversion(plan.unit, 'mm')
  const most = Math.round(plan.frame.span * mm * reach)
  const move = (amount: number): void => {
    setValue(amount)
    const base = desk.standing
    start.current ??= answer.roof?.heights ?? null
    if (base === null || start.current === null) return
    desk.hold({ doc: movedAlong(base, start.current, way.heights, amount / mm), what: `Way ${number} by ${signed(amount)} mm`, before: 'a way left' })
  }
  const drop = (): void => {
    start.current = null
    desk.putDown(true)
    setValue(0)
  }
  const picture = useMemo(() => wayPicture(plan, way), [plan, way])
  const rise = value < 0 ? way.riseDown * -value : way.riseUp * value
  return (
    <li>
      <span>{number}</span><span className="note">{value === 0 ? '' : signed(value)}</span>
      <svg viewBox="0 0 84 46" aria-hidden="true">{picture.panels.map(({ d, shade }, i) => <path key={i} d={d} style={{ fillOpacity: shade }} />)}<circle className="peak" cx={picture.peak[0]} cy={picture.peak[1]} r={3} /></svg>
      <input type="range" min={-most} max={most} step={1} value={value} aria-label={`Way ${number}, mm at its peak, ${nodeName(way.peak)}`} onChange={(event) => move(Number(event.target.value))} onPointerUp={drop} onKeyUp={(event) => { if (/^(?:Arrow|Page|Home|End)/.test(event.key)) drop() }} />
      <NumberField label="" named={`Way ${number}, mm`} empty="mm" start="" onValue={(amount) => { move(amount); drop() }} />
      <small className="note">{value === 0 ? nodeName(way.peak) : `rise ${signed(rise)}`}</small>
    </li>
  )
}
