/**
 * Where exact lifts and near lifts sit under conditions: eigenvalues of T^T Q T relative to T^T T, found from the inertia of
 * T^T (Q - t I) T at many shifts t. A row per plan and set of conditions goes to counting-rule.csv.
 *
 *   exact_top     the largest |eigenvalue| among the lifts: the shifts beyond which the count is right
 *   near_lowest   the smallest eigenvalue that is no lift: the shift up to which the count is right
 *   residual      RMS |N^T z| / RMS z of a random lift
 *
 * Seeded throughout; times are left out, so that the same code gives the same file.
 */
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { gaussians, random } from '../../src/base/random.ts'
import { factor } from '../../src/base/sparse/factor.ts'
import { inertia } from '../../src/base/sparse/inertia.ts'
import { finish } from '../../src/base/steps.ts'
import type { Plan } from '../../src/plan/plan.ts'
import type { Condition, Point } from '../../src/plan/project/condition.ts'
import { conditionRows } from '../../src/roof/conditions/condition-rows.ts'
import { eliminate } from '../../src/roof/conditions/eliminate.ts'
import { rowCount, type Rows } from '../../src/roof/conditions/rows.ts'
import { liftSpace, projected, weightedForm, type LiftSpace } from '../../src/roof/stress/lift-space.ts'
import { panelBases, squaredResidual } from '../../src/roof/stress/panel-bases.ts'
import { flatnessRows, rank } from '../make/dense.ts'
import { cells, grid, honeycomb } from '../make/plans.ts'

type Kind = 'cells' | 'loose quads' | 'square quads' | 'hexagons'
const kinds: readonly Kind[] = ['cells', 'loose quads', 'square quads', 'hexagons']
const sizes = [100, 1000, 5000, 20000] as const

/** One size more for the conditions that leave the lowest near lifts, on the plans that have them. */
const largest = {
  panels: 100_000,
  kinds: ['cells', 'loose quads'] as readonly Kind[],
  conditions: ['sides equal', 'long sides level', 'thirty joints flush', 'a tenth at 10 degrees'],
}

/** Above this many nodes the dense road takes too long. */
const denseNodes = 400

function planOf(kind: Kind, panels: number): Plan {
  const rows = Math.round(Math.sqrt(panels / 1.5))
  const columns = Math.round(panels / rows)
  switch (kind) {
    case 'cells':
      return cells(panels, 7)
    case 'loose quads':
      return grid(columns, rows, { loose: 0.2, seed: 7 })
    case 'square quads':
      return grid(columns, rows)
    case 'hexagons':
      return honeycomb(columns, rows)
  }
}

