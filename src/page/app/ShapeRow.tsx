/** The starting shape: what the roof comes as near to as its conditions let it. */
import { conversion } from '../../base/length.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { shapes } from '../../plan/project/brief.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import { useDesk, useDeskState } from './context.ts'

export function ShapeRow() {
  const desk = useDesk()
  const error = useDeskState((state) => state.answer?.summary.roof?.heightError)
  const doc = useDeskState((state) => state.doc)
  if (doc === null) return null
  const { target, brief: { shape, down } } = doc
  const hasHeights = saysHeights(doc.read)
  const shown = target !== null ? 'hand' : (shape ?? (hasHeights ? 'drawing' : 'dome'))
  return (
    <p className="entry switch" role="radiogroup" aria-label="Shape">
      <span>Near to</span>
      {shapes.map((name) => (
        <button key={name} role="radio" aria-checked={shown === name} className={shown === name ? 'chosen' : ''}
          onClick={() => desk.take({ doc: { ...doc, target: null, brief: { ...doc.brief, shape: name } }, what: `Near to a ${name}`.replace('a pitched', 'a pitched roof').replace('a hipped', 'a hipped roof'), before: shape === null ? 'was as drawn' : `was ${shape}` })}>{name}</button>
      ))}
      {hasHeights && <button role="radio" aria-checked={shown === 'drawing'} className={shown === 'drawing' ? 'chosen' : ''} onClick={() => desk.take({ doc: { ...doc, target: null, brief: { ...doc.brief, shape: null } }, what: 'Near to the drawing', before: 'was a shape' })}>the drawing</button>}
      <button onClick={() => document.querySelector<HTMLInputElement>('#near-file')?.click()}>a surface…</button>
      <input id="near-file" type="file" hidden accept=".obj,.dxf" onChange={(event) => {
        const file = event.currentTarget.files?.[0]
        event.currentTarget.value = ''
        if (file !== undefined) void file.arrayBuffer().then((bytes) => desk.nearSurface({ name: file.name, bytes: new Uint8Array(bytes) }))
      }} />
      {shown === 'hand' && <button role="radio" aria-checked className="chosen">set by hand</button>}
      <button aria-pressed={down} className={down ? 'chosen' : ''} onClick={() => desk.brief({ down: !down }, down ? 'Rises' : 'Hangs', down ? 'hung' : 'rose')}>hanging</button>
      {error !== undefined && <span className="note">{figure(error * conversion(doc.read.plan.unit, 'mm'), 1)} mm off it (RMS)</span>}
    </p>
  )
}

/** Whether the drawing has a surface to come near to: nearly all nodes have a height, and they are not all one. */
function saysHeights({ plan, heights }: ReadPlan): boolean {
  if (heights === null) return false
  let low = Infinity
  let high = -Infinity
  let count = 0
  for (const z of heights) {
    if (Number.isNaN(z)) continue
    count += 1
    low = Math.min(low, z)
    high = Math.max(high, z)
  }
  return count >= 0.9 * plan.nodeCount && (high - low) * conversion(plan.unit, 'mm') > 10 && high - low > plan.frame.span / 1000
}
