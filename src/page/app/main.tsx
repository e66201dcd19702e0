/** The page's beginning: what the browser can draw with is asked first, then the sheet is laid. */
import '@fontsource-variable/national-park/wght.css'
import '@fontsource-variable/sofia-sans-semi-condensed/wght.css'
import './sheet.css'
import './shaping.css'
import { createRoot } from 'react-dom/client'
import { webGlKind } from '../view/webgl.ts'
import { keepSaved } from '../store/autosave.ts'
import { DeskContext } from './context.ts'
import { Desk } from '../store/desk.ts'
import { Sheet } from './Sheet.tsx'
import { listenForKeys } from '../store/shortcuts.ts'
import { openSample } from './Samples.tsx'
import { samples } from '../store/samples.ts'
import { WorkerEngine } from '../store/worker-engine.ts'

const root = document.getElementById('sheet')
if (root !== null) {
  const dark = window.matchMedia('(prefers-color-scheme: dark)').matches
  const desk = new Desk(new WorkerEngine(), () => new WorkerEngine(), { webgl: webGlKind(), theme: dark ? 'night' : 'day', pane: 'roof' })
  listenForKeys(desk)
  keepSaved(desk)
  // What is not accepted or not kept yet is asked about before the page goes.
  window.addEventListener('beforeunload', (event) => {
    if (desk.state.inHand !== null || desk.state.saved.startsWith('not kept')) event.preventDefault()
  })
  createRoot(root).render(<DeskContext.Provider value={desk}><Sheet /></DeskContext.Provider>)
  document.fonts.ready.then(() => desk.store.update((state) => ({ ...state })), () => {})
  const asked = new URLSearchParams(location.search).get('sample')
  const sample = samples.find(({ name }) => name === asked)
  if (sample !== undefined) void openSample(desk, sample).then(() => desk.accept())
}
