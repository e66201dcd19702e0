/** A drawing that is read and not accepted: the plan as read, and the reader's report beside it. */
import { useCallback, useRef, useState, type PointerEvent } from 'react'
import { counted, figure } from '../../paper/drawing/figures.ts'
import { readDrawing, readWindow } from '../../paper/drawing/read-drawing.ts'
import { panned, toPlan, toSheet, zoomed, type PlanWindow } from '../../paper/drawing/plan-window.ts'
import { sentence } from '../../base/result.ts'
import { units } from '../../base/length.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import { panelAt } from './picking.ts'

export function OpeningPlan() {
  const desk = useDesk()
  const opening = useDeskState((state) => state.opening)
  const read = opening?.read ?? null
  const [window_, setWindow] = useState<PlanWindow | null>(null)
  const shown = useRef<PlanWindow | null>(null)
  const [panel, setPanel] = useState(-1)
  const repair = opening?.chosenRepair ?? -1
  const draw = useCallback((width: number, height: number) => {
    if (read === null) return null
    shown.current = window_ ?? readWindow(read, width, height)
    return readDrawing(read, { width, height, window: shown.current, panel, repair })
  }, [read, window_, panel, repair])
  const last = useRef<readonly [number, number] | null>(null)
  const travelled = useRef(0)
  const onDown = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    event.currentTarget.setPointerCapture(event.pointerId)
    last.current = [x, y]
    travelled.current = 0
  }
  const onMove = (_event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    if (read === null || shown.current === null) return
    if (last.current === null) {
      const [px, py] = toPlan(shown.current, x, y)
      setPanel(panelAt(read.plan, px, py))
      return
    }
    const [lx, ly] = last.current
    last.current = [x, y]
    travelled.current += Math.hypot(x - lx, y - ly)
    if (travelled.current > 4) setWindow(panned(shown.current, x - lx, y - ly))
  }
  const onUp = (_event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    const wasClick = last.current !== null && travelled.current <= 4
    last.current = null
    if (!wasClick || read === null || shown.current === null) return
    const near = read.repairs.findIndex(({ where }) => where.slice(0, 3).some(([rx, ry]) => {
      const [px, py] = toSheet(shown.current as PlanWindow, rx, ry)
      return Math.hypot(px - x, py - y) < 8
    }))
    if (near >= 0) desk.chooseRepair(near)
    else desk.toggleVoid(...toPlan(shown.current, x, y))
  }
  const plan = read?.plan ?? null
  return (
    <section className="pane opening" data-pane="plan" aria-labelledby="opening-title">
      <header>
        <h2 id="opening-title">Plan as read</h2>
        <span className="note">click a face: panel or void</span>
        <span className="note right">{plan === null ? '' : `${counted(plan.panelCount, 'panel')}, ${counted(plan.rimIsVoid.reduce((s, v) => s + v, 0), 'void')}, ${figure(plan.jointCount)} joints, ${figure(plan.edgeCount - plan.jointCount)} rim edges`}</span>
      </header>
      <div className="stage">
        <ListCanvas draw={draw} label="Plan as read; click a face to make it a panel or a void" onWheel={(factor, x, y) => shown.current !== null && setWindow(zoomed(shown.current, factor, x, y))}
          onDown={onDown} onMove={onMove} onUp={onUp} onKey={(event) => { if (event.key === '0') setWindow(null) }} />
        {read === null && (opening?.problem ?? null) === null && <p className="will">Reading {opening?.file.name}.</p>}
      </div>
    </section>
  )
}

