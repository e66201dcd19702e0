/** Another project beside the one in hand: both roofs from the same side, and their figures in two columns. */
import { useCallback } from 'react'
import { conversion, metres } from '../../base/length.ts'
import { figure, flatness } from '../../paper/drawing/figures.ts'
import { stockView } from '../../paper/drawing/projection.ts'
import { roofDrawing } from '../../paper/drawing/roof-drawing.ts'
import { defaultFlat_mm } from '../../plan/project/wishes.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import { rowsOf } from '../store/rows.ts'
import type { Beside } from '../store/state.ts'
import { jointsOf, readingFor } from './useReading.ts'

export function BesidePane({ beside }: { readonly beside: Beside }) {
  const desk = useDesk()
  const now = useDeskState((state) => state.answer)
  const doc = useDeskState((state) => state.doc)
  const readingName = useDeskState((state) => state.reading)
  const side = useDeskState((state) => state.side)
  const { answer: other, doc: otherDoc } = beside
  const draw = useCallback((width: number, height: number) => {
    if (other.roof === null) return null
    const reading = readingFor(other, readingName, otherDoc.leastSlope, otherDoc.brief.flat_mm ?? defaultFlat_mm)
    return roofDrawing(other, { width, height, reading, joints: jointsOf(other), view: stockView(side, -1.35 / metres[other.plan.unit]), exaggeration: 1, scale: null, selection: null })
  }, [other, otherDoc, readingName, side])
  const here = now === null || doc === null ? null : figuresOf(now, doc.leastSlope)
  const there = figuresOf(other, otherDoc.leastSlope)
  return (
    <section className="pane chart beside" data-pane="chart" aria-labelledby="beside-title">
      <header><h2 id="beside-title">Beside</h2><span className="note clip">{otherDoc.name}</span><button className="word" data-first onClick={() => void desk.compareWith(null)}>Put it away</button></header>
      <div className="stage">
        <ListCanvas draw={draw} label={`The roof of ${otherDoc.name}`} />
        {other.roof === null && <p className="will">Not raised: no roof meets the conditions.</p>}
      </div>
      <table>
        <thead><tr><th scope="col">{''}</th><th scope="col">in hand</th><th scope="col">beside</th></tr></thead>
        <tbody>{there.map(([title, value], k) => <tr key={title}><td>{title}</td><td>{here?.[k][1] ?? '\u2013'}</td><td>{value}</td></tr>)}</tbody>
      </table>
    </section>
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
