import { expect, test } from 'vitest'
import { bin, cellsSpanned, densityGrid, pointsByCell, segmentsByCell } from '../../../src/base/geometry/grid-index.ts'
import { NearPoints } from '../../../src/base/geometry/near-points.ts'
import { random } from '../../../src/base/random.ts'

test('the nearest of the points within reach is found, as by comparing with all, seed 5', () => {
  const next = random(5)
  for (const spread of [1, 1000, 1e9]) {
    const reach = 0.02 * spread
    const near = new NearPoints(reach, 4)
    const points: [number, number][] = []
    let hits = 0
    for (let k = 0; k < 1500; k += 1) {
      const p: [number, number] = [spread * next() - spread / 2, spread * next()]
      let best = -1
      points.forEach((q, i) => {
        const d = (q[0] - p[0]) ** 2 + (q[1] - p[1]) ** 2
        if (d <= reach ** 2 && (best < 0 || d < (points[best]![0] - p[0]) ** 2 + (points[best]![1] - p[1]) ** 2)) best = i
      })
      expect(near.nearest(...p)).toBe(best)
      if (best >= 0) hits += 1
      points.push(p)
      expect(near.add(...p)).toBe(k)
    }
    expect(hits).toBeGreaterThan(300)
  }
})

test('a point exactly at the reach counts, one beyond does not', () => {
  const near = new NearPoints(0.5)
  near.add(0, 0)
  expect([near.nearest(0.5, 0), near.nearest(-0.5, 0), near.nearest(0, 0.5000001), near.nearest(0.3, 0, 0.2)]).toEqual([0, 0, -1, -1])
})

test('a segment is listed in the cell of every point that it comes near, seeds 1 to 30', () => {
  for (let seed = 1; seed <= 30; seed += 1) {
    const next = random(seed)
    const n = 60
    // Every third cloud has a stray far away, every other one many equal coordinates.
    const round = (v: number): number => (seed % 2 === 0 ? Math.round(4 * v) / 4 : v)
    const x = Float64Array.from({ length: n }, (_, i) => (seed % 3 === 0 && i === 0 ? -1e6 : round(10 * next())))
    const y = Float64Array.from({ length: n }, () => round(6 * next()))
    const a = Int32Array.from({ length: n }, (_, i) => i)
    const b = Int32Array.from({ length: n }, (_, i) => (i + 1 + Math.floor(5 * next())) % n)
    const pad = seed % 5 === 0 ? 0.8 : 1e-3
    const grid = densityGrid(x, y, n, 12)
    const cells = segmentsByCell(grid, x, y, a, b, pad)
    let listed = 0
    for (let e = 0; e < n; e += 1) {
      for (let k = 0; k < 60; k += 1) {
        const t = next(), turn = 2 * Math.PI * next(), off = pad * next() * 0.999
        const px = x[a[e]!]! + t * (x[b[e]!]! - x[a[e]!]!) + off * Math.cos(turn)
        const py = y[a[e]!]! + t * (y[b[e]!]! - y[a[e]!]!) + off * Math.sin(turn)
        const cell = bin(grid.rowBorder, py) * grid.columns + bin(grid.columnBorder, px)
        if (cells.item.subarray(cells.start[cell]!, cells.start[cell + 1]!).includes(e)) listed += 1
      }
    }
    expect(listed).toBe(60 * n)
    // An index that lists everything everywhere would pass the above.
    expect(cells.item.length).toBeLessThan(0.55 * n * grid.columns * grid.rows)
    expect(cellsSpanned(grid, x, y, a, b)).toBeGreaterThan(n)
  }
})

test('a stray far away does not put everything into one cell', () => {
  const next = random(9)
  const n = 4000
  const x = Float64Array.from({ length: n }, (_, i) => (i === 0 ? 0 : 5e6 + 100 * next()))
  const y = Float64Array.from({ length: n }, (_, i) => (i === 0 ? 0 : 5e6 + 100 * next()))
  const { start } = pointsByCell(densityGrid(x, y, n, 60), x, y, n)
  let most = 0
  for (let c = 0; c + 1 < start.length; c += 1) most = Math.max(most, start[c + 1]! - start[c]!)
  expect(start.length).toBeGreaterThan(3000)
  expect(most).toBeLessThan(20)
})

test('all points at one place are one cell', () => {
  const grid = densityGrid(new Float64Array(50), new Float64Array(50), 50, 8)
  expect([grid.columns, grid.rows]).toEqual([1, 1])
})
