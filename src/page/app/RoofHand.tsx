/**
 * What the hand finds on the roof: the diamond on its rise, the staff at the selected node, and the chain line from the
 * selected panel up to the plan. The places follow the camera: the canvas tells them after every frame.
 */
import { useEffect, useRef, useState, type KeyboardEvent, type PointerEvent, type RefObject } from 'react'
import { Vector3, type Camera } from 'three'
import { conversion } from '../../base/length.ts'
import { nodeName } from '../../plan/names.ts'
import { heldNode, withDown, withRise } from '../../plan/project/edits.ts'
import { figure, signed } from '../../paper/drawing/figures.ts'
import type { Answer, Roof } from '../../roof/answer/answer.ts'
import { onScreen } from '../view/paper-renderer.ts'
import { useDesk, useDeskState } from './context.ts'
import { looks } from './looks.ts'
import type { Size } from './useSize.ts'

/** Told of the camera after every frame. */
export type OnCamera = RefObject<((camera: Camera) => void) | null>

type Spot = readonly [x: number, y: number]

interface Places {
  /** The highest node, and the point at the springing's height under it. */
  readonly top: Spot
  readonly foot: Spot
  /** Middle of the selected panel, and the selected node. */
  readonly panel: Spot | null
  readonly node: Spot | null
}

/** Millimetres of height to a pixel of the staff, and with Shift. */
const staffStep = 10
const fineStep = 1

export function RoofHand({ answer, roof, size, onCamera, exaggeration, stands }: {
  readonly answer: Answer; readonly roof: Roof; readonly size: Size; readonly onCamera: OnCamera; readonly exaggeration: number
  /** The roof is seen from the south in the plan's scale, so that plan and roof stand over one another. */
  readonly stands: boolean
}) {
  const selection = useDeskState((state) => state.selection)
  const [places, setPlaces] = useState<Places | null>(null)
  const { plan } = answer
  const panel = selection?.kind === 'panel' && selection.index < plan.panelCount ? selection.index : -1
  const node = selection?.kind === 'node' && selection.index < plan.nodeCount ? selection.index : -1
  const last = useRef<Camera | null>(null)
  useEffect(() => {
    const measure = (camera: Camera): void => {
      last.current = camera
      const next = placesOf(answer, roof, exaggeration, camera, size, panel, node)
      setPlaces((old) => (old !== null && same(old, next) ? old : next))
    }
    onCamera.current = measure
    if (last.current !== null) measure(last.current)
    return () => { onCamera.current = null }
  }, [answer, roof, exaggeration, size, panel, node, onCamera])
  const chained = stands && panel >= 0 && places?.panel !== null && places !== null
  useEffect(() => {
    looks.update((state) => (state.chained === chained ? state : { ...state, chained }))
  }, [chained])
  if (places === null) return null
  return (
    <>
      {chained && places.panel !== null && (
        <svg className="over" width={size.width} height={size.height} aria-hidden="true"><line className="chain" x1={places.panel[0]} x2={places.panel[0]} y1={0} y2={places.panel[1]} /></svg>
      )}
      {Math.abs(places.foot[1] - places.top[1]) > 4 && <Rise answer={answer} places={places} size={size} />}
      {node >= 0 && places.node !== null && <Staff key={node} node={node} answer={answer} height={roof.heights[node]} at={places.node} size={size} />}
    </>
  )
}

function placesOf({ plan, summary }: Answer, { heights }: Roof, exaggeration: number, camera: Camera, { width, height }: Size, panel: number, node: number): Places {
  let low = Infinity
  let top = 0
  for (let i = 0; i < heights.length; i += 1) {
    if (heights[i] < low) low = heights[i]
    if (heights[i] > heights[top]) top = i
  }
  const point = new Vector3()
  const at = (x: number, y: number, z: number): Spot => onScreen(point.set(x - plan.frame.centreX, y - plan.frame.centreY, (z - low) * exaggeration), camera, width, height)
  let middle: Spot | null = null
  if (panel >= 0) {
    let [x, y, z] = [0, 0, 0]
    const n = plan.panelStart[panel + 1] - plan.panelStart[panel]
    for (let c = plan.panelStart[panel]; c < plan.panelStart[panel + 1]; c += 1) {
      x += plan.x[plan.corner[c]] / n
      y += plan.y[plan.corner[c]] / n
      z += heights[plan.corner[c]] / n
    }
    middle = at(x, y, z)
  }
  return {
    top: at(plan.x[top], plan.y[top], heights[top]), foot: at(plan.x[top], plan.y[top], heights[top] - (summary.roof?.rise ?? 0)), panel: middle,
    node: node < 0 ? null : at(plan.x[node], plan.y[node], heights[node]),
  }
}

