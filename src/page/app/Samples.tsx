/** The empty sheet's lower right: how to begin, and what this browser kept. */
import { useEffect, useState } from 'react'
import { useDesk, useDeskState } from './context.ts'
import type { Desk } from '../store/desk.ts'
import type { Sample } from '../store/samples.ts'
import { savedProjects, type Saved } from '../store/autosave.ts'

export async function openSample(desk: Desk, sample: Sample): Promise<void> {
  const brief = await sample.brief?.()
  await desk.openFile(sample.name, new TextEncoder().encode(await sample.text()), { scale: sample.scale, ...(brief === undefined ? {} : { brief }) })
}

export function Samples() {
  const desk = useDesk()
  const problem = useDeskState((state) => state.problem)
  const [saved, setSaved] = useState<readonly Saved[]>([])
  useEffect(() => { void savedProjects().then(setSaved) }, [])
  return (
    <section className="pane desk" data-pane="ways" aria-labelledby="begin-title">
      <header><h2 id="begin-title">Begin</h2><span className="note">your drawing stays on this computer</span></header>
      <div className="scroll">
        <p className="entry"><button className={problem === null ? 'solid' : 'word'} data-first onClick={() => document.querySelector<HTMLInputElement>('#open-file')?.click()}>Open a drawing</button> <span className="note">or drop it anywhere, or paste it: DXF, OBJ, SVG, GeoJSON</span></p>
        {saved.length > 0 && <>
          <h3>Go on with</h3>
          <ul className="samples">{saved.slice(0, 4).map((project) => <li key={project.id}><button className="word" onClick={() => desk.goOn(project)}>{project.name}</button> <span className="note">step {project.steps}, {project.at}</span></li>)}</ul>
        </>}
        <p className="entry note">Or look at one of the samples: each says why it is there.</p>
      </div>
    </section>
  )
}