export function ReaderReport() {
  const desk = useDesk()
  const opening = useDeskState((state) => state.opening)
  if (opening === null) return null
  const { read, problem, options, layers, chosenRepair, file } = opening
  const questions = read?.questions ?? []
  const proposals = read?.repairs.filter(({ state }) => state !== 'applied') ?? []
  return (
    <section className="pane report" data-pane="list" aria-labelledby="report-title">
      <header>
        <h2 id="report-title">Reader’s report</h2>
        <span className="note right clip">{file.name}, {figure(file.bytes.length / 1000, 1)} kB</span>
      </header>
      <div className="scroll">
        {problem !== null && <p className="problem" role="alert"><b>{sentence(problem)}</b></p>}
        {questions.map((question) => (
          <div key={question.code} className="entry question">
            <p><b>{withoutOptions(question.message)}.</b></p>
            <p>{question.options.map((option) => <button key={option} className="word" onClick={() => desk.answerQuestion(option)}>{option.replace(/^--/, '').replace('=', ' ')}</button>)}</p>
          </div>
        ))}
        <dl className="entries">
          <dt>Unit</dt>
          <dd>
            <select aria-label="Unit of the drawing" value={options.unit ?? ''} onChange={(event) => desk.reopen({ unit: event.target.value === '' ? null : event.target.value as (typeof units)[number] })}>
              <option value="">as the file says{read === null ? '' : ` (${read.plan.unit})`}</option>
              {units.map((unit) => <option key={unit} value={unit}>{unit}</option>)}
            </select>
          </dd>
          {layers.some((layer) => layer !== '') && <><dt>Layers</dt><dd>{layers.map((layer) => {
            const on = options.layers === null || options.layers.includes(layer)
            return <label key={layer} className="layer"><input type="checkbox" checked={on} onChange={() => desk.switchLayer(layer)} /> {layer === '' ? '(none)' : layer}</label>
          })}</dd></>}
          <dt>Join ends</dt>
          <dd>within <SnapField value={options.snap_mm} onValue={(snap_mm) => desk.reopen({ snap_mm })} /> mm</dd>
          {(read?.leftOut.length ?? 0) > 0 && <><dt>Left out</dt><dd>{read?.leftOut.map(({ kind, layer, count }) => <div key={`${kind} ${layer}`}>{figure(count)} {kind}{layer === '' ? '' : ` on ${layer}`}</div>)}</dd></>}
          {read?.notices.map((notice) => <div key={notice} className="wide">{withoutOptions(notice)}</div>)}
        </dl>
        <h3>Repairs <span className="note">{figure(read?.repairs.length ?? 0)}{(read?.repairs.length ?? 0) > 0 ? ', all shown on the plan' : ''}</span></h3>
        <ol className="repairs">
          {read?.repairs.map((repair, i) => (
            <li key={i} className={chosenRepair === i ? 'chosen' : ''}>
              <button aria-pressed={chosenRepair === i} onClick={() => desk.chooseRepair(i)}><b className="balloon">{i + 1}</b><span>{withoutOptions(repair.message)}{repair.count > 1 && !/\d/.test(repair.message) ? ` (${figure(repair.count)} places)` : ''}{repair.state === 'proposed' ? ' – proposed' : ''}</span></button>
            </li>
          ))}
        </ol>
        {proposals.length > 0 && <p className="entry">{proposals.map(({ code, state }) => <button key={code} className="word" onClick={() => desk.reopen({ accept: state === 'accepted' ? options.accept.filter((c) => c !== code) : [...options.accept, code] })}>{state === 'accepted' ? `Take back: ${code}` : `Take: ${code}`}</button>)}</p>}
      </div>
      <footer>
        <button className="solid" data-first disabled={read === null || problem !== null || questions.length > 0} onClick={() => desk.accept()}>Accept the plan</button>
        <button className="word" onClick={() => desk.putAway()}>Put it away <kbd>Esc</kbd></button>
      </footer>
    </section>
  )
}

/** Readers name the command line's options in brackets; here the controls stand beside the sentence. */
const withoutOptions = (text: string): string => text.replace(/ \([^()]*--[^()]*\)/g, '')

function SnapField({ value, onValue }: { readonly value: number | null; readonly onValue: (value: number | null) => void }) {
  const [text, setText] = useState(value === null ? '' : String(value))
  return <input className="short" aria-label="Join ends within, in mm" placeholder="usual" value={text} onChange={(event) => setText(event.target.value)}
    onKeyDown={(event) => {
      if (event.key !== 'Enter') return
      event.stopPropagation()
      const number = Number(text.replace(',', '.'))
      onValue(text.trim() === '' || !(number > 0) ? null : number)
    }} />
}
