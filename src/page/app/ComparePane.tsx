/** An earlier step beside the one in force: its roof from the same side, and the figures of both. */
import { useCallback } from 'react'
import { conversion, metres } from '../../base/length.ts'
import { figure } from '../../paper/drawing/figures.ts'
import { stockView } from '../../paper/drawing/projection.ts'
import { roofDrawing } from '../../paper/drawing/roof-drawing.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDesk, useDeskState } from './context.ts'
import { ListCanvas } from './ListCanvas.tsx'
import { jointsOf, readingFor, useLimits } from './useReading.ts'

export function ComparePane({ step }: { readonly step: number }) {
  const desk = useDesk()
  const now = useDeskState((state) => state.answer)
  const readingName = useDeskState((state) => state.reading)
  const side = useDeskState((state) => state.side)
  const { leastSlope, flat_mm } = useLimits()
  const was = desk.answerOf(step)
  const draw = useCallback((width: number, height: number) => was === null ? null : roofDrawing(was, {
    width, height, reading: readingFor(was, readingName, leastSlope, flat_mm), joints: jointsOf(was), view: stockView(side, -1.35 / metres[was.plan.unit]), exaggeration: 1, scale: null, selection: null,
  }), [was, readingName, side, leastSlope, flat_mm])
  return (
    <section className="pane chart" data-pane="chart" aria-labelledby="compare-title">
      <header><h2 id="compare-title">Step {step + 1}</h2><span className="note">{desk.state.steps[step]?.what}; click another step to compare with it</span></header>
      <div className="stage">
        <ListCanvas draw={draw} label={`The roof at step ${step + 1}`} />
        <p className="foot">{was === null || now === null ? 'This step has no answer to show.' : differences(was, now)}</p>
      </div>
    </section>
  )
}

function differences(was: Answer, now: Answer): string {
  const a = was.summary.roof
  const b = now.summary.roof
  if (a === null || b === null) return 'One of the two has no roof.'
  const mm = conversion(now.plan.unit, 'mm')
  const pair = (title: string, before: number, after: number): string => `${title} ${figure(after * mm)} mm, was ${figure(before * mm)} mm`
  const parts = [pair('rise', a.rise, b.rise), pair('the rim varies by', a.rimVariation, b.rimVariation)]
  if (was.roof !== null && now.roof !== null && was.roof.heights.length === now.roof.heights.length) {
    let most = 0
    for (let i = 0; i < was.roof.heights.length; i += 1) most = Math.max(most, Math.abs(now.roof.heights[i] - was.roof.heights[i]))
    parts.push(`no node moved more than ${figure(most * mm)} mm`)
  }
  return `Now and then: ${parts.join('; ')}.`
}
