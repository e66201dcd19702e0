/** Steps taken, newest on top: undo and redo as words, each step a way back. */
import { useDesk, useDeskState } from './context.ts'
import { canRedo, canUndo } from '../store/steps.ts'

export function StepsPane() {
  const desk = useDesk()
  const steps = useDeskState((state) => state.steps)
  const at = useDeskState((state) => state.at)
  const inHand = useDeskState((state) => state.inHand)
  const opening = useDeskState((state) => state.opening !== null)
  const compared = useDeskState((state) => state.compared)
  const beside = useDeskState((state) => state.beside !== null)
  const mayUndo = useDeskState(canUndo)
  const mayRedo = useDeskState(canRedo)
  return (
    <aside className="pane steps" data-pane="steps" aria-labelledby="steps-title">
      <header>
        <h2 id="steps-title">Steps</h2>
        <button className="word" data-first disabled={!mayUndo} onClick={() => desk.undo()}>Undo <kbd>U</kbd></button>
        <button className="word" disabled={!mayRedo} onClick={() => desk.redo()}>Redo <kbd>R</kbd></button>
        <button className="word" disabled={at < 0} aria-pressed={compared !== null} onClick={() => desk.compare(compared === null ? Math.max(0, at - 1) : null)}>
          {compared === null ? 'Compare with a step' : 'Stop comparing'} <kbd>C</kbd>
        </button>
        <button className="word" disabled={at < 0} aria-pressed={beside} onClick={() => (beside ? void desk.compareWith(null) : document.querySelector<HTMLInputElement>('#beside-file')?.click())}>
          {beside ? 'Stop comparing' : 'Compare with a project'}
        </button>
        <input id="beside-file" type="file" hidden accept=".json" onChange={(event) => {
          const file = event.currentTarget.files?.[0]
          event.currentTarget.value = ''
          if (file !== undefined) void file.arrayBuffer().then((bytes) => desk.compareWith({ name: file.name, bytes: new Uint8Array(bytes) }))
        }} />
      </header>
      <ol className="step-list" reversed aria-label="Steps, newest first">
        {opening && <li className="hand"><Triangle number={steps.length + 1} /><b>Opening</b><small>not accepted yet; the open project is untouched</small></li>}
        {inHand !== null && <li className="hand"><Triangle number={at + 2} /><b>{inHand.what}</b><small>in hand, {inHand.before}</small></li>}
        {steps.map((step, i) => (
          <li key={i} className={i > at ? 'undone' : i === at ? 'now' : ''}>
            <button aria-current={i === at ? 'step' : undefined} onClick={() => (compared === null ? desk.goTo(i) : desk.compare(i))}>
              <Triangle number={i + 1} /><b>{step.what}</b><small>{step.before}{compared === i ? '; compared with' : ''}</small>
            </button>
          </li>
        )).reverse()}
      </ol>
    </aside>
  )
}

function Triangle({ number }: { readonly number: number }) {
  return (
    <svg className="triangle" viewBox="0 0 24 21" width="24" height="21" aria-hidden="true">
      <path d="M12 1.5 22.5 19.5H1.5Z" />
      <text x="12" y="16.5" textAnchor="middle">{number}</text>
    </svg>
  )
}
