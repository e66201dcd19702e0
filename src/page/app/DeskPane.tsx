/** The lower right: conditions, profile, ways left. On a plan that does not lift, the reason stands over them. */
import { useDesk, useDeskState } from './context.ts'
import { ConditionsDesk } from './ConditionsDesk.tsx'
import { ProfileDesk } from './ProfileDesk.tsx'
import { WaysDesk } from './WaysDesk.tsx'
import { ShapeRow } from './ShapeRow.tsx'
import type { Desk as DeskName } from '../store/state.ts'

const desks: readonly (readonly [DeskName, string])[] = [['conditions', 'Conditions'], ['profile', 'Profile'], ['ways', 'Ways left']]

export function DeskPane() {
  const desk = useDesk()
  const shown = useDeskState((state) => state.desk)
  const answer = useDeskState((state) => state.answer)
  return (
    <section className="pane desk" data-pane="ways" aria-label="Shaping">
      <header>
        <div className="tabs" role="tablist" aria-label="Shaping">
          {desks.map(([name, title]) => (
            <button key={name} role="tab" data-first={name === shown ? true : undefined} aria-selected={shown === name} className={shown === name ? 'chosen' : ''} onClick={() => desk.showDesk(name)}>{title}</button>
          ))}
        </div>
      </header>
      <div className="scroll" role="tabpanel">
        {answer === null ? <p className="will">What the roof must keep, sections of runs, and the ways that are left to it.</p> : (
          <>
            {answer.summary.reason !== null && <p className="entry reason"><b>{answer.summary.verdict === 'does not lift' ? 'Why not: ' : ''}</b>{answer.summary.reason}</p>}
            <ShapeRow />
            {shown === 'conditions' ? <ConditionsDesk answer={answer} /> : shown === 'profile' ? <ProfileDesk answer={answer} /> : <WaysDesk answer={answer} />}
          </>
        )}
      </div>
    </section>
  )
}
