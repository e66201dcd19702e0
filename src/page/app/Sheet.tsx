/** The sheet: one frame, its panes, and the tabs that a phone has in their place. */
import { useEffect, useState, type DragEvent } from 'react'
import { BesidePane } from './BesidePane.tsx'
import { ChartPane } from './ChartPane.tsx'
import { ComparePane } from './ComparePane.tsx'
import { DeskPane } from './DeskPane.tsx'
import { Dialogs } from './Dialogs.tsx'
import { Head } from './Head.tsx'
import { OpeningPlan, ReaderReport } from './OpeningPane.tsx'
import { PanelList } from './PanelList.tsx'
import { PlanPane } from './PlanPane.tsx'
import { PrintSheets } from './PrintSheets.tsx'
import { RoofPane } from './RoofPane.tsx'
import { SampleList } from './SampleList.tsx'
import { Samples } from './Samples.tsx'
import { StepsPane } from './StepsPane.tsx'
import { TitleBlock } from './TitleBlock.tsx'
import { jointName, nodeName, panelName } from '../../plan/names.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { slopeOf } from '../../paper/drawing/fall.ts'
import { useDesk, useDeskState } from './context.ts'
import type { Pane } from '../store/state.ts'
import type { Size } from './useSize.ts'

const tabs: readonly (readonly [Pane, string])[] = [['roof', 'Roof'], ['plan', 'Plan'], ['chart', 'Slopes'], ['list', 'Panels'], ['steps', 'Steps']]

export function Sheet() {
  const desk = useDesk()
  const theme = useDeskState((state) => state.theme)
  const opening = useDeskState((state) => state.opening !== null)
  const empty = useDeskState((state) => state.doc === null && state.opening === null)
  const pane = useDeskState((state) => state.pane)
  const compared = useDeskState((state) => state.compared)
  const beside = useDeskState((state) => state.beside)
  const [over, setOver] = useState(false)
  const [planSize, setPlanSize] = useState<Size>({ width: 0, height: 0 })
  useEffect(() => { document.documentElement.dataset.theme = theme }, [theme])

  const onDrop = (event: DragEvent): void => {
    event.preventDefault()
    setOver(false)
    const file = event.dataTransfer.files[0]
    if (file !== undefined) void file.arrayBuffer().then((bytes) => desk.openFile(file.name, new Uint8Array(bytes)))
  }
  useEffect(() => {
    const onPaste = (event: ClipboardEvent): void => {
      if (event.target instanceof HTMLInputElement) return
      const file = event.clipboardData?.files[0]
      const text = event.clipboardData?.getData('text/plain') ?? ''
      if (file !== undefined) void file.arrayBuffer().then((bytes) => desk.openFile(file.name, new Uint8Array(bytes)))
      else if (text.trim() !== '') void desk.openFile(pastedName(text), new TextEncoder().encode(text))
    }
    window.addEventListener('paste', onPaste)
    return () => window.removeEventListener('paste', onPaste)
  }, [desk])
  return (
    <>
    <div className={`sheet${over ? ' over' : ''}${opening ? ' is-opening' : empty ? ' is-empty' : ''}`} data-shown={opening ? 'plan' : pane}
      onDragOver={(event) => { event.preventDefault(); setOver(true) }} onDragLeave={(event) => { if (event.relatedTarget === null) setOver(false) }} onDrop={onDrop}>
      <Head />
      <StepsPane />
      {opening ? <OpeningPlan /> : (
        <>
          <div className="cell-plan"><PlanPane onSize={setPlanSize} /></div>
          {beside !== null ? <BesidePane beside={beside} /> : compared === null ? <ChartPane /> : <ComparePane step={compared} />}
          <RoofPane planSize={planSize} />
          {empty ? <Samples /> : <DeskPane />}
        </>
      )}
      {opening ? <ReaderReport /> : <section className="pane list" data-pane="list" aria-label={empty ? 'Samples' : 'Panel list'}>{empty ? <SampleList /> : <PanelList />}</section>}
      <TitleBlock />
      <nav className="tabs-phone" aria-label="Drawings">
        {tabs.map(([name, title]) => <button key={name} aria-pressed={pane === name} onClick={() => desk.set({ pane: name })}>{title}</button>)}
      </nav>
      <Announcement />
      <Dialogs />
      {over && <p className="drop-here">Drop it: it is read here, on this computer.</p>}
    </div>
    <PrintSheets />
    </>
  )
}

/** The selection as a sentence, for those who do not see it. */
function Announcement() {
  const answer = useDeskState((state) => state.answer)
  const selection = useDeskState((state) => state.selection)
  if (answer === null || selection === null) return <p className="unseen" aria-live="polite" />
  const { kind, index } = selection
  const words = kind === 'node' ? `Node ${nodeName(index)} selected.` : kind === 'joint' ? `Joint ${jointName(index)} selected.`
    : `Panel ${panelName(index)} selected${answer.roof === null ? '' : `, slope ${figure(slopeOf(answer.roof.gradient, index), 1)} degrees, flatness ${figure(answer.roof.flatness_mm[index], 2)} mm`}.`
  return <p className="unseen" aria-live="polite">{words}</p>
}

/** Pasted text has no name; its first characters tell the format. */
function pastedName(text: string): string {
  const head = text.trimStart()
  if (head.startsWith('{')) return /"panewise"\s*:\s*"project"/.test(head.slice(0, 400)) ? 'pasted.panewise.json' : 'pasted.geojson'
  if (head.startsWith('<')) return 'pasted.svg'
  return /^(?:#|v\s|o\s|g\s)/m.test(head.slice(0, 2000)) && !/^\s*0\s*\r?\nSECTION/m.test(head.slice(0, 2000)) ? 'pasted.obj' : 'pasted.dxf'
}
