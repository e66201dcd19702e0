/** A way left as a small picture: at most 600 panels seen from the south, its peak drawn a sixth of the span high. */
import type { Plan } from '../../plan/plan.ts'
import type { Way } from '../../job/session.ts'

export interface WayPicture {
  readonly panels: readonly { readonly d: string; readonly shade: number }[]
  /** Where the node that moves most stands. */
  readonly peak: readonly [number, number]
}

const mostDrawn = 600

/** In a box of 84 by 46. */
export function wayPicture(plan: Plan, { heights, peak }: Way): WayPicture {
  const { span, centreX, centreY } = plan.frame
  const scale = 70 / span
  const at = (node: number): [number, number] => [42 + scale * (plan.x[node] - centreX), 24 - scale * (0.5 * (plan.y[node] - centreY) + 0.16 * span * heights[node])]
  const step = Math.max(1, Math.ceil(plan.panelCount / mostDrawn))
  const out: { d: string; shade: number; depth: number }[] = []
  for (let p = 0; p < plan.panelCount; p += step) {
    let d = ''
    let sum = 0
    let depth = 0
    const count = plan.panelStart[p + 1] - plan.panelStart[p]
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      const node = plan.corner[c]
      const [x, y] = at(node)
      d += `${c === plan.panelStart[p] ? 'M' : 'L'}${x.toFixed(1)} ${y.toFixed(1)}`
      sum += heights[node] / count
      depth += plan.y[node] / count
    }
    out.push({ d: `${d}Z`, shade: 0.35 + 0.3 * Math.max(-1, Math.min(1, sum)), depth })
  }
  return { panels: out.sort((a, b) => b.depth - a.depth), peak: at(peak) }
}