/** Conditions by name; where values are asked they are those of a tilt, so that none clash. */
function conditionsOf(plan: Plan): Record<string, readonly Condition[]> {
  const { x, y } = plan
  const [left, right, bottom, top] = [...range(x), ...range(y)] as [number, number, number, number]
  const [width, depth] = [right - left, top - bottom]
  const bay = Math.sqrt((width * depth) / plan.panelCount)
  const rim = [...plan.rimPasses.keys()].filter((node) => plan.rimPasses[node]! > 0)
  const named = (nodes: readonly number[]): string[] => nodes.map((node) => `N${node + 1}`)
  const rimWhere = (test: (px: number, py: number) => boolean): number[] => rim.filter((node) => test(x[node]!, y[node]!))
  const level = (name: string, nodes: readonly number[], height = 0): Condition => ({
    kind: 'level',
    name,
    soft: null,
    at: { nodes: named(nodes) },
    level: height,
  })
  const equal = (name: string, nodes: readonly number[]): Condition => ({ kind: 'equal', name, soft: null, at: { nodes: named(nodes) } })
  const straight = (name: string, from: Point, to: Point): Condition => ({ kind: 'straight', name, soft: null, at: { run: [from, to] } })
  const middle = Array.from({ length: plan.panelCount }, (_, p): Point => {
    const nodes = [...plan.corner.slice(plan.panelStart[p], plan.panelStart[p + 1])]
    return [nodes.reduce((sum, n) => sum + x[n]!, 0) / nodes.length, nodes.reduce((sum, n) => sum + y[n]!, 0) / nodes.length]
  })
  const panelsWhere = (test: (px: number, py: number) => boolean): string[] =>
    [...middle.keys()].filter((p) => test(...(middle[p]! as [number, number]))).map((p) => `P${p + 1}`)
  const within = (cx: number, cy: number, radius: number): string[] => panelsWhere((px, py) => Math.hypot(px - cx, py - cy) < radius)
  const coplanar = (name: string, panels: readonly string[]): Condition => ({ kind: 'coplanar', name, soft: null, at: { panels } })
  const south = rimWhere((_, py) => py < bottom + 0.6 * bay),
    north = rimWhere((_, py) => py > top - 0.6 * bay)
  const west = rimWhere((px) => px < left + 0.6 * bay),
    east = rimWhere((px) => px > right - 0.6 * bay)
  const next = random(3)
  const patches = Array.from({ length: 20 }, (_, k) =>
    coplanar(`patch ${k}`, within(left + width * next(), bottom + depth * next(), 1.5 * bay)),
  ).filter(({ at }) => 'panels' in at && at.panels.length > 1)
  const joints = [...new Set(Array.from({ length: 30 }, () => `J${Math.floor(next() * plan.jointCount) + 1}`))]
  const sides: Condition[] = [
    straight('south straight', [left, bottom], [right, bottom]),
    straight('north straight', [left, top], [right, top]),
    straight('west straight', [left, bottom], [left, top]),
    straight('east straight', [right, bottom], [right, top]),
  ]
  return {
    'nothing held': [],
    'long sides level': [level('south', south), level('north', north)],
    'half the rim level': [
      level(
        'west half',
        rimWhere((px) => px < left + width / 2),
      ),
    ],
    'whole rim level': [level('rim', rim)],
    'sides equal': [
      equal('south', south),
      equal(
        'north',
        north.filter((n) => !south.includes(n)),
      ),
    ],
    'ends equal': [equal('west', west), equal('east', east)],
    'sides straight': sides,
    'gutter falls': [
      {
        kind: 'fall',
        name: 'south gutter',
        soft: null,
        at: {
          run: [
            [left, bottom],
            [right, bottom],
          ],
        },
        per_mille: 10,
        level: null,
      },
    ],
    'disc of a tenth coplanar': [
      coplanar('disc', within(left + width / 2, bottom + depth / 2, Math.sqrt((0.1 * width * depth) / Math.PI))),
    ],
    'half coplanar': [
      coplanar(
        'half',
        panelsWhere((px) => px < left + width / 2),
      ),
    ],
    'thin band coplanar': [
      coplanar(
        'band',
        panelsWhere((_, py) => Math.abs(py - bottom - depth / 2) < 0.6 * bay),
      ),
    ],
    'twenty patches coplanar': patches,
    'thirty joints flush': [{ kind: 'flush', name: 'flush', soft: null, at: { joints } }],
    'a tenth at 10 degrees': [
      {
        kind: 'plane',
        name: 'pitch',
        soft: null,
        at: { panels: panelsWhere((px) => px < left + width / 10 + bay) },
        pitch_deg: 10,
        bearing_deg: 180,
      },
    ],
    mixed: [...sides, ...patches.slice(0, 8), equal('ends', [west[0]!, east[0]!, north[0]!])],
  }
}

