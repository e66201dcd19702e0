/**
 * What all cures cost beside a plain check, from the drawing's bytes to the answer, in one process: both driven on the same plans,
 * interleaved, medians of processor seconds; rows are added to cures.csv. Each kind is timed alone too.
 *
 *   node test/bench/run.mjs cures [panels ..] [--runs 5] [--keep]
 */
import { spawnSync } from 'node:child_process'
import { appendFileSync, existsSync, writeFileSync } from 'node:fs'
import { cpus } from 'node:os'
import { join } from 'node:path'
import { finish } from '../../src/base/steps.ts'
import { check } from '../../src/job/check.ts'
import type { PlanQuestion } from '../../src/job/question.ts'
import { curesOf, curesOfKind } from '../../src/job/cures.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { emptyBrief } from '../../src/plan/project/brief.ts'
import { briefText } from '../../src/plan/project/brief-text.ts'
import type { Condition } from '../../src/plan/project/condition.ts'
import { cureCodes } from '../../src/plan/project/cure-weights.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import { jittered } from '../make/jittered.ts'
import { cells, grid } from '../make/plans.ts'

const head = 'date,commit,processor,plan,panels,check_s,cures_s,to_check,accept_deviation,move_nodes,pack_rim,add_diagonals,remove_joints,release,offered'

const words = process.argv.slice(2)
const flag = (name: string, otherwise: number): number => (words.includes(name) ? Number(words[words.indexOf(name) + 1]) : otherwise)
const runs = flag('--runs', 5)
const counts = words.filter((word, k) => /^\d+$/.test(word) && words[k - 1] !== '--runs').map(Number)
const file = join(process.env['BENCH_FOLDER'] ?? '.', 'cures.csv')

const level = (name: string, at: Extract<Condition, { kind: 'level' }>['at'], height: number): Condition => ({ name, soft: null, kind: 'level', at, level: height })

function cases(panels: number): readonly { name: string; plan: Plan; conditions: readonly Condition[] }[] {
  const columns = Math.round(Math.sqrt(panels * 1.25)), rows = Math.round(panels / columns)
  const square = grid(columns, rows, { bay: 1.5 })
  const [east, north] = [1.5 * columns, 1.5 * rows]
  return [
    { name: 'square bays, rim level', plan: square, conditions: [level('eaves', { rim: 'outer' }, 0)] },
    {
      name: 'square bays, four sides and a post', plan: square,
      conditions: [
        level('south', { run: [[0, 0], [east, 0]] }, 0), level('north', { run: [[0, north], [east, north]] }, 0),
        level('west', { run: [[0, 0], [0, north]] }, 0), level('east', { run: [[east, 0], [east, north]] }, 0.4),
        level('post', { nodes: [[1.5 * Math.floor(columns / 2), 1.5 * Math.floor(rows / 2)]] }, 2),
      ],
    },
    { name: 'bays moved by 5 %, rim level', plan: grid(columns, rows, { bay: 1.5, loose: 0.05 }), conditions: [level('eaves', { rim: 'outer' }, 0)] },
    { name: 'cells moved by 1 %', plan: jittered(cells(panels, 11), 0.01, 5).plan, conditions: [] },
  ]
}

function timed<T>(work: () => T): { seconds: number; value: T } {
  const before = process.cpuUsage()
  const value = work()
  const { user, system } = process.cpuUsage(before)
  return { seconds: (user + system) / 1e6, value }
}

const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN

if (words.includes('--keep') && !existsSync(file)) writeFileSync(file, `${head}\n`)
process.stdout.write(`${head}\n`)
const commit = spawnSync('git', ['rev-parse', '--short', 'HEAD'], { encoding: 'utf8' }).stdout.trim()
for (const panels of counts.length > 0 ? counts : [2000]) {
  for (const { name, plan, conditions } of cases(panels)) {
    const question: PlanQuestion = {
      request: { command: 'check', source: { name, bytes: new Uint8Array() }, options: noOptions, brief: null, levels: null, given: {} },
      version: '', sha256: '', brief: { ...emptyBrief, conditions }, target: null, free: null,
      read: { plan, heights: null, marks: { points: new Float64Array(), layer: new Int32Array(), layers: [] }, repairs: [], questions: [], leftOut: [], notices: [] },
    }
    const nodes = Array.from(plan.x, (x, n) => `v ${x} ${plan.y[n]} 0`)
    const faces = Array.from({ length: plan.panelCount }, (_, p) => `f ${Array.from(plan.corner.subarray(plan.panelStart[p], plan.panelStart[p + 1]), (n) => n + 1).join(' ')}`)
    const bytes = new TextEncoder().encode(`${nodes.join('\n')}\n${faces.join('\n')}\n`)
    const request = { ...question.request, source: { name: 'plan.obj', bytes }, brief: { name: 'brief.json', text: briefText({ ...emptyBrief, conditions }) } }
    const ask = () => {
      const made = finish(check(request, '', ''))
      if (!made.ok) throw new Error(made.problem.message)
      return made.value
    }
    const checks: number[] = [], all: number[] = []
    const kinds = cureCodes.map((): number[] => [])
    let offered = ''
    for (let run = 0; run < runs; run += 1) {
      const plain = timed(ask)
      checks.push(plain.seconds)
      const cures = timed(() => finish(curesOf(question, plain.value)))
      all.push(cures.seconds)
      if (cures.value.ok) offered = cures.value.value.cures.map(({ cure }) => `${cure.code} ${cure.count}`).join('; ')
      cureCodes.forEach((code, k) => kinds[k]!.push(timed(() => finish(curesOfKind(code, question, plain.value))).seconds))
    }
    const row = [
      new Date().toISOString().slice(0, 10), commit, cpus()[0]?.model.split(' ').slice(0, 2).join(' ') ?? '', `"${name}"`, plan.panelCount,
      median(checks).toFixed(3), median(all).toFixed(3), (median(all) / median(checks)).toFixed(1), ...kinds.map((list) => median(list).toFixed(3)), `"${offered}"`,
    ].join(',')
    process.stdout.write(`${row}\n`)
    if (words.includes('--keep')) appendFileSync(file, `${row}\n`)
  }
}
