/** The title block: the answer in a sentence, its conditions and the freedom left, and the caution beside it. */
import { useMemo } from 'react'
import { conversion } from '../../base/length.ts'
import { sentence } from '../../base/result.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { caution } from '../../roof/answer/caution.ts'
import { useDesk, useDeskState } from './context.ts'
import { LengthField, NumberField, typable } from './Fields.tsx'
import { withDatum, withRise } from '../../plan/project/edits.ts'
import { firstSentence, rimWords, secondSentence, signOf, type Piece, type Sign, type Target } from '../store/verdict.ts'
import { readingFor, useLimits } from './useReading.ts'

export function TitleBlock() {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  const answer = useDeskState((state) => state.answer)
  const opening = useDeskState((state) => state.opening)
  const busy = useDeskState((state) => state.busy)
  const at = useDeskState((state) => state.at)
  const inHand = useDeskState((state) => state.inHand !== null)
  const saved = useDeskState((state) => state.saved)
  const ms = useDeskState((state) => state.answerMs)
  const unit = opening?.read?.plan.unit ?? doc?.read.plan.unit ?? 'm'
  const { flat_mm, leastSlope } = useLimits()
  const rise = answer?.summary.roof?.rise
  const mm = conversion(unit, 'mm')
  const left = answer === null ? null : answer.conditions.some(({ soft }) => !soft) ? answer.summary.stress.freedomLeft : answer.summary.stress.freedom
  return (
    <footer className="block">
      {busy !== null && <div className="bar" role="progressbar" aria-label={busy.stage} aria-valuenow={Math.round(100 * busy.done)}><span style={{ width: `${100 * busy.done}%` }} /></div>}
      <Verdict />
      <dl className="facts">
        <div>
          <dt>Drawing</dt><dd className="clip" title={opening?.file.name ?? doc?.name}>{opening?.file.name ?? doc?.name ?? '\u2013'}{doc === null && opening === null ? '' : `, ${unit}`}</dd>
        </div>
        <div>
          <dt>Rim, mm</dt><dd className="clip">{answer === null || opening !== null ? 'not yet raised' : rimWords(answer)}</dd>
        </div>
        <div>
          <dt>Rise over springing</dt>
          <dd>{doc !== null && rise !== undefined && opening === null
            ? <LengthField label="" named="Rise over springing" bare="mm" to={unit} start={typable(rise * mm)} onValue={(value) => value > 0 && desk.brief({ rise: value }, `Rise ${figure(value * mm)} mm`, `was ${figure(rise * mm)} mm`)}
              onClear={() => doc.brief.rise !== null && desk.take({ doc: withRise(doc, null), what: 'Rise as it comes', before: `was ${figure(rise * mm)} mm` })} />
            : 'not yet raised'}</dd>
        </div>
        <div>
          <dt>Springing</dt>
          <dd>{doc === null || opening !== null ? 'lowest of the rim' : <LengthField label="" named="Springing, empty for the lowest node of the rim" bare="mm" to={unit} empty="lowest" start={doc.brief.datum === null ? '' : typable(doc.brief.datum * mm)}
            onValue={(datum) => desk.take({ doc: withDatum(doc, datum), what: `Springing at ${figure(datum * mm)} mm`, before: doc.brief.datum === null ? 'was the lowest of the rim' : `was ${figure(doc.brief.datum * mm)} mm` })}
            onClear={() => doc.brief.datum !== null && desk.take({ doc: withDatum(doc, null), what: 'Springing at the lowest of the rim', before: `was ${figure(doc.brief.datum * mm)} mm` })} />}</dd>
        </div>
        <div>
          <dt>Flat within, mm</dt>
          <dd>{doc === null || opening !== null ? figure(flat_mm, 1) : <NumberField label="" named="Flat within, mm" start={figure(flat_mm, 1)} onValue={(value) => value > 0 && desk.brief({ flat_mm: value }, `Flat within ${figure(value, 2)} mm`, `was ${figure(flat_mm, 2)} mm`)} />}</dd>
        </div>
        <div>
          <dt>Least slope, °</dt>
          <dd>{doc === null || opening !== null ? (leastSlope === null ? 'none' : figure(leastSlope, 1)) : <NumberField label="" named="Least slope, degrees" start={leastSlope === null ? '0' : figure(leastSlope, 1)} onValue={(value) => value >= 0 && value < 90 && desk.take({ doc: { ...doc, leastSlope: value === 0 ? null : value }, what: value === 0 ? 'No least slope' : `Least slope ${figure(value, 1)}°`, before: leastSlope === null ? 'was none' : `was ${figure(leastSlope, 1)}°` })} />}</dd>
        </div>
        <div>
          <dt>Freedom left</dt><dd>{answer === null || opening !== null ? '\u2013' : left === null ? 'none, they clash' : figure(left)}</dd>
        </div>
        <div>
          <dt>Step</dt><dd className="clip">{at < 0 ? 'none' : `${at + 1}${inHand ? ', in hand' : saved === '' ? '' : `, ${saved}`}`}{answer !== null && <span className="note"> {figure(ms)} ms</span>}</dd>
        </div>
      </dl>
      <p className="caution" title={caution}><b>Geometry only.</b> Overhead glass and what carries it are for a qualified engineer, to the local code.</p>
    </footer>
  )
}

