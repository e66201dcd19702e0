/** What opens over the sheet: take away, keys, words. Closed by Esc like everything that is in hand. */
import { useEffect, useRef, useState, type ReactNode } from 'react'
import { sentence } from '../../base/result.ts'
import { commands, drawingKeys } from '../store/commands.ts'
import { useDesk, useDeskState } from './context.ts'
import { glossary } from '../store/words.ts'
import { saveBytes, takeDrawing, type DrawingName } from './take-away.ts'
import { docText, projectName } from '../store/project-file.ts'

export function Dialogs() {
  const dialog = useDeskState((state) => state.dialog)
  switch (dialog) {
    case 'keys': return <Keys />
    case 'words': return <Words />
    case 'take': return <TakeAway />
    case null: return null
  }
}

function Frame({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  const desk = useDesk()
  const ref = useRef<HTMLDialogElement>(null)
  useEffect(() => {
    const element = ref.current
    const before = document.activeElement
    if (element !== null && !element.open) element.showModal()
    return () => { if (before instanceof HTMLElement) before.focus() }
  }, [])
  return (
    <dialog ref={ref} aria-labelledby="dialog-title" onClose={() => desk.set({ dialog: null })}>
      <header><h2 id="dialog-title">{title}</h2><button className="word" onClick={() => desk.set({ dialog: null })}>Put it away <kbd>Esc</kbd></button></header>
      {children}
    </dialog>
  )
}

const groups = [['file', 'File'], ['steps', 'Steps'], ['edit', 'In hand'], ['go', 'Go to'], ['readings', 'Panels filled by'], ['look', 'Looking']] as const

function Keys() {
  const desk = useDesk()
  const letterKeys = useDeskState((state) => state.letterKeys)
  return (
    <Frame title="Keys">
      <div className="key-groups">
        {groups.map(([group, title]) => (
          <section key={group}>
            <h3>{title}</h3>
            <dl>{commands.filter((command) => command.group === group).map((command) => <div key={command.key}><dt><kbd>{command.key}</kbd></dt><dd>{command.title}</dd></div>)}</dl>
          </section>
        ))}
        <section>
          <h3>On the drawings</h3>
          <dl>{drawingKeys.map(([key, title]) => <div key={key}><dt><kbd>{key}</kbd></dt><dd>{title}</dd></div>)}</dl>
        </section>
      </div>
      <label><input type="checkbox" checked={letterKeys} onChange={() => desk.set({ letterKeys: !letterKeys })} /> single letters are commands</label>
    </Frame>
  )
}

function Words() {
  return (
    <Frame title="Words">
      <dl className="glossary">{glossary.map(([word, meaning]) => <div key={word}><dt>{word}</dt><dd>{meaning}</dd></div>)}</dl>
    </Frame>
  )
}

const drawings: readonly (readonly [DrawingName, string])[] = [['plan', 'Plan'], ['chart', 'Slope chart'], ['roof', 'Roof, as it is seen']]

function TakeAway() {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  const answer = useDeskState((state) => state.answer)
  const [said, setSaid] = useState('')
  const files = async (name: string | null): Promise<void> => {
    setSaid('Writing.')
    const made = await desk.files()
    if (made === null) return setSaid('Stopped.')
    if (!made.ok) return setSaid(sentence(made.problem))
    const wanted = made.value.filter((file) => name === null || file.name === name)
    for (const file of wanted) saveBytes(file.name, file.bytes, file.name.endsWith('.csv') ? 'text/csv' : 'application/octet-stream')
    setSaid(wanted.length === 0 ? 'There is no roof to write.' : `${wanted.map((file) => file.name).join(', ')} written to your downloads.`)
  }
  const drawing = async (name: DrawingName, format: 'svg' | 'png'): Promise<void> => {
    const written = await takeDrawing(desk, name, format)
    setSaid(written === null ? 'There is no roof to draw.' : `${written} written to your downloads.`)
  }
  return (
    <Frame title="Take away">
      {doc === null || answer === null ? <p>Open a drawing first.</p> : (
        <>
          {answer.summary.near === true && <p className="fault"><b>This is the nearest roof: its panels are not exactly flat. The files say so.</b></p>}
          <table className="take">
            <tbody>
              <tr><th>Model</th><td><button className="word" onClick={() => void files('roof.obj')}>OBJ</button></td><td>one group a panel, heights to a thousandth of a millimetre</td></tr>
              <tr><th>Lists</th><td>{['panels.csv', 'joints.csv', 'nodes.csv'].map((name) => <button key={name} className="word" onClick={() => void files(name)}>{name.replace('.csv', '')}</button>)}</td><td>CSV, one row each</td></tr>
              <tr><th>Summary</th><td><button className="word" onClick={() => void files('summary.json')}>JSON</button></td><td>verdict, freedom, figures</td></tr>
              <tr><th>Project</th><td><button className="word" onClick={() => { saveBytes(projectName(doc), new TextEncoder().encode(docText(doc)), 'application/json'); setSaid(`${projectName(doc)} written to your downloads.`) }}>panewise.json</button></td><td>plan and what is asked of it; page and command line open it</td></tr>
              {drawings.map(([name, title]) => <tr key={name}><th>{title}</th><td><button className="word" onClick={() => void drawing(name, 'svg')}>SVG</button> <button className="word" onClick={() => void drawing(name, 'png')}>PNG</button></td><td>as filled now</td></tr>)}
              <tr><th>Paper</th><td><button className="word" onClick={() => { desk.set({ dialog: null }); setTimeout(() => window.print(), 50) }}>Print</button></td><td>A3, by day</td></tr>
            </tbody>
          </table>
          <p role="status">{said}</p>
        </>
      )}
    </Frame>
  )
}
