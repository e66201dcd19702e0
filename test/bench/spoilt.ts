/**
 * Clean plans spoilt by seed in every way of drawing with every fault, alone and two at a time: how many come back clean, how
 * many after the right question, and the rest. A row per way and fault in spoilt.csv; the first word is the number of plans
 * in a row (default 60).
 */
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { faults, spoiltOutcome, ways, type Outcome } from '../make/spoilt.ts'

const plans = Number(process.argv[2] ?? 60)
const outcomes: readonly Outcome[] = ['clean', 'clean once asked', 'asked', 'refused', 'wrong']
const rows = [['way', 'faults', 'plans', ...outcomes].join(',')]
const pairs = faults.slice(1).flatMap((one, k) => faults.slice(k + 2).map((other) => [one, other]))
for (const way of ways) {
  for (const list of [...faults.map((fault) => [fault]), ...pairs]) {
    // Pairs share the plans of a row among them: there are many.
    const count = list.length === 1 ? plans : Math.ceil(plans / 10)
    const found = new Map<Outcome, number>()
    for (let k = 0; k < count; k += 1) {
      const outcome = spoiltOutcome(way, list, k, 20_000 + k)
      found.set(outcome, (found.get(outcome) ?? 0) + 1)
    }
    rows.push([`"${way.name}"`, `"${list.map(({ name }) => name).join(' + ')}"`, count, ...outcomes.map((outcome) => found.get(outcome) ?? 0)].join(','))
  }
  process.stdout.write(`${way.name}\n`)
}
writeFileSync(join(process.env.BENCH_FOLDER ?? '.', 'spoilt.csv'), `${rows.join('\n')}\n`)
