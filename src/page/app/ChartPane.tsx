/** Drawing 2: the slope chart. A point dragged asks its panel for that slope and fall. */
import { useCallback, useRef, useState, type PointerEvent } from 'react'
import { panelName } from '../../plan/names.ts'
import { heldPlane } from '../../plan/project/edits.ts'
import { fallBearing, gradientAt } from '../../paper/drawing/fall.ts'
import { compassPoint, figure, slopeFigure, type SlopeUnit } from '../../paper/drawing/figures.ts'
import { chartFit, panelAtChartPoint, ringCounts, slopeChart, type ChartWindow } from '../../paper/drawing/slope-chart.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import { readingFor, useLimits, useReading } from './useReading.ts'

const units: readonly (readonly [SlopeUnit, string])[] = [['degrees', 'degrees'], ['percent', 'percent'], ['ratio', '1:n']]

export function ChartPane() {
  const desk = useDesk()
  const answer = useDeskState((state) => state.answer)
  const before = useDeskState((state) => state.before)
  const selection = useDeskState((state) => state.selection)
  const unit = useDeskState((state) => state.slopeUnit)
  const fresh = useDeskState((state) => state.fresh || state.busy === null)
  const { leastSlope, flat_mm } = useLimits()
  const made = useReading(answer)
  const shown = useRef<ChartWindow | null>(null)
  const dragged = useRef(-1)
  const [zoom, setZoom] = useState(1)
  /** Where the level point was taken, with the roof as it was then. */
  const tilt = useRef<{ readonly x: number; readonly y: number; readonly answer: Answer } | null>(null)

  const draw = useCallback((width: number, height: number) => {
    if (answer === null || made === null) return null
    // While a point is dragged the rings stay where they are.
    if ((dragged.current < 0 && tilt.current === null) || shown.current === null) {
      const fit = chartFit(answer, width, height, unit)
      shown.current = { ...fit, scale: fit.scale * zoom }
    }
    return slopeChart(answer, {
      width, height, handle: answer.roof !== null, joints: made.joints, leastSlope, unit, window: shown.current, selection,
      before: before !== null && before.plan === answer.plan ? (before.roof?.gradient ?? null) : null, tones: readingFor(answer, 'slope', leastSlope, flat_mm),
    })
  }, [answer, made, leastSlope, flat_mm, unit, selection, before, zoom])

  const onDown = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    if (answer === null || shown.current === null) return
    if (answer.roof !== null && Math.hypot(x - shown.current.middleX, y - shown.current.middleY) <= (event.pointerType === 'touch' ? 18 : 8)) {
      event.currentTarget.setPointerCapture(event.pointerId)
      tilt.current = { x, y, answer }
      return
    }
    const panel = panelAtChartPoint(answer, shown.current, x, y, event.pointerType === 'touch' ? 22 : 12)
    if (panel < 0) return
    event.currentTarget.setPointerCapture(event.pointerId)
    dragged.current = panel
    desk.select({ kind: 'panel', index: panel })
  }
  const ask = (x: number, y: number): void => {
    if (shown.current === null || dragged.current < 0) return
    const [gx, gy] = gradientAt((x - shown.current.middleX) / shown.current.scale, (shown.current.middleY - y) / shown.current.scale)
    const gradient = Float64Array.of(gx, gy)
    const pitch_deg = (Math.atan(Math.hypot(gx, gy)) * 180) / Math.PI
    const bearing_deg = Number.isNaN(fallBearing(gradient, 0)) ? 0 : fallBearing(gradient, 0)
    const condition = heldPlane(dragged.current, pitch_deg, bearing_deg)
    desk.holdCondition(condition, `${panelName(dragged.current)} ${slopeFigure(pitch_deg)} ${compassPoint(bearing_deg)}`, 'dragged in the chart')
  }
  /** The whole figure moves with the hand: a plane is added to the heights, and the roof nearest to them is asked for. */
  const askTilt = (x: number, y: number): void => {
    const from = tilt.current
    const base = desk.standing
    if (from === null || base === null || shown.current === null || from.answer.roof === null) return
    const [gx, gy] = gradientAt((x - from.x) / shown.current.scale, (from.y - y) / shown.current.scale)
    const { plan, roof: { heights } } = from.answer
    const target = heights.map((z, i) => z + gx * (plan.x[i] - plan.frame.centreX) + gy * (plan.y[i] - plan.frame.centreY))
    const degrees = (Math.atan(Math.hypot(gx, gy)) * 180) / Math.PI
    const bearing = fallBearing(Float64Array.of(gx, gy), 0)
    desk.hold({ doc: { ...base, target, brief: { ...base.brief, rise: null } }, what: `Tilted ${slopeFigure(degrees)} ${compassPoint(Number.isNaN(bearing) ? 0 : bearing)}`, before: 'the whole roof' })
  }
  const moved = useRef(false)
  const onMove = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    if ((dragged.current < 0 && tilt.current === null) || event.buttons === 0) return
    moved.current = true
    if (tilt.current === null) ask(x, y)
    else askTilt(x, y)
  }
  const onUp = (event: PointerEvent<HTMLCanvasElement>): void => {
    const wasDragged = dragged.current >= 0 || tilt.current !== null
    dragged.current = -1
    tilt.current = null
    if (wasDragged && moved.current) desk.putDown(event.type !== 'pointercancel')
    moved.current = false
  }
  const many = answer !== null && answer.plan.panelCount > 2000
  return (
    <section className="pane chart" data-pane="chart" aria-labelledby="chart-title">
      <header>
        <h2 id="chart-title">2 Slope chart</h2>
        <div className="switch" role="radiogroup" aria-label="Slopes in">
          {units.map(([name, title]) => (
            <button key={name} role="radio" aria-checked={unit === name} className={unit === name ? 'chosen' : ''} onClick={() => desk.set({ slopeUnit: name })}>{title}</button>
          ))}
        </div>
      </header>
      <div className="stage">
        <ListCanvas draw={draw} label={answer === null ? 'Slope chart, empty' : `Slope chart: ${figure(answer.plan.panelCount)} points, a point a panel, where it falls to.`}
          faded={!fresh} onWheel={(factor) => setZoom((old) => Math.min(40, Math.max(0.5, old * factor)))} onDown={onDown} onMove={onMove} onUp={onUp}
          onKey={(event) => { if (event.key === '0') setZoom(1) }} />
        {answer === null ? <p className="will">A point a panel, where it falls to; circles for slopes.</p>
          : <p className="foot">{answer.roof?.isNear === true ? 'From each panel\u2019s best plane. Broken lines: no exact figure closes.' : many ? `Panels ${ringCounts(answer)}.` : 'Drag a point: its panel is held at that slope. Drag the diamond: tilt.'}</p>}
      </div>
    </section>
  )
}
