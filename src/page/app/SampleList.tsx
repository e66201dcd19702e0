/** Samples as small plans with a sentence each, drawn one after another while the page has nothing else to do. */
import { useEffect, useState } from 'react'
import { useDesk } from './context.ts'
import { openSample } from './Samples.tsx'
import { samples, type Sample } from '../store/samples.ts'

const width = 76
const height = 50
const pictures = new Map<string, string>()

export function SampleList() {
  const [, setCount] = useState(pictures.size)
  useEffect(() => {
    let isGone = false
    const draw = async (): Promise<void> => {
      const { drawnLines, linesPath } = await import('../store/drawn-lines.ts')
      for (const sample of samples) {
        if (isGone) return
        if (pictures.has(sample.name)) continue
        await new Promise<void>((resume) => (typeof requestIdleCallback === 'function' ? requestIdleCallback(() => resume()) : setTimeout(resume, 20)))
        const lines = await drawnLines(sample.name, new TextEncoder().encode(await sample.text()))
        pictures.set(sample.name, lines === null ? '' : linesPath(lines, width, height))
        setCount(pictures.size)
      }
    }
    void draw()
    return () => { isGone = true }
  }, [])
  return (
    <>
      <header><h2>Samples</h2><span className="note">variants of one invented hall</span></header>
      <ul className="scroll samples pictured">{samples.map((sample) => <Item key={sample.name} sample={sample} />)}</ul>
    </>
  )
}

function Item({ sample }: { readonly sample: Sample }) {
  const desk = useDesk()
  return (
    <li>
      <svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden="true"><path d={pictures.get(sample.name) ?? ''} /></svg>
      <div><button className="word" onClick={() => void openSample(desk, sample)}>{sample.name}</button><small>{sample.panels === '' || sample.panels === '0' ? '' : `${sample.panels} panels. `}{sample.note}</small></div>
    </li>
  )
}
