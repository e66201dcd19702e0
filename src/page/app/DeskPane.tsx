/** The lower right: conditions, profile, ways left or what it takes, balancing. On a plan that does not lift, the reason stands over them. */
import { useDesk, useDeskState } from './context.ts'
import { BalanceDesk } from './BalanceDesk.tsx'
import { CuresDesk } from './CuresDesk.tsx'
import { ConditionsDesk } from './ConditionsDesk.tsx'
import { ProfileDesk } from './ProfileDesk.tsx'
import { WaysDesk } from './WaysDesk.tsx'
import { ShapeRow } from './ShapeRow.tsx'
import type { Desk as DeskName } from '../store/state.ts'

const desks: readonly (readonly [DeskName, string])[] = [['conditions', 'Conditions'], ['profile', 'Profile'], ['ways', 'Ways left'], ['cures', 'What it takes'], ['balance', 'Balance']]

/** Where nothing lifts no way is left; where all does, nothing has to be done for it. */
function stands(name: DeskName, verdict: string | undefined): boolean {
  return name === 'cures' ? verdict !== undefined && verdict !== 'lifts' : name !== 'ways' || verdict !== 'does not lift'
}

export function DeskPane() {
  const desk = useDesk()
  const shown = useDeskState((state) => state.desk)
  const answer = useDeskState((state) => state.answer)
  return (
    <section className="pane desk" data-pane="ways" aria-label="Shaping">
      <header>
        <div className="tabs" role="tablist" aria-label="Shaping">
          {desks.filter(([name]) => name === shown || stands(name, answer?.summary.verdict)).map(([name, title]) => (
            <button key={name} role="tab" data-first={name === shown ? true : undefined} aria-selected={shown === name} className={shown === name ? 'chosen' : ''} onClick={() => desk.showDesk(name)}>{title}</button>
          ))}
        </div>
      </header>
      <div className="scroll" role="tabpanel">
        {answer === null ? <p className="will">What the roof must keep, sections of runs, and the ways that are left to it.</p> : (
          <>
            {answer.summary.reason !== null && <p className="entry reason"><b>{answer.summary.verdict === 'does not lift' ? 'Why not: ' : ''}</b>{answer.summary.reason}{shown !== 'cures' && answer.summary.verdict !== 'lifts' && <> <button className="word" onClick={() => desk.showDesk('cures')}>See what it takes</button></>}</p>}
            {shown !== 'cures' && shown !== 'balance' && <ShapeRow />}
            {shown === 'conditions' ? <ConditionsDesk answer={answer} /> : shown === 'profile' ? <ProfileDesk answer={answer} />
              : shown === 'cures' ? <CuresDesk answer={answer} /> : shown === 'balance' ? <BalanceDesk answer={answer} /> : <WaysDesk answer={answer} />}
          </>
        )}
      </div>
    </section>
  )
}
