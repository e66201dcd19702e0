/**
 * Counts at size: freedom and frozen joints of cells (1 + 3 tilts), of shaken quads (columns + rows + 1 with the tilts), and of
 * both with panels of 1 : 1000, against what theory says; rows in counts.csv. No times: the same code gives the same file.
 *
 *   node test/bench/run.mjs counts [panels ...] [--keep]
 */
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { finish } from '../../src/base/steps.ts'
import { planFromFaces } from '../../src/plan/subdivision.ts'
import { freeRim } from '../../src/roof/stress/free-rim.ts'
import type { TestPlan } from '../base/sparse/plans.ts'
import { gradedCells, gradedQuads, quadLifts } from '../make/graded.ts'
import { benchPlan } from './solver-plans.ts'

const words = process.argv.slice(2)
const sizes = words.filter((word) => /^\d+$/.test(word)).map(Number)
const rows = ['plan,panels,lifts,lifts_expected,freedom,frozen_joints,gap,decided']
for (const panels of sizes.length > 0 ? sizes : [1000, 10_000, 100_000]) {
  const side = Math.round(Math.sqrt(panels))
  const plans: readonly (readonly [string, TestPlan, number])[] = [
    ['cells', benchPlan('cells', panels), 4], ['quads', benchPlan('quads', panels), quadLifts(side, side)],
    ['cells 1:1000', gradedCells(side), 4], ['quads 1:1000', gradedQuads(side, side), quadLifts(side, side)],
  ]
  for (const [name, { coordinates, start, index }, expected] of plans) {
    const coordinate = (axis: number): Float64Array => Float64Array.from({ length: coordinates.length / 2 }, (_, i) => coordinates[2 * i + axis]!)
    const made = planFromFaces({ unit: 'm', x: coordinate(0), y: coordinate(1), start, corner: index })
    if (!made.ok) {
      // Graded cells of 100,000 have joints below the digits of their own coordinates.
      rows.push(`${name},${start.length - 1},,${expected},,,,no subdivision: ${made.problem.code}`)
      continue
    }
    const { space, freedom, frozen, gap, decided } = finish(freeRim(made.value.plan))
    rows.push([name, start.length - 1, space.dimension, expected, freedom, frozen.reduce((sum, value) => sum + value, 0), gap?.toExponential(2) ?? '', decided].join(','))
    process.stdout.write(`${rows.at(-1)}\n`)
  }
}
if (words.includes('--keep')) writeFileSync(join(process.env['BENCH_FOLDER'] ?? '.', 'counts.csv'), `${rows.join('\n')}\n`)
