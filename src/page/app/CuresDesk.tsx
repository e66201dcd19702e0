/** What it takes where the answer is not a plain yes: the cures with their figures, each drawn small, applied by one click. */
import { useCallback, useEffect } from 'react'
import { curePicture, cureOverlay } from '../../paper/drawing/cure-drawing.ts'
import { fitted } from '../../paper/drawing/plan-window.ts'
import { answerLine, asDrawnSentence, blockingSentence } from '../../paper/report/cure-sentences.ts'
import { indexOfName, panelName } from '../../plan/names.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import type { Cure } from '../../roof/answer/cure.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import type { CuresShown } from '../store/state.ts'

export function CuresDesk({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const cures = useDeskState((state) => state.cures)
  const busy = useDeskState((state) => state.busy)
  const settled = useDeskState((state) => state.fresh && state.inHand === null)
  const { summary } = answer
  const isPlain = summary.verdict === 'lifts'
  useEffect(() => { if (cures === null && settled && !isPlain) void desk.askCures() }, [cures, settled, isPlain, answer, desk])
  if (isPlain) return <p className="entry note">Nothing: every joint can fold as the plan stands.</p>
  if (cures === null) return <p className="entry note" role="status">{settled ? <>Looking for what it takes{busy === null ? '.' : `: ${busy.stage.toLowerCase()}.`} <button className="word" onClick={() => desk.stop()}>Stop</button></> : 'Not while the roof is in hand.'}</p>
  const { list } = cures
  return (
    <>
      <p className="entry" role="status">
        <b>{answerLine({ ...summary, answer: list.answer, cures: list.cures }) ?? 'Yes.'}</b>
        {list.asDrawn !== null && summary.verdict === 'does not lift' && <span className="note"> {asDrawnSentence(list.asDrawn, summary.plan.panels)}</span>}
        {list.blocking !== null && <span className="note"> {blockingSentence(list.blocking, summary.plan.joints)}</span>}
      </p>
      <ol className="cures">{list.cures.map((cure, k) => <CureCard key={`${cure.code} ${cure.name ?? ''}`} cure={cure} place={k} shown={cures} answer={answer} />)}</ol>
    </>
  )
}

function CureCard({ cure, place, shown, answer }: { readonly cure: Cure; readonly place: number; readonly shown: CuresShown; readonly answer: Answer }) {
  const desk = useDesk()
  const { moved, drawn } = shown
  const picture = drawnCure(answer, cure, moved)
  const draw = useCallback((width: number, height: number) => curePicture(drawnCure(answer, cure, moved), width, height), [answer, cure, moved])
  const { note } = cureOverlay(picture, fitted(answer.plan, { left: 0, top: 0, right: 100, bottom: 100 }))
  const [first] = cure.where
  return (
    <li>
      <div className="picture"><ListCanvas draw={draw} label={note} /></div>
      <div>
        <p>{cure.message}</p>
        <p className="note">Leaves {cure.leaves}.</p>
        <p>
          {cure.code === 'accept-deviation' ? <button className="word" onClick={() => desk.select({ kind: 'panel', index: Math.max(0, indexOfName(first ?? panelName(0), 'P')) })}>Show the worst</button>
            : <button className="word" aria-label={`Apply: ${cure.message}`} onClick={() => void desk.applyCure(cure)}>Apply</button>}
          {' '}<button className="word" aria-pressed={drawn === place} onClick={() => desk.drawCure(place)}>on the plan</button>
          {' '}<small className="note">{note}</small>
        </p>
      </div>
    </li>
  )
}

/** A cure with what its drawing needs. */
export function drawnCure({ plan, conditions }: Answer, cure: Cure, moved: CuresShown['moved']) {
  return { plan, cure, moved: cure.code === 'move-nodes' ? moved : null, nodes: cure.code === 'release' ? (conditions.find(({ name }) => name === cure.name)?.nodes ?? []) : [] }
}
