/**
 * What the hand finds at the selection: a handle that is dragged at a node or across a joint, and over everything the plate
 * that is typed over. It stands beside the selection, on the emptier side.
 */
import { toSheet } from '../../paper/drawing/plan-window.ts'
import type { MirrorLine } from '../../job/session.ts'
import { useDeskState } from './context.ts'
import { GatheredPlate } from './GatheredPlate.tsx'
import { JointPlate } from './JointPlate.tsx'
import { NodePlate } from './NodePlate.tsx'
import { PanelPlate } from './PanelPlate.tsx'
import type { Placed } from './plate.ts'

export function PlanHand({ picked, ...placed }: Placed & { readonly picked: readonly number[] }) {
  const selection = useDeskState((state) => state.selection)
  const gathered = useDeskState((state) => state.gathered)
  const mirror = useDeskState((state) => state.mirror)
  const { answer: { plan }, window, size } = placed
  const several = gathered !== null && gathered.indices.length > 1
  return (
    <>
      {picked.length > 1 && (
        <svg className="over" width={size.width} height={size.height} aria-hidden="true">
          <polyline points={picked.map((node) => toSheet(window, plan.x[node], plan.y[node]).join(',')).join(' ')} />
          {picked.map((node) => {
            const [x, y] = toSheet(window, plan.x[node], plan.y[node])
            return <circle key={node} cx={x} cy={y} r={4} />
          })}
        </svg>
      )}
      {mirror !== null && <MirrorLineDrawn line={mirror} {...placed} />}
      {several && <GatheredPlate gathered={gathered} {...placed} />}
      {!several && selection?.kind === 'node' && selection.index < plan.nodeCount && <NodePlate key={selection.index} node={selection.index} {...placed} />}
      {!several && selection?.kind === 'joint' && selection.index < plan.jointCount && <JointPlate key={selection.index} joint={selection.index} {...placed} />}
      {!several && selection?.kind === 'panel' && selection.index < plan.panelCount && <PanelPlate key={selection.index} panel={selection.index} {...placed} />}
    </>
  )
}

/** The line that edits are mirrored about, right across the plan. */
function MirrorLineDrawn({ line, answer: { plan }, window, size }: Placed & { readonly line: MirrorLine }) {
  const reach = 0.62 * plan.frame.span
  const [ax, ay] = toSheet(window, line.x - reach * Math.cos(line.angle), line.y - reach * Math.sin(line.angle))
  const [bx, by] = toSheet(window, line.x + reach * Math.cos(line.angle), line.y + reach * Math.sin(line.angle))
  return (
    <svg className="over mirror" width={size.width} height={size.height} role="img" aria-label="Edits are mirrored about this line">
      <line className="chain" x1={ax} y1={ay} x2={bx} y2={by} />
      <text x={Math.max(4, Math.min(size.width - 116, bx + 5))} y={Math.max(34, Math.min(size.height - 74, by - 5))}>mirrored about this</text>
    </svg>
  )
}
