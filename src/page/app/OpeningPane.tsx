/** A drawing that is read and not accepted: the plan as read, and the reader's report beside it. */
import { useCallback, useEffect, useRef, useState, type PointerEvent } from 'react'
import { counted, figure } from '../../paper/drawing/figures.ts'
import { readDetail, readDrawing, readWindow, wholeWindow } from '../../paper/drawing/read-drawing.ts'
import { panned, toPlan, toSheet, zoomed, type PlanWindow } from '../../paper/drawing/plan-window.ts'
import type { LeftOut } from '../../base/repair.ts'
import { sentence } from '../../base/result.ts'
import { units } from '../../base/length.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import { looks, useLooks } from './looks.ts'
import { panelAt } from '../store/picking.ts'
import { draggedWindow, switched, type Choosing } from '../store/opening.ts'
import type { Opening } from '../store/state.ts'
import type { DrawnLooks } from '../store/drawn-lines.ts'
import { offered, ProposalList, Questions, withoutOptions } from './Proposals.tsx'

/** Zooming to a repair magnifies the fitted plan so many times. */
const zoomTimes = 6

export function OpeningPlan() {
  const desk = useDesk()
  const opening = useDeskState((state) => state.opening)
  const read = opening?.read ?? null
  const [window_, setWindow] = useState<PlanWindow | null>(null)
  const shown = useRef<PlanWindow | null>(null)
  const [panel, setPanel] = useState(-1)
  const repair = opening?.chosenRepair ?? -1
  const place = useLooks((state) => state.place)
  const zooms = useLooks((state) => state.zooms)
  const [choosing, setChoosing] = useState<Choosing>('faces')
  const [dragged, setDragged] = useState<readonly [number, number, number, number] | null>(null)
  const drawn = useDrawn(opening?.file ?? null, repair >= 0 || choosing !== 'faces')
  const sheet = useRef({ width: 0, height: 0 })
  useEffect(() => { looks.update((state) => ({ ...state, place: 0 })) }, [repair])
  useEffect(() => setWindow(null), [read?.plan, choosing])
  useEffect(() => {
    const where = read?.repairs[repair]?.where ?? []
    if (zooms === 0 || read === null || where.length === 0) return
    const fit = readWindow(read, sheet.current.width, sheet.current.height)
    const [x, y] = where[place % where.length]
    setWindow({ ...fit, scale: fit.scale * zoomTimes, centreX: x, centreY: y })
  }, [zooms])
  const draw = useCallback((width: number, height: number) => {
    if (read === null) return null
    const whole = choosing !== 'faces'
    shown.current = window_ ?? (whole && drawn !== null ? wholeWindow(read, drawn, width, height) : readWindow(read, width, height))
    sheet.current = { width, height }
    return readDrawing(read, { width, height, window: shown.current, panel: whole ? -1 : panel, repair, place, drawn, whole, dragged })
  }, [read, window_, panel, repair, place, drawn, choosing, dragged])
  const last = useRef<readonly [number, number] | null>(null)
  const travelled = useRef(0)
  const from = useRef<readonly [number, number]>([0, 0])
  const onDown = (event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    event.currentTarget.setPointerCapture(event.pointerId)
    last.current = [x, y]
    from.current = [x, y]
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
    if (choosing === 'window') setDragged([...from.current, x, y])
    else if (travelled.current > 4) setWindow(panned(shown.current, x - lx, y - ly))
  }
  const onUp = (_event: PointerEvent<HTMLCanvasElement>, x: number, y: number): void => {
    const wasClick = last.current !== null && travelled.current <= 4
    last.current = null
    if (choosing === 'window' && shown.current !== null) {
      setDragged(null)
      const change = draggedWindow(toPlan(shown.current, ...from.current), toPlan(shown.current, x, y), 4 / shown.current.scale)
      if (change === null) return
      setChoosing('faces')
      desk.reopen(change)
      return
    }
    if (!wasClick || read === null || shown.current === null) return
    if (choosing === 'outline') {
      setChoosing('faces')
      desk.reopen({ inside: toPlan(shown.current, x, y), window: null })
      return
    }
    const detail = repair < 0 ? null : readDetail(read, shown.current, { repair, place, drawn, ...sheet.current })
    if (detail !== null && Math.hypot(detail.x - x, detail.y - y) < detail.radius) {
      zoomToRepair()
      return
    }
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
        <span className="note">{choosing === 'window' ? 'drag a window round the panels' : choosing === 'outline' ? 'click inside a closed line' : 'click a face: panel or void'}</span>
        <span className="choosing" role="group" aria-label="Which lines are read">
          <button className="word" aria-pressed={choosing === 'window'} onClick={() => setChoosing(choosing === 'window' ? 'faces' : 'window')}>Within a window</button>
          <button className="word" aria-pressed={choosing === 'outline'} onClick={() => setChoosing(choosing === 'outline' ? 'faces' : 'outline')}>Inside an outline</button>
        </span>
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
  const unlayered = (read?.leftOut ?? []).filter(({ layer }) => !layers.includes(layer))
  const proposals = offered(read?.repairs ?? [])
  const done = (read?.repairs ?? []).map((repair, index) => ({ repair, index })).filter(({ repair }) => repair.state === 'applied')
  return (
    <section className="pane report" data-pane="list" aria-labelledby="report-title">
      <header>
        <h2 id="report-title">Reader’s report</h2>
        <span className="note right clip">{file.name}, {figure(file.bytes.length / 1000, 1)} kB</span>
      </header>
      <div className="scroll">
        {problem !== null && <p className="problem" role="alert"><b>{sentence(problem)}</b></p>}
        <Questions questions={questions} />
        <ProposalList proposals={proposals} asked={questions.map(({ code }) => code)} />
        <dl className="entries">
          <dt>Unit</dt>
          <dd>
            <select aria-label="Unit of the drawing" value={options.unit ?? ''} onChange={(event) => desk.reopen({ unit: event.target.value === '' ? null : event.target.value as (typeof units)[number] })}>
              <option value="">as the file says{read === null ? '' : ` (${read.plan.unit})`}</option>
              {units.map((unit) => <option key={unit} value={unit}>{unit}</option>)}
            </select>
          </dd>
          {layers.some((layer) => layer !== '') && <><dt>Layers</dt><dd><Layers layers={layers} chosen={options.layers} leftOut={read?.leftOut ?? []} /></dd></>}
          <Chosen options={options} />
          <Appearance file={file} colours={options.colours} lineTypes={options.lineTypes} />
          <dt>Join ends</dt>
          <dd>within <SnapField value={options.snap_mm} onValue={(snap_mm) => desk.reopen({ snap_mm })} /> mm</dd>
          {unlayered.length > 0 && <><dt>Left out</dt><dd>{unlayered.map(({ kind, layer, count }) => <div key={`${kind} ${layer}`}>{figure(count)} {kind}{layer === '' ? '' : ` on ${layer}`}</div>)}</dd></>}
          {read?.notices.map((notice) => <div key={notice} className="wide">{withoutOptions(notice)}</div>)}
        </dl>
        <h3>Repairs <span className="note">{figure(done.length)}{done.length > 0 ? ', all shown on the plan' : ''}</span></h3>
        <ol className="repairs">
          {done.map(({ repair, index }) => (
            <li key={index} className={chosenRepair === index ? 'chosen' : ''}>
              <button aria-pressed={chosenRepair === index} onClick={() => desk.chooseRepair(index)}><b className="balloon">{index + 1}</b><span>{withoutOptions(repair.message)}{repair.count > 1 && !/\d/.test(repair.message) ? ` (${figure(repair.count)} places)` : ''}</span></button>
              {chosenRepair === index && <Places count={repair.where.length} />}
            </li>
          ))}
        </ol>
      </div>
      <footer>
        <button className="solid" data-first disabled={read === null || problem !== null || questions.length > 0} onClick={() => desk.accept()}>Accept the plan</button>
        <button className="word" onClick={() => desk.putAway()}>Put it away <kbd>Esc</kbd></button>
      </footer>
    </section>
  )
}

/** The lines of the file as drawn, read once they are wanted. */
function useDrawn(file: Opening['file'] | null, wanted: boolean): Float64Array | null {
  const [known, setKnown] = useState<{ readonly file: Opening['file']; readonly lines: Float64Array | null } | null>(null)
  useEffect(() => {
    if (file === null || !wanted || known?.file === file) return
    const stop = new AbortController()
    void import('../store/drawn-lines.ts').then(({ drawnLines }) => drawnLines(file.name, file.bytes, stop.signal)).then((lines) => { if (!stop.signal.aborted) setKnown({ file, lines }) })
    return () => stop.abort()
  }, [file, wanted, known])
  return known !== null && known.file === file ? known.lines : null
}

const zoomToRepair = (): void => looks.update((state) => ({ ...state, zooms: state.zooms + 1 }))

/** Goes through the places of the chosen repair, and to them. */
function Places({ count }: { readonly count: number }) {
  const place = useLooks((state) => state.place)
  if (count === 0) return null
  const step = (by: number): void => looks.update((state) => ({ ...state, place: (state.place + by + count) % count }))
  return (
    <p className="answers">
      {count > 1 && <><button className="word" onClick={() => step(-1)}>Before</button> <span className="note">place {(place % count) + 1} of {figure(count)}</span> <button className="word" onClick={() => step(1)}>Next</button> </>}
      <button className="word" onClick={zoomToRepair}>Zoom to it</button>
    </p>
  )
}

/** Layers to be switched, each with what was left out on it; a layer of which nothing was chosen is off. */
function Layers({ layers, chosen, leftOut }: { readonly layers: readonly string[]; readonly chosen: readonly string[] | null; readonly leftOut: readonly LeftOut[] }) {
  const desk = useDesk()
  const isOn = (layer: string): boolean => (chosen === null ? !leftOut.some((entry) => entry.layer === layer && / not (?:chosen|taken)|, /.test(entry.kind)) : chosen.includes(layer))
  const turn = (layer: string): void => {
    const next = layers.filter((other) => isOn(other) !== (other === layer))
    desk.reopen({ layers: next.length === layers.length ? null : next })
  }
  return layers.map((layer) => {
    const left = leftOut.filter((entry) => entry.layer === layer)
    return (
      <label key={layer} className="layer">
        <input type="checkbox" checked={isOn(layer)} onChange={() => turn(layer)} /> {layer === '' ? '(none)' : layer}
        {left.length > 0 && <small className="note">{left.map(({ kind, count }) => `${figure(count)} ${kind}`).join(', ')} left out</small>}
      </label>
    )
  })
}

/** What was chosen on the drawing, to be let go of. */
function Chosen({ options: { window = null, inside = null, between = null } }: { readonly options: Opening['options'] }) {
  const desk = useDesk()
  if (window === null && inside === null && between === null) return null
  return (
    <>
      <dt>Only</dt>
      <dd>
        {window !== null && <>within the window </>}{inside !== null && <>inside {typeof inside === 'string' ? `the outline on ${inside}` : 'the outline'} </>}{between !== null && <>between {figure(between[0])} and {figure(between[1])} </>}
        <button className="word" onClick={() => desk.reopen({ window: null, inside: null, between: null })}>Read all</button>
      </dd>
    </>
  )
}

/** Colours and line types to be switched, read from the file once they are asked for. */
function Appearance({ file, colours, lineTypes }: { readonly file: Opening['file']; readonly colours: readonly string[] | null; readonly lineTypes: readonly string[] | null }) {
  const desk = useDesk()
  const [isOpen, setOpen] = useState(false)
  const [known, setKnown] = useState<{ readonly file: Opening['file']; readonly looks: DrawnLooks | null } | null>(null)
  useEffect(() => {
    if (!isOpen || known?.file === file) return
    const stop = new AbortController()
    void import('../store/drawn-lines.ts').then(({ drawnLooks }) => drawnLooks(file.name, file.bytes, stop.signal)).then((found) => { if (!stop.signal.aborted) setKnown({ file, looks: found }) })
    return () => stop.abort()
  }, [isOpen, file, known])
  const found = known?.file === file ? known.looks : null
  const boxes = (all: ReadonlyMap<string, number>, chosen: readonly string[] | null, name: (one: string) => string, take: (next: readonly string[] | null) => void) => [...all].map(([one, count]) => (
    <label key={name(one)} className="layer">
      <input type="checkbox" checked={chosen === null || chosen.includes(one)} onChange={() => take(switched([...all.keys()], chosen, one))} /> {name(one)} <small className="note">{figure(count)}</small>
    </label>
  ))
  return (
    <>
      <dt>Drawn in</dt>
      <dd>
        <button className="word" aria-expanded={isOpen} onClick={() => setOpen(!isOpen)}>Colours and line types</button>
        {isOpen && found !== null && found.colours.size === 0 && <small className="note"> The file says nothing of them.</small>}
        {isOpen && found !== null && boxes(found.colours, colours, (one) => `colour ${one}`, (next) => desk.reopen({ colours: next }))}
        {isOpen && found !== null && boxes(found.lineTypes, lineTypes, (one) => one.toLowerCase(), (next) => desk.reopen({ lineTypes: next }))}
      </dd>
    </>
  )
}

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
