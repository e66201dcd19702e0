/**
 * Places of conditions, found on a plan: nodes, panels and joints by name or point, runs, rims. What is not there is a
 * Problem that names it.
 */
import { pointInPolygon } from '../../base/geometry/point-in-polygon.ts'
import { pointWithin_mm } from '../../base/geometry/tolerance.ts'
import { conversion } from '../../base/length.ts'
import { fail, ok, type Problem, type Result } from '../../base/result.ts'
import { indexOfName, jointName, nodeName, panelName } from '../../plan/names.ts'
import type { Plan } from '../../plan/plan.ts'
import type { AtJoints, AtNodes, AtPanels, AtRim, AtRun, Point, Spot } from '../../plan/project/condition.ts'
import { nodesAlong, type Run } from './run.ts'
import type { Site } from './site.ts'

/** Nodes of the place, each once: named ones in the order given, runs along the run, rims loop by loop, panels ascending. */
export function nodesAt(site: Site, at: AtNodes | AtRun | AtRim | AtPanels): Result<Int32Array> {
  const { plan } = site
  if ('nodes' in at) return spots(at.nodes, (spot) => nodeAt(site, spot, at.within_mm ?? pointWithin_mm))
  if ('rim' in at) return rimNodes(plan, at.rim)
  if ('panels' in at) {
    const panels = panelsAt(plan, at)
    return panels.ok ? ok(nodesOfPanels(plan, panels.value)) : panels
  }
  const run = runAt(site, at)
  return run.ok ? ok(run.value.nodes) : run
}

/** Nodes in order with their distance along: those of a run, or named ones with the length of the line through them. */
export function runAt(site: Site, at: AtRun | AtNodes): Result<Run> {
  const { plan } = site
  if ('nodes' in at) {
    const nodes = nodesAt(site, at)
    return nodes.ok ? ok(lineThrough(plan, nodes.value)) : nodes
  }
  if (at.run.length < 2) return fail('short-run', 'a run needs two or more points')
  const path = new Float64Array(2 * at.run.length)
  for (const [i, spot] of at.run.entries()) {
    if (typeof spot === 'string') {
      const node = namedNode(plan, spot)
      if (!node.ok) return node
      path.set(plan.work.subarray(2 * node.value, 2 * node.value + 2), 2 * i)
    } else path.set(toWork(plan, spot), 2 * i)
  }
  const run = nodesAlong(plan, path)
  if (run.nodes.length > 0) return ok(run)
  const [first] = at.run
  return fail('empty-run', 'no node of the plan lies on this run', typeof first === 'string' ? { names: [first] } : { at: first },
    'give points of the plan, in its own coordinates')
}

function lineThrough(plan: Plan, nodes: Int32Array): Run {
  const along = new Float64Array(nodes.length)
  for (let i = 1; i < nodes.length; i += 1) {
    const [a, b] = [2 * nodes[i - 1], 2 * nodes[i]]
    along[i] = along[i - 1] + Math.hypot(plan.work[b] - plan.work[a], plan.work[b + 1] - plan.work[a + 1])
  }
  return { nodes, along, length: along[nodes.length - 1] ?? 0 }
}

export function panelsAt(plan: Plan, at: AtPanels): Result<Int32Array> {
  if (at.panels === 'all') return ok(Int32Array.from({ length: plan.panelCount }, (_, p) => p))
  return spots(at.panels, (spot) => panelAt(plan, spot))
}

export function jointsAt(plan: Plan, at: AtJoints): Result<Int32Array> {
  return spots(at.joints, (spot) => jointAt(plan, spot))
}

/** All corners of these panels, each once, ascending. */
export function nodesOfPanels(plan: Plan, panels: Iterable<number>): Int32Array {
  const taken = new Uint8Array(plan.nodeCount)
  let count = 0
  for (const p of panels) {
    for (let c = plan.panelStart[p]; c < plan.panelStart[p + 1]; c += 1) {
      if (taken[plan.corner[c]] === 1) continue
      taken[plan.corner[c]] = 1
      count += 1
    }
  }
  const nodes = new Int32Array(count)
  for (let n = 0, k = 0; n < plan.nodeCount; n += 1) if (taken[n] === 1) nodes[k++] = n
  return nodes
}

function spots(list: readonly Spot[], find: (spot: Spot) => Result<number>): Result<Int32Array> {
  const found = new Set<number>()
  for (const spot of list) {
    const index = find(spot)
    if (!index.ok) return index
    found.add(index.value)
  }
  return ok(Int32Array.from(found))
}

function toWork(plan: Plan, [x, y]: Point): Point {
  return [(x - plan.frame.centreX) / plan.frame.span, (y - plan.frame.centreY) / plan.frame.span]
}