function same(a: Places, b: Places): boolean {
  const near = (p: Spot | null, q: Spot | null): boolean => p === q || (p !== null && q !== null && Math.abs(p[0] - q[0]) < 0.2 && Math.abs(p[1] - q[1]) < 0.2)
  return near(a.top, b.top) && near(a.foot, b.foot) && near(a.panel, b.panel) && near(a.node, b.node)
}

/** The rise as a dimension in the margin, its upper end a diamond to be dragged; through nought the roof turns down. */
function Rise({ answer, places, size }: { readonly answer: Answer; readonly places: Places; readonly size: Size }) {
  const desk = useDesk()
  const down = useDeskState((state) => state.doc?.brief.down === true)
  const start = useRef<{ readonly y: number; readonly rise: number; readonly perPx: number } | null>(null)
  const { unit } = answer.plan
  const mm = conversion(unit, 'mm')
  const rise = answer.summary.roof?.rise ?? 0
  const x = size.width - 62
  const [y0, y1] = [places.foot[1], places.top[1]]
  if (y0 < 0 || y1 < 12 || y0 > size.height || y1 > size.height) return null
  const step = (to_mm: number): Parameters<typeof desk.take>[0] | null => {
    const base = desk.state.steps[desk.state.at]?.doc
    const rounded = Math.abs(to_mm) < 10 ? (to_mm < 0 ? -10 : 10) : to_mm
    if (base === undefined) return null
    return { doc: withDown(withRise(base, Math.abs(rounded) / mm), rounded < 0), what: `Rise ${signed(rounded).replace('+', '')} mm`, before: `was ${figure(start.current === null ? rise * mm : start.current.rise)} mm` }
  }
  const onMove = (event: PointerEvent): void => {
    if (start.current === null || event.buttons === 0) return
    const to = start.current.rise + (start.current.y - event.clientY) * start.current.perPx * (event.shiftKey ? 0.1 : 1)
    const next = step(10 * Math.round(to / 10))
    if (next !== null) desk.hold(next)
  }
  const end = (keep: boolean): void => {
    start.current = null
    desk.putDown(keep)
  }
  const onKey = (event: KeyboardEvent): void => {
    const by = ({ ArrowUp: 10, ArrowDown: -10, PageUp: 100, PageDown: -100 } as Record<string, number>)[event.key]
    if (by === undefined) return
    event.preventDefault()
    const next = step((down ? -1 : 1) * rise * mm + by)
    if (next !== null) desk.take(next)
  }
  return (
    <>
      <svg className="over rise" width={size.width} height={size.height} aria-hidden="true">
        <path className="hairline" d={`M${places.top[0]} ${y1}H${x + 6}M${x - 6} ${y0}H${x + 6}`} />
        <path d={`M${x} ${y0}V${y1}`} />
        <path className="tick" d={`M${x - 4} ${y0 + 4}L${x + 4} ${y0 - 4}`} />
        <text x={x + 12} y={y1 - 8}>rise</text>
        <text className="figure" x={x + 12} y={y1 + 5}>{figure(rise * mm)}</text>
      </svg>
      <button className="handle diamond" role="slider" aria-label="Rise in mm: drag up or down, or use the arrow keys" aria-valuenow={Math.round(rise * mm)} aria-orientation="vertical" style={{ left: x - 12, top: y1 - 12 }}
        onPointerDown={(event) => {
          event.currentTarget.setPointerCapture(event.pointerId)
          const signedRise = (down ? -1 : 1) * rise * mm
          start.current = { y: event.clientY, rise: signedRise, perPx: (rise * mm) / Math.max(8, Math.abs(y0 - y1)) }
        }}
        onPointerMove={onMove} onPointerUp={() => end(true)} onPointerCancel={() => end(false)} onKeyDown={onKey}><span /></button>
    </>
  )
}

