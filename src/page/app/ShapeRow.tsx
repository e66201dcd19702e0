/** What the roof comes as near to as its conditions let it: a shape, the drawing, a surface; how far off it is; symmetry. */
import { conversion } from '../../base/length.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { nodeName } from '../../plan/names.ts'
import { shapes } from '../../plan/project/brief.ts'
import { withShape } from '../../plan/project/edits.ts'
import { asymmetry } from '../../plan/project/mirrored.ts'
import type { ReadPlan } from '../../plan/read-plan.ts'
import { useDesk, useDeskState } from './context.ts'
import { farthestOff } from '../store/distance.ts'

const asShape = { dome: 'a dome', barrel: 'a barrel', pitched: 'a pitched roof', hipped: 'a hipped roof' } as const

export function ShapeRow() {
  const desk = useDesk()
  const doc = useDeskState((state) => state.doc)
  if (doc === null) return null
  const { target, brief: { shape, down } } = doc
  const hasHeights = saysHeights(doc.read)
  const shown = target !== null ? 'hand' : (shape ?? (hasHeights ? 'drawing' : 'dome'))
  const before = target !== null ? 'was set by hand' : shape === null ? (hasHeights ? 'was the drawing' : 'was a dome') : `was ${asShape[shape]}`
  return (
    <>
      <p className="entry switch" role="radiogroup" aria-label="Shape">
        <span>Near to</span>
        {shapes.map((name) => (
          <button key={name} role="radio" aria-checked={shown === name} className={shown === name ? 'chosen' : ''}
            onClick={() => desk.take({ doc: withShape(doc, name), what: `Near to ${asShape[name]}`, before })}>{name}</button>
        ))}
        {hasHeights && <button role="radio" aria-checked={shown === 'drawing'} className={shown === 'drawing' ? 'chosen' : ''} onClick={() => desk.take({ doc: withShape(doc, null), what: 'Near to the drawing', before })}>the drawing</button>}
        <button title="heights of a model, or the roof of another project" onClick={() => document.querySelector<HTMLInputElement>('#near-file')?.click()}>a surface…</button>
        <input id="near-file" type="file" hidden accept=".obj,.dxf,.json" onChange={(event) => {
          const file = event.currentTarget.files?.[0]
          event.currentTarget.value = ''
          if (file !== undefined) void file.arrayBuffer().then((bytes) => desk.nearSurface({ name: file.name, bytes: new Uint8Array(bytes) }))
        }} />
        {shown === 'hand' && <button role="radio" aria-checked className="chosen">set by hand</button>}
        <button aria-pressed={down} className={down ? 'chosen' : ''} onClick={() => desk.brief({ down: !down }, down ? 'Rises' : 'Hangs', down ? 'hung' : 'rose')}>hanging</button>
      </p>
      <Distance />
      <Symmetry />
    </>
  )
}

/** How far the roof is off what it comes near to. */
function Distance() {
  const desk = useDesk()
  const answer = useDeskState((state) => state.answer)
  const target = useDeskState((state) => state.doc?.target ?? null)
  const fresh = useDeskState((state) => state.fresh)
  if (answer === null || answer.roof === null) return null
  const rms = answer.summary.roof?.heightError
  if (rms === undefined) return null
  const mm = conversion(answer.plan.unit, 'mm')
  const farthest = fresh && target !== null && target.length === answer.plan.nodeCount ? farthestOff(answer.roof.heights, target) : null
  return (
    <p className="entry note" data-distance>
      {offWords(rms * mm)} off it on average (RMS){farthest !== null && farthest.node >= 0 && <>, {offWords(farthest.by * mm)} at most, at <button className="word" onClick={() => desk.select({ kind: 'node', index: farthest.node })}>{nodeName(farthest.node)}</button></>}
    </p>
  )
}

/** Never "0.00": what is too small to be told is said so. */
const offWords = (mm: number): string => (mm < 0.01 ? 'less than 0.01 mm' : `${figure(mm, mm < 10 ? 2 : 0)} mm`)

/** Lines of the plan that the roof can be kept symmetric about. */
function Symmetry() {
  const desk = useDesk()
  const mirrors = useDeskState((state) => state.mirrors)
  const mirror = useDeskState((state) => state.mirror)
  const heights = useDeskState((state) => state.answer?.roof?.heights ?? null)
  const unit = useDeskState((state) => state.doc?.read.plan.unit ?? 'm')
  if (mirrors === null || mirrors.length === 0) return null
  const off = mirror === null || heights === null || heights.length !== mirror.node.length ? null : asymmetry(mirror, heights) * conversion(unit, 'mm')
  return (
    <p className="entry switch" role="radiogroup" aria-label="Keep symmetry">
      <span>Symmetric</span>
      <button role="radio" aria-checked={mirror === null} className={mirror === null ? 'chosen' : ''} onClick={() => desk.keepSymmetric(null)}>as it comes</button>
      {mirrors.slice(0, 6).map((line) => (
        <button key={line.angle} role="radio" aria-checked={mirror === line} className={mirror === line ? 'chosen' : ''} onClick={() => desk.keepSymmetric(line)}>{lineWords(line.angle)}</button>
      ))}
      {off !== null && <span className="note">{off < 0.01 ? 'halves alike to less than 0.01 mm' : `halves differ by ${figure(off, off < 10 ? 2 : 0)} mm`}</span>}
    </p>
  )
}

/** A line by how its halves lie: of a line that runs up the sheet, left and right. */
function lineWords(angle: number): string {
  const degrees = (angle * 180) / Math.PI
  if (Math.abs(degrees - 90) < 0.05) return 'left and right'
  if (degrees < 0.05 || degrees > 179.95) return 'top and bottom'
  return `about a line at ${figure(degrees, Number.isInteger(Math.round(10 * degrees) / 10) ? 0 : 1)}°`
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