const columns = [
  'plan',
  'panels',
  'nodes',
  'conditions',
  'rows',
  'unknowns',
  'largest_weight',
  'count_1e-15',
  'count_1e-14',
  'count_1e-13',
  'count_1e-12',
  'count_1e-11',
  'dense',
  'exact_top',
  'near_lowest',
  'residual',
]
function measured(kind: Kind, plan: Plan, name: string, hard: Rows): string {
  const bases = panelBases(plan)
  const { elimination, clashes } = eliminate(hard, plan.nodeCount, [])
  if (clashes.length > 0) throw new Error(`${name}: the conditions clash`)
  const space = finish(liftSpace(plan, bases, elimination))
  const count = counter(space)
  const right = count(1e-13)
  const unknowns = elimination.free.length
  const probe = projected(space, gaussians(plan.nodeCount, 5))
  const size = Math.sqrt(probe.reduce((sum, h) => sum + h * h, 0) / probe.length)
  const flat = Math.sqrt(squaredResidual(plan, bases, probe) / Math.max(1, plan.corner.length - 3 * plan.panelCount))
  return [
    kind,
    plan.panelCount,
    plan.nodeCount,
    name,
    rowCount(hard),
    unknowns,
    elimination.weight.reduce((most, w) => Math.max(most, Math.abs(w)), 0).toPrecision(3),
    count(1e-15),
    count(1e-14),
    right,
    count(1e-12),
    count(1e-11),
    plan.nodeCount <= denseNodes ? dense(plan, hard) : '',
    right === 0 ? '' : exactTop(count, right).toExponential(1),
    right === unknowns ? '' : nearLowest(count, right).toExponential(1),
    right === 0 ? '' : (flat / size).toExponential(1),
  ].join()
}

/** The least and the greatest value. */
function range(values: Float64Array): [number, number] {
  return values.reduce<[number, number]>(([low, high], value) => [Math.min(low, value), Math.max(high, value)], [Infinity, -Infinity])
}

/** How many eigenvalues of (T^T Q T, T^T T) lie below a shift. */
function counter({ plan, elimination, form, analysis }: LiftSpace): (shift: number) => number {
  return (shift) => {
    const { negative, zero } = inertia(finish(factor(analysis, weightedForm(plan, elimination, form, null, -shift, 1))))
    return negative + zero
  }
}

/** Decades to which the places are found. */
const decades = 0.1

/** The largest |eigenvalue| of the `right` lowest: above it on both sides the count is right. */
function exactTop(count: (shift: number) => number, right: number): number {
  return bisected(-19, -13, (power) => count(10 ** power) >= right && count(-(10 ** power)) === 0)
}

/** The lowest eigenvalue after the `right` lowest. */
function nearLowest(count: (shift: number) => number, right: number): number {
  return bisected(-13, 1, (power) => count(10 ** power) > right)
}

/** 10 to the power at which the test becomes true for good. */
function bisected(low: number, high: number, test: (power: number) => boolean): number {
  let [from, to] = [low, high]
  if (test(from)) return 10 ** from
  while (to - from > decades) {
    const power = (from + to) / 2
    if (test(power)) to = power
    else from = power
  }
  return 10 ** to
}

function dense(plan: Plan, hard: Rows): number {
  const held = Array.from({ length: rowCount(hard) }, (_, r) => {
    const row = new Array<number>(plan.nodeCount).fill(0)
    for (let k = hard.start[r]!; k < hard.start[r + 1]!; k += 1) row[hard.node[k]!]! += hard.weight[k]!
    return row
  })
  return plan.nodeCount - rank([...flatnessRows(plan), ...held], plan.nodeCount)
}

const lines = [columns.join()]
const [mostPanels] = process.argv.slice(2).map(Number)

for (const kind of kinds) {
  for (const panels of [...sizes, ...(largest.kinds.includes(kind) ? [largest.panels] : [])]) {
    if (mostPanels !== undefined && panels > mostPanels) continue
    const plan = planOf(kind, panels)
    for (const [name, conditions] of Object.entries(conditionsOf(plan))) {
      if (panels === largest.panels && !largest.conditions.includes(name)) continue
      const rows = conditionRows(plan, conditions, 0)
      // A zigzag side has no straight run of three nodes.
      if (!rows.ok) continue
      const line = measured(kind, plan, name, rows.value.hard)
      lines.push(line)
      process.stdout.write(`${line}\n`)
    }
  }
}
writeFileSync(join(process.env.BENCH_FOLDER ?? '.', 'counting-rule.csv'), lines.map((line) => `${line}\r\n`).join(''))