const staffHalf = 60

/** A levelling staff beside the node: blocks of 100 mm, 10 mm a pixel, 1 mm with Shift. */
function Staff({ node, answer, height, at, size }: { readonly node: number; readonly answer: Answer; readonly height: number; readonly at: Spot; readonly size: Size }) {
  const desk = useDesk()
  const { unit } = answer.plan
  const mm = conversion(unit, 'mm')
  const now = height * mm
  const [start, setStart] = useState<{ readonly y: number; readonly now: number; readonly at: Spot } | null>(null)
  const place = start?.at ?? at
  const middle = start?.now ?? now
  // On the side away from the middle of the drawing, kept within it.
  const left = place[0] < size.width / 2 ? Math.max(4, place[0] - 86) : Math.min(size.width - 74, place[0] + 16)
  const top = Math.max(2, Math.min(size.height - 2 * staffHalf - 6, place[1] - staffHalf))
  const yOf = (value: number): number => place[1] - top - (value - middle) / staffStep
  const blocks: number[] = []
  const lowest = middle - (2 * staffHalf - (place[1] - top)) * staffStep
  for (let b = Math.ceil(lowest / 100) * 100; yOf(b + 100) >= 0; b += 100) blocks.push(b)
  const words = (level: number): string => `${nodeName(node)} ${signed(level)} mm`
  const onMove = (event: PointerEvent): void => {
    if (start === null || event.buttons === 0) return
    const level = Math.round(start.now + (start.y - event.clientY) * (event.shiftKey ? fineStep : staffStep))
    desk.holdCondition(heldNode(node, level / mm), words(level), `was ${signed(start.now)} mm`)
  }
  const onKey = (event: KeyboardEvent): void => {
    const by = (event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0) * (event.shiftKey ? fineStep : staffStep)
    if (by === 0) return
    event.preventDefault()
    desk.condition(heldNode(node, Math.round(now + by) / mm), words(Math.round(now + by)))
  }
  const end = (keep: boolean): void => {
    setStart(null)
    desk.putDown(keep)
  }
  const markY = yOf(now)
  return (
    <>
      <svg className="over" width={size.width} height={size.height} aria-hidden="true">
        <circle cx={at[0]} cy={at[1]} r={5.5} />
        <line className="bar-line" x1={at[0]} y1={at[1]} x2={left < at[0] ? left + 70 : left} y2={top + Math.max(0, Math.min(2 * staffHalf, markY))} />
      </svg>
      <button className="staff" role="slider" aria-label={`${nodeName(node)}, height in mm: drag up or down, or use the arrow keys`} aria-valuenow={Math.round(now)} aria-orientation="vertical" style={{ left, top }}
        onPointerDown={(event) => {
          event.currentTarget.setPointerCapture(event.pointerId)
          setStart({ y: event.clientY, now, at })
        }}
        onPointerMove={onMove} onPointerUp={() => end(true)} onPointerCancel={() => end(false)} onKeyDown={onKey}>
        <svg width={70} height={2 * staffHalf} aria-hidden="true">
          {blocks.map((b) => <rect key={b} x={(b / 100) % 2 === 0 ? 4 : 9} width={5} y={yOf(b + 100)} height={10} />)}
          <path d={`M4 0V${2 * staffHalf}M14 0V${2 * staffHalf}`} />
          {blocks.filter((b) => b % 500 === 0 && yOf(b) > 9 && yOf(b) < 2 * staffHalf - 2).map((b) => <g key={b}><path d={`M14 ${yOf(b)}H19`} /><text x={66} y={yOf(b) + 4} textAnchor="end">{signed(b)}</text></g>)}
          <path className="now" d={`M2 ${markY}H68`} />
        </svg>
      </button>
    </>
  )
}
