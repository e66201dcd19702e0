/**
 * Large drawings, and such as are no plan at all, in bounded work: what grows as the square of the lines does not come to
 * an end here. How long they take is measured by the benches, not by tests.
 */
import { describe, expect, test } from 'vitest'
import { random } from '../../../src/base/random.ts'
import { finish } from '../../../src/base/steps.ts'
import type { Drawing } from '../../../src/plan/drawing.ts'
import { planFromDrawing } from '../../../src/plan/reading/from-drawing.ts'
import type { ReadPlan } from '../../../src/plan/read-plan.ts'
import { drawing, plainly, problemOf, throughLines, type Point, type Segment } from '../drawings.ts'

function plan(input: Drawing): ReadPlan {
  const result = finish(planFromDrawing(input, plainly))
  if (!result.ok) throw new Error(result.problem.message)
  return result.value
}

/** m x n quads that share their points, as mesh files have them, moved by up to a fifth of a bay. */
function mesh(m: number, n: number): Drawing {
  const next = random(1)
  const points: number[] = []
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) points.push(5e6 + i + 0.2 * next(), 4e6 + j + 0.2 * next(), 0)
  const corner: number[] = []
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      const a = j * (m + 1) + i
      corner.push(a, a + 1, a + m + 2, a + m + 1)
    }
  }
  const empty = drawing({})
  const loops = { start: Int32Array.from({ length: m * n + 1 }, (_, f) => 4 * f), point: Int32Array.from(corner), layer: new Int32Array(m * n), line: new Int32Array(m * n) }
  return { ...empty, format: 'OBJ', points: Float64Array.from(points), hasHeight: new Uint8Array(points.length / 3), outlines: loops }
}

/** The same as lines, each once with ends of its own. */
function lines({ points, outlines }: Drawing, noise: number): Segment[] {
  const next = random(2)
  const at = (c: number): Point => [points[3 * c]! + noise * (next() - 0.5), points[3 * c + 1]! + noise * (next() - 0.5)]
  const seen = new Set<number>()
  const out: Segment[] = []
  for (let i = 0; i + 1 < outlines.start.length; i += 1) {
    for (let k = 0; k < 4; k += 1) {
      const p = outlines.point[4 * i + k]!, q = outlines.point[4 * i + ((k + 1) % 4)]!
      const key = Math.min(p, q) * 1e6 + Math.max(p, q)
      if (!seen.has(key)) out.push([at(p), at(q)])
      seen.add(key)
    }
  }
  return out
}

describe('100,000 panels', () => {
  const input = mesh(316, 316)

  test('as faces that share their points', () => {
    plan(mesh(60, 60))
    const { plan: made, repairs } = plan(input)
    expect([made.panelCount, made.nodeCount, made.jointCount]).toEqual([316 ** 2, 317 ** 2, 2 * 316 * 315])
    expect(repairs).toEqual([])
  })

  test('as 200,000 lines whose ends miss, with a stray line at the origin', () => {
    const segments = lines(input, 5e-4)
    const { plan: made, repairs } = plan(drawing({ lines: [...segments, [[0, 0], [1, 1]]] }))
    expect(segments).toHaveLength(2 * 316 * 317)
    expect([made.panelCount, made.nodeCount]).toEqual([316 ** 2, 317 ** 2])
    expect(repairs.map(({ code }) => code)).toEqual(['joined', 'loose-end'])
  })

  test('as lines that cross', () => {
    const { plan: made } = plan(drawing({ lines: throughLines(316, 316) }))
    expect([made.panelCount, made.nodeCount]).toEqual([316 ** 2, 317 ** 2])
  })

  test('as one outline a panel with a perimeter round them', () => {
    const quads = Array.from({ length: 100 * 100 }, (_, f) => {
      const [i, j] = [f % 100, Math.floor(f / 100)]
      return [[i, j], [i + 1, j], [i + 1, j + 1], [i, j + 1]] as Point[]
    })
    const made = plan(drawing({ outlines: [[[0, 0], [100, 0], [100, 100], [0, 100]], ...quads] }))
    expect(made.plan.panelCount).toBe(10_000)
  })
})

describe('what is no plan is refused with little work', () => {
  const refused = (segments: Segment[]): string => {
    const memory = process.memoryUsage().rss
    const code = problemOf({ lines: segments })
    expect(process.memoryUsage().rss - memory).toBeLessThan(1e9)
    return code
  }

  test('a million crossings', () => {
    const next = random(7)
    expect(refused(Array.from({ length: 3000 }, () => [[100 * next(), 0], [100 * next(), 100]]))).toBe('too-many-crossings')
    expect(refused(throughLines(1000, 1000))).toBe('too-many-crossings')
  })

  test('thousands of lines over each other', () => {
    const next = random(8)
    expect(refused(Array.from({ length: 20_000 }, () => [[100 * next(), 0], [100 * next(), 0]]))).toBe('too-many-lines')
  })

  test('a hatch of 20,000 parallel lines, and a star of 5,000 from nearly one point', () => {
    const next = random(9)
    expect(refused(Array.from({ length: 20_000 }, (_, k) => [[0, 0.01 * k], [400, 0.01 * k + 5]]))).toBe('no-panels')
    expect(refused(Array.from({ length: 5_000 }, (_, k) => {
      const turn = (2 * Math.PI * k) / 5_000
      return [[5e-4 * next(), 5e-4 * next()], [50 * Math.cos(turn), 50 * Math.sin(turn)]] as Segment
    }))).toBe('no-panels')
  })
})
