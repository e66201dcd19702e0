/** Drawing 1: the plan, with zoom, pan, picking, and the readings it can be filled by. */
import { useCallback, useDeferredValue, useEffect, useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import { axisBubbles } from '../../paper/drawing/axis-drawing.ts'
import { cureOverlay, movesOverlay, overlayItems, type Overlay } from '../../paper/drawing/cure-drawing.ts'
import { lineKey } from '../../paper/drawing/legend.ts'
import { planDetail, medianPanelWidth } from '../../paper/drawing/level-of-detail.ts'
import { planArea, planDrawing } from '../../paper/drawing/plan-drawing.ts'
import { fitted, panned, zoomed, type PlanWindow } from '../../paper/drawing/plan-window.ts'
import { readingNames, readingTitles } from '../../paper/drawing/reading.ts'
import { toSvg } from '../../paper/drawing/svg.ts'
import { themes } from '../../paper/drawing/theme.ts'
import { runOfAxis, type Axis } from '../../plan/axes.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { samePanels } from '../../plan/project/changed-plan.ts'
import { useDesk, useDeskState } from './context.ts'
import { drawnCure } from './CuresDesk.tsx'
import { ListCanvas } from './ListCanvas.tsx'
import { axesFor, looks, useLooks } from './looks.ts'
import { neighbour, pick, runBetween } from '../store/picking.ts'
import { jointsOf, useReading } from './useReading.ts'
import type { Size } from './useSize.ts'
import { PlanHand } from './PlanHand.tsx'

const none: readonly Axis[] = []

/** `onSize`: told the size of the drawing, from which the roof below takes its scale. */
export function PlanPane({ onSize }: { readonly onSize: (size: Size) => void }) {
  const desk = useDesk()
  const answer = useDeskState((state) => state.answer)
  const selection = useDeskState((state) => state.selection)
  const reading = useDeskState((state) => state.reading)
  const fresh = useDeskState((state) => state.fresh || state.busy === null)
  const picked = useDeskState((state) => state.picked)
  const made = useReading(answer)
  const plan = answer?.plan ?? null
  const withAxes = useLooks((state) => state.axes)
  const chained = useLooks((state) => state.chained)
  const drawnAxes = useDeskState((state) => state.doc?.read.axes)
  // The plan is drawn before its axes are known.
  const planOfAxes = useDeferredValue(plan)
  const known = useMemo(() => (planOfAxes === null ? none : axesFor(drawnAxes === undefined ? { plan: planOfAxes } : { plan: planOfAxes, axes: drawnAxes })), [planOfAxes, drawnAxes])
  const axes = withAxes && planOfAxes === plan ? known : none
  const cure = useDeskState(({ cures }) => cures?.list.cures[cures.drawn])
  const moved = useDeskState(({ cures }) => cures?.moved)
  // Where the nodes were when the drawing was accepted; null: where they are.
  const first = useDeskState((state) => state.steps[0]?.doc.read.plan)
  const movedFrom = useMemo(() => (first !== undefined && plan !== null && first !== plan && samePanels(first, plan) ? first : null), [first, plan])
  const withMoves = useLooks((state) => state.moves)
  const [window_, setWindow] = useState<PlanWindow | null>(null)
  const shown = useRef<PlanWindow | null>(null)
  const [size, setSize] = useState({ width: 0, height: 0 })
  useEffect(() => setWindow(null), [plan])
  useEffect(() => onSize(size), [onSize, size])

  const draw = useCallback((width: number, height: number) => {
    setSize((old) => (old.width === width && old.height === height ? old : { width, height }))
    if (answer === null || made === null) return null
    shown.current = window_ ?? fitted(answer.plan, planArea(width, height, true))
    const list = planDrawing(answer, { width, height, ...made, window: shown.current, selection, furniture: true, axes, chain: chained && window_ === null })
    const over: Overlay | null = cure !== undefined && moved !== undefined ? cureOverlay(drawnCure(answer, cure, moved), shown.current)
      : movedFrom !== null && withMoves ? movesOverlay(movedFrom, answer.plan, shown.current) : null
    return over === null ? list : { ...list, items: [...list.items, ...overlayItems(over, height)], description: `${list.description} ${over.note}` }
  }, [answer, made, window_, selection, axes, chained, cure, moved, movedFrom, withMoves])

  const zoom = useCallback((factor: number, x: number, y: number) => {
    setWindow((old) => (old ?? shown.current) === null ? null : zoomed(old ?? (shown.current as PlanWindow), factor, x, y))
  }, [])

  const pointers = useRef(new Map<number, readonly [number, number]>())
  const travelled = useRef(0)

  const onDown = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    event.currentTarget.setPointerCapture(event.pointerId)
    pointers.current.set(event.pointerId, [x, y])
    travelled.current = 0
  }
  const onMove = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    const last = pointers.current.get(event.pointerId)
    if (last === undefined) return
    pointers.current.set(event.pointerId, [x, y])
    travelled.current += Math.hypot(x - last[0], y - last[1])
    if (travelled.current < 4 || shown.current === null) return
    const others = [...pointers.current].filter(([id]) => id !== event.pointerId)
    if (others.length === 1) {
      const [, [ox, oy]] = others[0]
      zoom(Math.hypot(x - ox, y - oy) / Math.max(1, Math.hypot(last[0] - ox, last[1] - oy)), ox, oy)
    } else setWindow((old) => panned(old ?? (shown.current as PlanWindow), x - last[0], y - last[1]))
  }
  const onUp = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    pointers.current.delete(event.pointerId)
    if (travelled.current >= 4 || plan === null || shown.current === null || event.type === 'pointercancel') return
    const bubble = axisBubbles(axes, shown.current, { width: size.width, height: size.height - 64 }).find((spot) => Math.hypot(spot.x - x, spot.y - y) <= (event.pointerType === 'touch' ? 20 : 11))
    if (bubble !== undefined) {
      desk.set({ selection: null, picked: runOfAxis(plan, bubble.axis), desk: 'profile' })
      return
    }
    const nodesShown = planDetail(medianPanelWidth(plan) * shown.current.scale).hatch
    const found = pick(plan, shown.current, x, y, event.pointerType === 'touch' ? 18 : 9, nodesShown)
    if (found?.kind === 'node' && event.shiftKey && selection?.kind === 'node') {
      desk.set({ picked: runBetween(plan, selection.index, found.index), desk: 'profile' })
      return
    }
    if (found !== null && (event.ctrlKey || event.metaKey || event.shiftKey)) desk.gather(found)
    else desk.set({ selection: found, picked: [], gathered: null })
  }
  const onKey = (event: KeyboardEvent): void => {
    if (event.key === '+' || event.key === '=') zoom(1.25, size.width / 2, size.height / 2)
    else if (event.key === '-') zoom(0.8, size.width / 2, size.height / 2)
    else if (event.key === '0') setWindow(null)
    else if (event.key.startsWith('Arrow') && plan !== null) {
      const from = selection?.kind === 'panel' ? selection.index : 0
      const [dx, dy] = ({ ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] } as Record<string, [number, number]>)[event.key] ?? [0, 0]
      const next = { kind: 'panel', index: selection?.kind === 'panel' ? neighbour(plan, from, dx, dy) : 0 } as const
      if (event.shiftKey && next.index !== from) desk.gather(next)
      else desk.select(next)
    } else return
    event.preventDefault()
  }
  const described = useDeferredValue(made)
  const panels = answer?.summary.plan.panels ?? 0
  const label = useMemo(() => described === null ? 'Plan, empty' : `Plan. ${panels} panels. ${described.reading.note} Arrow keys go from panel to panel.`, [described, panels])
  return (
    <section className="pane plan" data-pane="plan" aria-labelledby="plan-title">
      <header>
        <h2 id="plan-title">1 Plan</h2>
        <div className="switch" role="radiogroup" aria-label="Panels filled by">
          <span aria-hidden="true">filled by</span>
          {readingNames.map((name) => (
            <button key={name} role="radio" aria-checked={reading === name} className={reading === name ? 'chosen' : ''} onClick={() => desk.set({ reading: name })}>{readingTitles[name]}</button>
          ))}
        </div>
      </header>
      <div className="stage">
        <ListCanvas draw={draw} label={label} faded={!fresh} cursor={plan === null ? 'default' : 'crosshair'} onWheel={zoom} onDown={onDown} onMove={onMove} onUp={onUp} onKey={onKey} />
        {answer !== null && shown.current !== null && <PlanHand answer={answer} window={window_ ?? fitted(answer.plan, planArea(size.width, size.height, true))} picked={picked} size={size} />}
        {known.length > 0 && <button className="word axes-switch" aria-pressed={withAxes} title="Building axes: click one to take the run along it" onClick={() => looks.update((state) => ({ ...state, axes: !state.axes }))}>axes</button>}
        {movedFrom !== null && <button className="word axes-switch moves-switch" aria-pressed={withMoves} title="Where nodes went from the drawing as accepted" onClick={() => looks.update((state) => ({ ...state, moves: !state.moves }))}>moves</button>}
        {answer === null && <p className="will">The roof from above: panels by slope or flatness, joints by how they fold.</p>}
      </div>
      {answer !== null && size.width > 0 && size.width <= widestWithoutKey && <KeyStrip answer={answer} />}
    </section>
  )
}

/** A plan as narrow as this has no room for the key of lines beside its scale: it stands in a row below. */
const widestWithoutKey = 480

function KeyStrip({ answer }: { readonly answer: Answer }) {
  const theme = useDeskState((state) => state.theme)
  const svg = useMemo(() => {
    const key = lineKey(jointsOf(answer), answer.conditions.length > 0, true)
    return toSvg({ ...key, title: 'Lines', description: 'How joints are drawn, and how many there are of each.' }, themes[theme], { mmPerPx: null, background: false })
  }, [answer, theme])
  return <div className="line-key" dangerouslySetInnerHTML={{ __html: svg }} />
}
