/** The independent ways that the present conditions leave, smoothest first, each with a picture and a slider in mm at its peak. */
import { useEffect, useMemo, useRef, useState } from 'react'
import { conversion } from '../../base/length.ts'
import { figure, signed } from '../../paper/drawing/figures.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'

export function WaysDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const ways = useDeskState((state) => state.ways)
  const fresh = useDeskState((state) => state.fresh)
  useEffect(() => { if (ways === null && fresh) void desk.askWays() }, [ways, fresh, desk])
  const { freedom, freedomLeft } = answer.summary.stress
  const left = answer.conditions.some(({ soft }) => !soft) ? (freedomLeft ?? 0) : freedom
  if (left === 0) return <p className="entry note">No way is left: {answer.conditions.length > 0 ? 'the conditions leave exactly this roof.' : 'no joint can fold.'}</p>
  if (ways === null) return <p className="entry note">Looking for the ways.</p>
  if (ways.length === 0) return <p className="entry note">Only tilts are left.</p>
  return (
    <>
      <p className="entry note">{figure(left)} left, the {ways.length === left ? 'lot' : `${ways.length} smoothest`} here. Each moves the roof and keeps every panel flat and every condition.</p>
      <ol className="ways">{ways.map((way, k) => <WayCard key={k} number={k + 1} way={way.heights} answer={answer} />)}</ol>
    </>
  )
}

function WayCard({ number, way, answer }: { readonly number: number; readonly way: Float64Array; readonly answer: Answer }) {
  const desk = useDesk()
  const [value, setValue] = useState(0)
  const start = useRef<Float64Array | null>(null)
  const { plan } = answer
  const mm = conversion(plan.unit, 'mm')
  // A tenth of the shorter side is as far as a roof is likely to go.
  const most = Math.round(plan.frame.span * mm * 0.05)
  const move = (amount: number): void => {
    setValue(amount)
    const base = desk.state.steps[desk.state.at]?.doc
    start.current ??= answer.roof?.heights ?? null
    if (base === undefined || start.current === null) return
    const from = start.current
    const target = from.map((z, i) => z + (way[i] * amount) / mm)
    desk.hold({ doc: { ...base, target, brief: { ...base.brief, rise: null } }, what: `Way ${number} by ${signed(amount)} mm`, before: 'a way left' })
  }
  const drop = (): void => {
    start.current = null
    desk.putDown(true)
    setValue(0)
  }
  const picture = useMemo(() => wayPicture(answer, way), [answer, way])
  return (
    <li>
      <span>{number}</span><span className="note">{value === 0 ? '' : signed(value)}</span>
      <svg viewBox="0 0 84 46" aria-hidden="true">{picture.map(({ d, shade }, i) => <path key={i} d={d} style={{ fillOpacity: shade }} />)}</svg>
      <input type="range" min={-most} max={most} step={1} value={value} aria-label={`Way ${number}, mm at its peak`} onChange={(event) => move(Number(event.target.value))} onPointerUp={drop} onKeyUp={(event) => { if (event.key.startsWith('Arrow') || event.key.startsWith('Page')) drop() }} />
    </li>
  )
}

/** At most 600 panels, seen from the south; the way's peak is drawn a fifth of the span high. */
function wayPicture({ plan }: Answer, way: Float64Array): { d: string; shade: number }[] {
  const { span, centreX, centreY } = plan.frame
  const scale = 70 / span
  const step = Math.max(1, Math.ceil(plan.panelCount / 600))
  const out: { d: string; shade: number; depth: number }[] = []
  for (let p = 0; p < plan.panelCount; p += step) {
    let d = ''
    let sum = 0
    let depth = 0
    const count = plan.panelStart[p + 1] - plan.panelStart[p]
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const node = plan.corner[c]
      const x = 42 + scale * (plan.x[node] - centreX)
      const y = 24 - scale * (0.5 * (plan.y[node] - centreY) + 0.16 * span * way[node])
      d += `${c === plan.panelStart[p] ? 'M' : 'L'}${x.toFixed(1)} ${y.toFixed(1)}`
      sum += way[node] / count
      depth += plan.y[node] / count
    }
    out.push({ d: `${d}Z`, shade: 0.35 + 0.3 * Math.max(-1, Math.min(1, sum)), depth })
  }
  return out.sort((a, b) => b.depth - a.depth)
}
