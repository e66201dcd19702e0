/** The question whether all joints, or those picked together, can fold one way: the margin, or the few that cannot together. */
import { figure } from '../../paper/drawing/figures.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'

export function OneWayRow({ answer }: { readonly answer: Answer }) {
  const desk = useDesk()
  const told = useDeskState((state) => state.oneWay)
  const gathered = useDeskState((state) => state.gathered)
  const settled = useDeskState((state) => state.fresh && state.inHand === null)
  if (answer.plan.jointCount === 0 || answer.summary.stress.freedom === 0) return null
  const picked = gathered?.kind === 'joint' && gathered.indices.length > 1 ? gathered.indices : null
  return (
    <p className="entry" role="status" data-one-way>
      <button className="word" disabled={!settled} onClick={() => void desk.askOneWay(null)}>Could all joints fold one way?</button>
      {picked !== null && <>{' '}<button className="word" disabled={!settled} onClick={() => void desk.askOneWay(picked)}>Could these {figure(picked.length)}?</button></>}
      {told !== null && (
        <>
          {' '}{told.sentence}
          {told.facts.certificate.length > 0 && <> <button className="word" onClick={() => desk.pickCertificate()}>Show {told.facts.certificate.length === 1 ? 'it' : 'them'}</button></>}
          {told.heights !== null && <> <button className="word" onClick={() => desk.takeOneWay()}>Take that roof</button></>}
        </>
      )}
    </p>
  )
}
