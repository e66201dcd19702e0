/** Another project beside the one in hand: roofs from the same side, plans or slope charts of both, and their figures in two columns. */
import { useCallback, useMemo, useState } from 'react'
import { conversion, metres } from '../../base/length.ts'
import { figure, flatness } from '../../paper/drawing/figures.ts'
import { planDrawing } from '../../paper/drawing/plan-drawing.ts'
import { stockView } from '../../paper/drawing/projection.ts'
import { roofDrawing } from '../../paper/drawing/roof-drawing.ts'
import { slopeChart } from '../../paper/drawing/slope-chart.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import { rowsOf } from '../store/rows.ts'
import type { Beside } from '../store/state.ts'
import { jointsOf, limitsOf, readingFor } from './useReading.ts'

export function BesidePane({ beside }: { readonly beside: Beside }) {
  const desk = useDesk()
  const now = useDeskState((state) => state.answer)
  const doc = useDeskState((state) => state.doc)
  const { answer: other, doc: otherDoc } = beside
  const [what, setWhat] = useState<What>('roof')
  const inHand = useMemo(() => (now === null || doc === null ? null : { answer: now, doc }), [now, doc])
  const here = now === null || doc === null ? null : figuresOf(now, doc.leastSlope)
  const there = figuresOf(other, otherDoc.leastSlope)
  return (
    <section className="pane chart beside" data-pane="chart" aria-labelledby="beside-title">
      <header><h2 id="beside-title">Beside</h2><span className="note clip">{otherDoc.name}</span><button className="word" data-first onClick={() => void desk.compareWith(null)}>Put it away</button></header>
      <p className="entry switch" role="radiogroup" aria-label="Shown beside">
        {shownBeside.map((name) => <button key={name} role="radio" aria-checked={what === name} className={what === name ? 'chosen' : ''} onClick={() => setWhat(name)}>{name}</button>)}
      </p>
      <div className="pair">
        {inHand !== null && <One title="in hand" of={inHand} what={what} />}
        <One title="beside" of={beside} what={what} />
      </div>
      <table>
        <thead><tr><th scope="col">{''}</th><th scope="col">in hand</th><th scope="col">beside</th></tr></thead>
        <tbody>{there.map(([title, value], k) => <tr key={title}><td>{title}</td><td>{here?.[k][1] ?? '\u2013'}</td><td>{value}</td></tr>)}</tbody>
      </table>
    </section>
  )
}

const shownBeside = ['roof', 'plan', 'slopes'] as const
type What = (typeof shownBeside)[number]

/** One of the two, drawn as the big drawings are, by the reading in force. */
function One({ title, of, what }: { readonly title: string; readonly of: Beside; readonly what: What }) {
  const readingName = useDeskState((state) => state.reading)
  const side = useDeskState((state) => state.side)
  const unit = useDeskState((state) => state.slopeUnit)
  const { answer, doc } = of
  const draw = useCallback((width: number, height: number) => {
    const { leastSlope, flat_mm } = limitsOf(doc)
    const sheet = { width, height, reading: readingFor(answer, readingName, leastSlope, flat_mm), joints: jointsOf(answer), selection: null }
    if (what === 'plan') return planDrawing(answer, { ...sheet, window: null, furniture: false })
    if (answer.roof === null) return null
    if (what === 'slopes') return slopeChart(answer, { ...sheet, leastSlope, unit, window: null, before: null, tones: readingFor(answer, 'slope', leastSlope, flat_mm) })
    return roofDrawing(answer, { ...sheet, view: stockView(side, -1.35 / metres[answer.plan.unit]), exaggeration: 1, scale: null })
  }, [answer, doc, readingName, side, unit, what])
  return (
    <div>
      <p className="note">{title}</p>
      <ListCanvas draw={draw} label={`${what} of ${doc.name}, ${title}`} />
      {answer.roof === null && what !== 'plan' && <p className="will">Not raised: no roof meets the conditions.</p>}
    </div>
  )
}

function figuresOf(answer: Answer, leastSlope: number | null): [string, string][] {
  const { plan, stress, roof, verdict } = answer.summary
  const mm = (value: number | undefined): string => (value === undefined ? '\u2013' : `${figure(value * conversion(plan.unit, 'mm'))} mm`)
  const rows = answer.roof === null ? null : rowsOf(answer, leastSlope, Infinity)
  return [
    ['verdict', verdict],
    ['panels, joints', `${figure(plan.panels)}, ${figure(plan.joints)}`],
    ['frozen joints', figure(answer.summary.held.frozenJoints)],
    ['freedom, left', `${figure(stress.freedom)}, ${stress.freedomLeft === null ? 'none' : figure(stress.freedomLeft)}`],
    ['rise', mm(roof?.rise)],
    ['rim varies by', mm(roof?.rimVariation)],
    ['least slope', rows === null ? '\u2013' : `${figure(rows.slope.reduce((least, slope) => Math.min(least, slope), Infinity), 1)}°`],
    ['flat to', roof === null ? '\u2013' : flatness(roof.flatnessMax_mm)],
    ['glass', rows === null ? '\u2013' : `${figure(rows.totalArea, 1)} m\u00b2`],
  ]
}