function unknown(what: string, name: string, count: number, last: (i: number) => string): { ok: false; problem: Problem } {
  const range = count === 0 ? `the plan has no ${what}s` : `the plan has ${what}s ${last(0)} to ${last(count - 1)}`
  return fail(`no-such-${what}`, `there is no ${what} "${name}"`, { names: [name] }, range)
}

function namedNode(plan: Plan, name: string): Result<number> {
  const node = indexOfName(name, 'N')
  return node >= 0 && node < plan.nodeCount ? ok(node) : unknown('node', name, plan.nodeCount, nodeName)
}

function nodeAt({ plan, near }: Site, spot: Spot, within_mm: number): Result<number> {
  if (typeof spot === 'string') return namedNode(plan, spot)
  const [x, y] = toWork(plan, spot)
  const node = near(x, y, within_mm * conversion('mm', plan.unit) / plan.frame.span)
  if (node >= 0) return ok(node)
  const [nearest, distance] = nearestNode(plan, x, y)
  const mm = distance * plan.frame.span * conversion(plan.unit, 'mm')
  return fail('no-node-there', `no node lies within ${within_mm} mm of this point; the nearest, ${nodeName(nearest)}, is ${millimetres(mm)} away`,
    { at: spot })
}

function nearestNode(plan: Plan, x: number, y: number): readonly [node: number, distance: number] {
  let best = -1
  let least = Infinity
  for (let n = 0; n < plan.nodeCount; n += 1) {
    const distance = Math.hypot(plan.work[2 * n] - x, plan.work[2 * n + 1] - y)
    if (distance < least) {
      least = distance
      best = n
    }
  }
  return [best, least]
}

function millimetres(mm: number): string {
  return mm >= 10_000 ? `${(mm / 1000).toFixed(1)} m` : `${mm.toFixed(mm < 100 ? 1 : 0)} mm`
}

function panelAt(plan: Plan, spot: Spot): Result<number> {
  if (typeof spot === 'string') {
    const panel = indexOfName(spot, 'P')
    return panel >= 0 && panel < plan.panelCount ? ok(panel) : unknown('panel', spot, plan.panelCount, panelName)
  }
  const [x, y] = spot
  for (let p = 0; p < plan.panelCount; p += 1) {
    if (pointInPolygon(x, y, plan.x, plan.y, plan.corner, plan.panelStart[p], plan.panelStart[p + 1]) >= 0) return ok(p)
  }
  return fail('no-panel-there', 'no panel contains this point', { at: spot })
}

function jointAt(plan: Plan, spot: Spot): Result<number> {
  if (typeof spot === 'string') {
    const joint = indexOfName(spot, 'J')
    return joint >= 0 && joint < plan.jointCount ? ok(joint) : unknown('joint', spot, plan.jointCount, jointName)
  }
  const [x, y] = toWork(plan, spot)
  let best = -1
  let least = Infinity
  for (let j = 0; j < plan.jointCount; j += 1) {
    const a = 2 * plan.origin[2 * j]
    const b = 2 * plan.origin[2 * j + 1]
    const dx = plan.work[b] - plan.work[a]
    const dy = plan.work[b + 1] - plan.work[a + 1]
    const t = Math.min(1, Math.max(0, ((x - plan.work[a]) * dx + (y - plan.work[a + 1]) * dy) / (dx * dx + dy * dy)))
    const distance = Math.hypot(plan.work[a] + t * dx - x, plan.work[a + 1] + t * dy - y)
    if (distance < least) {
      least = distance
      best = j
    }
  }
  if (best >= 0 && least * plan.frame.span * conversion(plan.unit, 'mm') <= pointWithin_mm) return ok(best)
  return fail('no-joint-there', `no joint lies within ${pointWithin_mm} mm of this point`, { at: spot })
}

function rimNodes(plan: Plan, rim: 'outer' | Point): Result<Int32Array> {
  const loops: number[] = []
  const ends = plan.rimStart.length - 1
  if (rim === 'outer') {
    for (let l = 0; l < ends; l += 1) if (plan.rimIsVoid[l] === 0) loops.push(l)
  } else {
    const [x, y] = rim
    const round = Int32Array.from(plan.rimHalf, (half) => plan.origin[half])
    for (let l = 0; l < ends && loops.length === 0; l += 1) {
      if (plan.rimIsVoid[l] === 1 && pointInPolygon(x, y, plan.x, plan.y, round, plan.rimStart[l], plan.rimStart[l + 1]) >= 0) loops.push(l)
    }
    if (loops.length === 0) return fail('no-void-there', 'no void contains this point', { at: rim })
  }
  const found = new Set<number>()
  for (const l of loops) {
    for (let i = plan.rimStart[l]; i < plan.rimStart[l + 1]; i += 1) found.add(plan.origin[plan.rimHalf[i]])
  }
  return ok(Int32Array.from(found))
}
