/** Plans written by the generator of svg-written.ts read back to the same subdivision. */
import { describe, expect, test } from 'vitest'
import { finish } from '../../src/base/steps.ts'
import { readDrawing } from '../../src/formats/all.ts'
import { planFromDrawing } from '../../src/plan/reading/from-drawing.ts'
import { voidCount, type Plan } from '../../src/plan/plan.ts'
import { grid } from '../make/plans.ts'
import { geoJsonWays, svgWays } from './svg-written.ts'

function read(name: string, text: string, scale: number | null, voids: readonly (readonly [number, number])[] = []): Plan {
  const drawing = finish(
    readDrawing({ name, bytes: new TextEncoder().encode(text) }, { layers: null, sagitta: 0.005, metresPerUnit: null }),
  )
  if (!drawing.ok) throw new Error(JSON.stringify(drawing.problem))
  const plan = finish(planFromDrawing(drawing.value, { unit: null, scale, snap_mm: null, voids, accept: [] }))
  if (!plan.ok) throw new Error(JSON.stringify(plan.problem))
  return plan.value.plan
}

/** Panels as sets of corners, which do not depend on the order in which anything is named: "x y" to 1 um, from the lowest corner. */
function shapes(plan: Plan): string[] {
  const key = (node: number): string => `${plan.x[node]!.toFixed(6)} ${plan.y[node]!.toFixed(6)}`.replace(/-(0\.0+\b)/g, '$1')
  return Array.from({ length: plan.panelCount }, (_, p) => {
    const corners = Array.from(plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1]), key)
    const first = corners.indexOf([...corners].sort()[0]!)
    return [...corners.slice(first), ...corners.slice(0, first)].join(', ')
  }).sort()
}

const plans: Record<string, Plan> = {
  'a loose grid of 7 x 5': grid(7, 5, { bay: 2.5, loose: 0.2, seed: 3 }),
  'a grid with a void': grid(6, 6, {
    bay: 1.25,
    loose: 0.15,
    seed: 8,
    voids: [
      [2, 3],
      [3, 3],
    ],
  }),
}

describe.each(Object.entries(plans))('%s', (_name, plan) => {
  // The void of line work has to be named; that of panels is what they leave.
  const hole: [number, number][] = voidCount(plan) === 0 ? [] : [[3.75, 4.375]]

  const sameAs = (back: Plan): void => {
    expect([back.panelCount, back.nodeCount, back.jointCount, back.edgeCount, voidCount(back)]).toEqual([
      plan.panelCount,
      plan.nodeCount,
      plan.jointCount,
      plan.edgeCount,
      voidCount(plan),
    ])
    expect(shapes(back)).toEqual(shapes(plan))
  }

  test.each(Object.entries(svgWays))('SVG: %s', (way, written) =>
    sameAs(read('plan.svg', written(plan), 100, way.startsWith('lines') ? hole : [])),
  )
  test.each(Object.entries(geoJsonWays))('GeoJSON: %s', (way, written) =>
    sameAs(read('plan.geojson', written(plan), null, way.startsWith('line') ? hole : [])),
  )
})

test('the generator does not write the same twice: each way differs, and a moved node is seen', () => {
  const plan = plans['a loose grid of 7 x 5']!
  expect(new Set(Object.values(svgWays).map((way) => way(plan))).size).toBe(Object.keys(svgWays).length)
  const moved = { ...plan, x: plan.x.map((x, node) => (node === 17 ? x + 0.001 : x)) }
  expect(shapes(read('plan.svg', svgWays.polygons!(moved), 100))).not.toEqual(shapes(plan))
})
