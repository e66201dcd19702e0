/**
 * What is printed: one sheet with the plan at a true scale, roof and slope chart beside it, and the answer in its title
 * block; then the panel list, headed anew in every table. Made when the browser is about to print, gone when it has.
 */
import { useEffect, useState } from 'react'
import { flushSync } from 'react-dom'
import { metres } from '../../base/length.ts'
import { compassPoint, figure } from '../../paper/drawing/figures.ts'
import { planDrawing } from '../../paper/drawing/plan-drawing.ts'
import { listSheets, mmPerPx, planSheet, type Paper, type PlanSheet } from '../../paper/drawing/print-sheet.ts'
import { stockView, viewWords } from '../../paper/drawing/projection.ts'
import { roofDrawing } from '../../paper/drawing/roof-drawing.ts'
import { slopeChart } from '../../paper/drawing/slope-chart.ts'
import { readingTitles } from '../../paper/drawing/reading.ts'
import { toSvg } from '../../paper/drawing/svg.ts'
import { themes } from '../../paper/drawing/theme.ts'
import { panelName } from '../../plan/names.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { caution } from '../../roof/answer/caution.ts'
import { useDesk } from './context.ts'
import type { Desk } from '../store/desk.ts'
import { axesFor, looks } from './looks.ts'
import './print.css'
import { hundredths, rowsOf } from '../store/rows.ts'
import type { Doc } from '../store/state.ts'
import { jointsOf, limitsOf, readingFor } from './useReading.ts'
import { firstSentence, secondSentence, type Piece } from '../store/verdict.ts'

export function PrintSheets() {
  const desk = useDesk()
  const [printing, setPrinting] = useState(false)
  useEffect(() => {
    const before = (): void => flushSync(() => setPrinting(true))
    const after = (): void => setPrinting(false)
    window.addEventListener('beforeprint', before)
    window.addEventListener('afterprint', after)
    return () => {
      window.removeEventListener('beforeprint', before)
      window.removeEventListener('afterprint', after)
    }
  }, [])
  const { answer, doc, opening } = desk.state
  if (!printing || answer === null || doc === null || opening !== null) return null
  return <Sheets desk={desk} answer={answer} doc={doc} />
}

function Sheets({ desk, answer, doc }: { readonly desk: Desk; readonly answer: Answer; readonly doc: Doc }) {
  const { reading: name, side, exaggeration, slopeUnit } = desk.state
  const limits = limitsOf(doc)
  const { leastSlope, flat_mm } = limits
  const sheet = planSheet(answer.plan)
  const { paper } = sheet
  const joints = jointsOf(answer)
  const reading = readingFor(answer, name, leastSlope, flat_mm)
  const axes = looks.state().axes ? axesFor(doc.read) : []
  const plan = planDrawing(answer, { width: sheet.width, height: sheet.height, reading, joints, window: sheet.window, selection: null, furniture: true, axes })
  const beside = { width: paper.beside.width / mmPerPx, height: paper.beside.height / mmPerPx }
  const roof = answer.roof === null ? null : roofDrawing(answer, { ...beside, reading, joints, view: stockView(side, -1.35 / metres[answer.plan.unit]), exaggeration, scale: null, selection: null })
  const chart = answer.roof === null ? null : slopeChart(answer, { ...beside, joints, leastSlope, unit: slopeUnit, window: null, selection: null, before: null, tones: null })
  const second = secondSentence(answer, readingFor(answer, 'slope', leastSlope, flat_mm), leastSlope, flat_mm)
  const lists = listSheets(answer.plan.panelCount, paper)
  const count = 1 + lists.length
  return (
    <div className={`printed ${paper.name}`}>
      <section className="leaf">
        <div className="drawings">
          <figure style={{ width: `${paper.plan.width}mm` }}><Drawing list={plan} /></figure>
          <div>
            {roof !== null && <figure><Drawing list={roof} /><figcaption>{answer.summary.near === true ? 'Nearest roof, not exact, seen ' : 'Roof, seen '}{viewWords(side)}; no scale{exaggeration === 1 ? '' : `; heights drawn \u00d7${exaggeration}`}</figcaption></figure>}
            {chart !== null && <figure><Drawing list={chart} /><figcaption>Slope chart: a point a panel, where it falls to</figcaption></figure>}
          </div>
        </div>
        <Block doc={doc} rise={answer.summary.roof?.rise ?? null} sheet={sheet} number={1} count={count} first={words(firstSentence(answer))} second={words(second)} held={answer.conditions.map((condition) => `${condition.name}${condition.soft ? ' (soft)' : ''}`)} by={readingTitles[name]} />
      </section>
      {lists.map((tables, i) => (
        <section key={i} className="leaf">
          <List answer={answer} tables={tables} paper={paper} limits={limits} />
          <Block doc={doc} rise={answer.summary.roof?.rise ?? null} sheet={sheet} number={i + 2} count={count} first={words(firstSentence(answer))} second="" held={[]} by={null} />
        </section>
      ))}
    </div>
  )
}