function Verdict() {
  const desk = useDesk()
  const answer = useDeskState((state) => state.answer)
  const problem = useDeskState((state) => state.problem)
  const opening = useDeskState((state) => state.opening)
  const busy = useDeskState((state) => state.busy)
  const hasDoc = useDeskState((state) => state.doc !== null)
  const { leastSlope, flat_mm } = useLimits()
  const said = useMemo((): { sign: Sign; first: Piece[]; second: Piece[] } => {
    if (problem !== null) return { sign: 'not', first: [sentence(problem)], second: ['Nothing was replaced. ', { text: 'Put it away', to: { kind: 'problem' } }] }
    if (opening !== null) {
      if (opening.problem !== null) return { sign: 'not', first: [sentence(opening.problem)], second: ['The open project is untouched.'] }
      if (opening.read === null) return { sign: 'open', first: ['Reading the drawing.'], second: [] }
      const { plan, questions } = opening.read
      const repairs = opening.read.repairs.filter(({ state }) => state !== 'proposed')
      const voids = plan.rimIsVoid.reduce((sum, v) => sum + v, 0)
      return {
        sign: 'open', first: [`Read, not yet accepted: ${figure(plan.panelCount)} panels and ${figure(voids)} ${voids === 1 ? 'void' : 'voids'}, after ${figure(repairs.length)} ${repairs.length === 1 ? 'repair' : 'repairs'}.`],
        second: questions.length > 0 ? questions.map((question) => `${question.message}. `) : ['The plan is drawn as it was read; click a face to make it a void or a panel.'],
      }
    }
    if (answer === null && hasDoc) return { sign: 'open', first: ['Working out the answer.'], second: ['Your drawing stays on this computer.'] }
    if (answer === null) return { sign: 'open', first: ['Drop a drawing anywhere, or open one.'], second: ['Your drawing stays on this computer.'] }
    return { sign: signOf(answer), first: firstSentence(answer), second: secondSentence(answer, readingFor(answer, 'slope', leastSlope, flat_mm), leastSlope, flat_mm) }
  }, [answer, hasDoc, problem, opening, leastSlope, flat_mm])
  const go = (to: Target): void => {
    if (to.kind === 'panel') desk.select({ kind: 'panel', index: to.index })
    else if (to.kind === 'flagged') desk.set({ filter: 'flagged', reading: 'slope', pane: 'list' })
    else if (to.kind === 'problem') desk.set({ problem: null })
    else if (to.kind === 'reading') desk.set({ reading: to.name })
    else desk.showDesk('ways')
  }
  const draw = (list: readonly Piece[]) => list.map((piece, i) => typeof piece === 'string' ? <span key={i}>{piece}</span> : <button key={i} className="word" onClick={() => go(piece.to)}>{piece.text}</button>)
  const long = said.first.reduce((sum, piece) => sum + (typeof piece === 'string' ? piece.length : piece.text.length), 0) > 130
  return (
    <div className="verdict" role="status" aria-live="polite">
      <VerdictSign sign={said.sign} />
      <div>
        <p className={long ? 'first long' : 'first'}>{draw(said.first)}</p>
        <p className="second">
          {busy !== null ? <>{busy.stage}, {Math.round(100 * busy.done)} %. <button className="word" onClick={() => desk.stop()}>Stop</button></> : draw(said.second)}
          {answer?.summary.verdict === 'does not lift' && opening === null && answer.summary.reason !== null && busy === null && answer.roof === null ? ` ${answer.summary.reason}` : ''}
        </p>
      </div>
    </div>
  )
}

const signTitles: Readonly<Record<Sign, string>> = { lifts: 'lifts', part: 'lifts in part', within: 'lifts within tolerance', not: 'does not', open: 'not accepted yet' }

/** A shape a verdict: a ridge; a ridge that ends in a double line; two ridges between ticks; a struck double line; dotted. */
function VerdictSign({ sign }: { readonly sign: Sign }) {
  return (
    <svg className={`sign ${sign}`} viewBox="0 0 48 34" width="48" height="34" role="img" aria-label={signTitles[sign]}>
      {sign !== 'not' && <path className="base" d="M2 31H46" />}
      {sign === 'lifts' && <path d="M2 28 20 5 46 28" />}
      {sign === 'part' && <><path d="M2 28 20 5 32 16" /><path className="thin" d="M30.6 17.6 44.6 30M33.4 14.4 47 26.5" /></>}
      {sign === 'within' && <><path className="thin" d="M2 28 20 8 46 28M2 24 20 4 46 24" /><path className="thin" d="M8 2V32M38 2V32" /></>}
      {sign === 'not' && <><path className="dotted" d="M4 26 20 5 44 26" /><path d="M2 25H46M2 29H46" /><path d="M30 20 16 34" /></>}
      {sign === 'open' && <path className="dotted" d="M2 28 20 5 46 28" />}
    </svg>
  )
}
