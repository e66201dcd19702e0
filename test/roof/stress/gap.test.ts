/** The gap against the dense spectrum of the flatness form (ml-matrix), on plans of all kinds. */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix'
import { expect, test } from 'vitest'
import { finish } from '../../../src/base/steps.ts'
import { freeRim } from '../../../src/roof/stress/free-rim.ts'
import { applyForm, panelBases } from '../../../src/roof/stress/panel-bases.ts'
import { cells, grid, plan } from '../../make/plans.ts'

const triangulatedWithOneQuad = plan(
  [[0, 0], [2, 0], [4, 0], [4, 2], [2, 2.2], [0, 2], [1, 3.5], [3, 3.4]],
  [[0, 1, 4, 5], [1, 2, 4], [2, 3, 4], [5, 4, 6], [4, 7, 6], [4, 3, 7]],
)

test.each([
  ['12 x 8 rectangular', grid(12, 8)],
  ['7 x 5 loose', grid(7, 5, { loose: 0.1 })],
  ['loose with voids', grid(8, 6, { loose: 0.1, voids: [[2, 2], [5, 3]] })],
  ['cells', cells(60, 3)],
  ['cells, many', cells(200, 4)],
  ['triangles with one quad', triangulatedWithOneQuad],
])('%s', (_, of) => {
  const bases = panelBases(of)
  const unit = (i: number): Float64Array => Float64Array.from({ length: of.nodeCount }, (__, k) => (k === i ? 1 : 0))
  const rows = Array.from({ length: of.nodeCount }, (__, i) => Array.from(applyForm(of, bases, unit(i))))
  const spectrum = [...new EigenvalueDecomposition(new Matrix(rows), { assumeSymmetric: true }).realEigenvalues].sort((a, b) => a - b)
  const { space, gap, decided } = finish(freeRim(of))
  expect(spectrum.filter((value) => value < 1e-13)).toHaveLength(space.dimension)
  expect(decided).toBe(true)
  expect(gap! / Math.sqrt(spectrum[space.dimension]!)).toBeGreaterThan(0.999)
  expect(gap! / Math.sqrt(spectrum[space.dimension]!)).toBeLessThan(1.005)
})

// Lifts of a plan written to so many decimals have eigenvalues of their own, far above rounding: they are not the gap.
test.each([6, 7])('cells and quads written to %d decimals keep the gap of the exact plan', (decimals) => {
  for (const exact of [cells(60, 3), cells(300, 8), grid(9, 6, { loose: 0.1 })]) {
    const rounded = (value: number): number => Math.round(value * 10 ** decimals) / 10 ** decimals
    const panels = Array.from({ length: exact.panelCount }, (_, p) => [...exact.corner.slice(exact.panelStart[p], exact.panelStart[p + 1])])
    const written = plan(Array.from(exact.x, (x, node) => [rounded(x), rounded(exact.y[node]!)] as const), panels)
    const [first, second] = [finish(freeRim(exact)), finish(freeRim(written))]
    expect([second.freedom, second.decided]).toEqual([first.freedom, true])
    expect(second.gap! / first.gap!).toBeGreaterThan(0.99)
    expect(second.gap! / first.gap!).toBeLessThan(1.01)
  }
})