const onWhite = { ...themes.day, paper: '#FFFFFF' }

/** The list's own writer escapes every word of it. */
function Drawing({ list }: { readonly list: Parameters<typeof toSvg>[0] }) {
  return <div dangerouslySetInnerHTML={{ __html: toSvg(list, onWhite, { mmPerPx, background: false }) }} />
}

const words = (pieces: readonly Piece[]): string => pieces.map((piece) => (typeof piece === 'string' ? piece : piece.text)).join('')

function Block({ doc, rise, sheet, number, count, first, second, held, by }: {
  readonly doc: Doc; readonly rise: number | null; readonly sheet: PlanSheet; readonly number: number; readonly count: number
  readonly first: string; readonly second: string; readonly held: readonly string[]; readonly by: string | null
}) {
  return (
    <footer className="leaf-block">
      <div><b>{first}</b>{second !== '' && <p>{second}</p>}{held.length > 0 && <p>Held: {held.slice(0, 12).join('; ')}{held.length > 12 ? `; ${held.length - 12} more` : ''}.</p>}</div>
      <dl><dt>Drawing</dt><dd>{doc.name}</dd><dt>{rise === null ? 'Unit' : 'Unit, rise'}</dt><dd>{doc.read.plan.unit}{rise === null ? '' : `, ${figure(rise * metres[doc.read.plan.unit] * 1000)} mm`}</dd></dl>
      <dl><dt>{by === null ? 'List' : 'Plan'}</dt><dd className="true-scale">{by === null ? 'panels' : `1:${figure(sheet.scale)} on ${sheet.paper.name}`}</dd><dt>{by === null ? 'Panels' : 'Filled by'}</dt><dd>{by ?? figure(doc.read.plan.panelCount)}</dd></dl>
      <dl><dt>Sheet</dt><dd>{number} of {count}</dd><dt>Printed</dt><dd>{new Date().toISOString().slice(0, 10)}</dd></dl>
      <p className="leaf-caution">{caution}</p>
    </footer>
  )
}

function List({ answer, tables, paper, limits }: { readonly answer: Answer; readonly tables: readonly (readonly [number, number])[]; readonly paper: Paper; readonly limits: ReturnType<typeof limitsOf> }) {
  const rows = rowsOf(answer, limits.leastSlope, limits.flat_mm)
  const { roof } = answer
  const dash = '\u2013'
  return (
    <div className="leaf-tables" style={{ gridTemplateColumns: `repeat(${paper.tables}, 1fr)` }}>
      {tables.map(([from, to]) => (
        <table key={from}>
          <thead><tr><th>Panel</th><th>area m²</th><th>slope °</th><th>falls to</th><th>corner mm</th><th>flat mm</th><th>note</th></tr></thead>
          <tbody>{Array.from({ length: to - from }, (_, k) => from + k).map((p) => (
            <tr key={p}>
              <td>{panelName(p)}</td><td>{figure(rows.area[p], 2)}</td><td>{roof === null ? dash : figure(rows.slope[p], 1)}</td>
              <td>{roof === null || Number.isNaN(rows.fall[p]) ? dash : compassPoint(rows.fall[p])}</td>
              <td>{roof === null ? dash : hundredths(rows.corner[p])}</td><td>{roof === null ? dash : hundredths(rows.flat[p])}</td>
              <td>{[(rows.flag[p] & 1) === 1 ? 'low slope' : '', (rows.flag[p] & 2) === 2 ? 'over' : ''].filter((word) => word !== '').join(', ')}</td>
            </tr>
          ))}</tbody>
        </table>
      ))}
    </div>
  )
}
