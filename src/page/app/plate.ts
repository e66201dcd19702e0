/** Where a plate stands on the plan. */
import type { CSSProperties } from 'react'
import type { PlanWindow } from '../../paper/drawing/plan-window.ts'
import type { Answer } from '../../roof/answer/answer.ts'

export interface Placed {
  readonly answer: Answer
  readonly window: PlanWindow
  readonly size: { readonly width: number; readonly height: number }
}

/** In the corner that is farther off: beside the selection it would cover what moves with it. */
export function plateAt(x: number, y: number, size: { width: number; height: number }): CSSProperties {
  return { ...(x < size.width / 2 ? { right: 50 } : { left: 12 }), ...(y < size.height * 0.42 ? { bottom: 74 } : { top: 6 }) }
}
