/** Path data: commands against closed formulas, the grammar of SVG 2 section 9.3.9, and a second reader (svgpath, MIT). */
import svgpath from 'svgpath'
import { expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { finish } from '../../src/base/steps.ts'
import { drawnPath, type Pen } from '../../src/formats/svg-path.ts'
import { chain, drawn, outlines, refusal, type Point } from './svg-reading.ts'

/** What a pen is told, as lists of the command and its numbers. */
function told(data: string): (string | number)[][] {
  const out: (string | number)[][] = []
  const pen: Pen = {
    fault: null,
    move: (...v) => out.push(['M', ...v]),
    line: (...v) => out.push(['L', ...v]),
    quadratic: (...v) => out.push(['Q', ...v]),
    cubic: (...v) => out.push(['C', ...v]),
    arc: (rx, ry, turn, large, sweep, x, y) => out.push(['A', rx, ry, turn, large ? 1 : 0, sweep ? 1 : 0, x, y]),
    close: () => out.push(['Z']),
  }
  const fault = finish(drawnPath(data, pen))
  if (fault !== null) throw new Error(`${fault.character}: ${fault.message}`)
  return out
}

const faultOf = (data: string): string => {
  try {
    told(data)
  } catch (error) {
    return (error as Error).message
  }
  return 'none'
}

test('lines, absolute and relative; pairs after a move are lines; after Z the pen is back at the start', () => {
  // Exact: worked out by hand from the definition of each command.
  expect(told('M1 2 3 4 5 6')).toEqual([
    ['M', 1, 2],
    ['L', 3, 4],
    ['L', 5, 6],
  ])
  expect(told('m1 2 3 4 5 6')).toEqual([
    ['M', 1, 2],
    ['L', 4, 6],
    ['L', 9, 12],
  ])
  expect(told('M1 2H5V7h-2v-3')).toEqual([
    ['M', 1, 2],
    ['L', 5, 2],
    ['L', 5, 7],
    ['L', 3, 7],
    ['L', 3, 4],
  ])
  expect(told('M1 1h4v4zl1 1m2 2l1 0')).toEqual([['M', 1, 1], ['L', 5, 1], ['L', 5, 5], ['Z'], ['L', 2, 2], ['M', 4, 4], ['L', 5, 4]])
  expect(told('M0 0H1 2 3')).toEqual([
    ['M', 0, 0],
    ['L', 1, 0],
    ['L', 2, 0],
    ['L', 3, 0],
  ])
})

test('short curves reflect the last control point, only after a curve of the same degree', () => {
  expect(told('M0 0C1 2 3 4 5 6S9 9 10 10')[2]).toEqual(['C', 7, 8, 9, 9, 10, 10])
  expect(told('M0 0c1 2 3 4 5 6s4 3 5 4')[2]).toEqual(['C', 7, 8, 9, 9, 10, 10])
  expect(told('M1 1S2 3 4 5')[1]).toEqual(['C', 1, 1, 2, 3, 4, 5])
  expect(told('M0 0Q1 2 5 6T10 10')[2]).toEqual(['Q', 9, 10, 10, 10])
  expect(told('M0 0q1 2 5 6t5 4t1 0')[3]).toEqual(['Q', 11, 10, 11, 10])
  expect(told('M0 0Q1 2 5 6S8 8 9 9')[2]).toEqual(['C', 5, 6, 8, 8, 9, 9])
  expect(told('M0 0C1 2 3 4 5 6T9 9')[2]).toEqual(['Q', 5, 6, 9, 9])
})

test('numbers as the grammar allows them: signs and points part them, flags need no separator', () => {
  expect(told('M.5.5-3-.25')).toEqual([
    ['M', 0.5, 0.5],
    ['L', -3, -0.25],
  ])
  expect(told('M1e2,1E-1L+5+6')).toEqual([
    ['M', 100, 0.1],
    ['L', 5, 6],
  ])
  expect(told('M 0.6.5')).toEqual([['M', 0.6, 0.5]])
  expect(told('M1.,2.')).toEqual([['M', 1, 2]])
  expect(told('M0 0a25 25-30 0110 10')[1]).toEqual(['A', 25, 25, -30, 0, 1, 10, 10])
  expect(told('M0 0a25,25 0 0010,10 5 5 0 11.5.5')).toEqual([
    ['M', 0, 0],
    ['A', 25, 25, 0, 0, 0, 10, 10],
    ['A', 5, 5, 0, 1, 1, 10.5, 10.5],
  ])
  expect(told(' \n\tM\r1 , 2 L 3\n,4 z ')).toEqual([['M', 1, 2], ['L', 3, 4], ['Z']])
  expect(told('')).toEqual([])
  expect(told('none')).toEqual([])
})

test('what is no path data is refused at its character', () => {
  expect(faultOf('L1 1')).toBe('1: path data starts with M or m')
  expect(faultOf('1 1')).toBe('1: path data starts with M or m')
  expect(faultOf('M1 1L2')).toMatch(/^7: L needs 2 numbers, the data ends after 1/)
  expect(faultOf('M1 1L2 x')).toMatch(/^8: a number is expected in place of "x"/)
  expect(faultOf('M1 1B2 2')).toMatch(/^5: "B" is no path command/)
  expect(faultOf('M1 1a1 1 0 2 0 5 5')).toMatch(/^12: a flag of an arc is 0 or 1/)
  expect(faultOf('M1 1z5 5')).toMatch(/a command is expected after Z/)
  expect(faultOf('M1 1L2 2,')).toMatch(/a number is expected after the comma/)
  expect(faultOf('M1 1,L2 2')).toMatch(/a number is expected after the comma/)
  expect(faultOf('M1 1,,2 2')).toMatch(/a number is expected/)
  expect(faultOf('M1 1L1e999 2')).toMatch(/beyond the range/)
  expect(faultOf('M1 1L NaN 2')).toMatch(/a number is expected in place of "NaN"/)
})

/** Path data with every command, seeded, in the compact and in the spaced way of writing. */
function randomPath(seed: number): string {
  const next = random(seed)
  const number = (): string => {
    const value = (next() - 0.5) * 20
    return next() < 0.2 ? value.toExponential(3) : next() < 0.5 ? String(Math.round(value)) : value.toFixed(3).replace(/^(-?)0\./, '$1.')
  }
  const numbers = (count: number): string =>
    Array.from({ length: count }, number).reduce(
      (text, each) => text + (/^[-]/.test(each) && next() < 0.5 ? '' : next() < 0.5 ? ' ' : ' , ') + each,
    )
  const radius = (): number => Math.abs(Number(number())) + 0.1
  const flag = (): string => (next() < 0.5 ? '0' : '1')
  let out = `${next() < 0.5 ? 'M' : 'm'}${numbers(2)}`
  for (let i = 0; i < 12; i += 1) {
    const letter = 'MLHVCSQTAZ'[Math.floor(next() * 10)]!
    const rounds = 1 + Math.floor(next() * 2)
    const count = { M: 2, L: 2, H: 1, V: 1, C: 6, S: 4, Q: 4, T: 2, Z: 0 }[letter]
    out += next() < 0.5 ? letter : letter.toLowerCase()
    if (letter === 'A') {
      for (let k = 0; k < rounds; k += 1)
        out += ` ${radius()} ${radius()} ${number()} ${flag()}${flag()}${numbers(2)}`
    } else if (count! > 0) for (let k = 0; k < rounds; k += 1) out += `${k > 0 ? ' ' : ''}${numbers(count!)}`
  }
  return out
}

test('300 random paths, seed 1 to 300, are what a second reader makes of them', () => {
  let commands = 0
  for (let seed = 1; seed <= 300; seed += 1) {
    const data = randomPath(seed)
    const own = told(data)
    const other: (string | number)[][] = []
    svgpath(data)
      .abs()
      .unshort()
      .iterate((segment, _index, x, y) => {
        if (segment[0] === 'H') other.push(['L', segment[1], y])
        else if (segment[0] === 'V') other.push(['L', x, segment[1]])
        else other.push([...segment])
      })
    expect(own.map(([letter]) => letter).join(''), `seed ${seed}: ${data}`).toBe(other.map(([letter]) => letter).join(''))
    own.forEach((command, i) => {
      command.forEach((value, k) => {
        // Numbers below 30 added up at most 40 times in doubles.
        if (k > 0) expect(Math.abs((value as number) - (other[i]![k] as number)), `seed ${seed}: ${data}`).toBeLessThan(1e-11)
      })
    })
    commands += own.length
  }
  expect(commands).toBeGreaterThan(3000)
})

/** Samples of the cubics that svgpath makes of an arc; it states no error, the usual 90 degree cubic has 2.7e-4 of the radius. */
function cubicSamples(data: string): Point[] {
  const out: Point[] = []
  svgpath(data)
    .abs()
    .unarc()
    .iterate((segment, _index, x, y) => {
      if (segment[0] === 'L') out.push([segment[1], segment[2]])
      if (segment[0] !== 'C') return
      const [, x1, y1, x2, y2, x3, y3] = segment
      for (let i = 0; i <= 200; i += 1) {
        const t = i / 200
        const s = 1 - t
        out.push([
          s * s * s * x + 3 * s * s * t * x1 + 3 * s * t * t * x2 + t * t * t * x3,
          s * s * s * y + 3 * s * s * t * y1 + 3 * s * t * t * y2 + t * t * t * y3,
        ])
      }
    })
  return out
}

function distance([x, y]: Point, [[ax, ay], [bx, by]]: [Point, Point]): number {
  const [dx, dy] = [bx - ax, by - ay]
  const square = dx * dx + dy * dy
  const t = square === 0 ? 0 : Math.max(0, Math.min(1, ((x - ax) * dx + (y - ay) * dy) / square))
  return Math.hypot(x - ax - t * dx, y - ay - t * dy)
}

test('arcs of every flag and turn, also with radii too small, lie on what a second reader draws', () => {
  const next = random(7)
  for (let i = 0; i < 60; i += 1) {
    const [rx, ry] = [3 + 20 * next(), 3 + 20 * next()]
    const data = `M50 50A${rx} ${ry} ${360 * next()} ${i & 1} ${(i >> 1) & 1} ${50 + 30 * (next() - 0.5)} ${50 + 30 * (next() - 0.5)}`
    const ours: Point[] = chain(drawn(`<path d="${data}" fill="none" stroke="red"/>`, { sagitta: 1e-6 })).map(([x, y]) => [x, 100 - y])
    const pieces = ours.slice(1).map((point, k): [Point, Point] => [ours[k]!, point])
    // Their cubics leave the arc by 2.7e-4 R; R grows to half the chord where it was too small.
    const within = 4e-4 * Math.max(rx, ry, 25) + 0.001
    const theirs = cubicSamples(data)
    for (const point of theirs) expect(Math.min(...pieces.map((piece) => distance(point, piece))), data).toBeLessThan(within)
    const theirPieces = theirs.slice(1).map((point, k): [Point, Point] => [theirs[k]!, point])
    for (const point of ours.filter((_, k) => k % 7 === 0))
      expect(Math.min(...theirPieces.map((piece) => distance(point, piece))), data).toBeLessThan(within)
  }
})

test('an arc keeps its centre: points of the four flag pairs between (0, 0) and (8, 4), radius 5', () => {
  // Exact: circles of radius 5 through (0,0) and (8,4): half chord sqrt 20, so the centres are (4,2) -+ (1,-2).
  const centres: Record<string, Point> = { '0 0': [5, 0], '0 1': [3, 4], '1 0': [3, 4], '1 1': [5, 0] }
  for (const [flags, [cx, cy]] of Object.entries(centres)) {
    const points = chain(drawn(`<path d="M0 0A5 5 0 ${flags} 8 4" fill="none" stroke="red"/>`, { sagitta: 1e-6 }))
    for (const [x, y] of points) expect(Math.hypot(x - cx, 100 - y - cy), flags).toBeCloseTo(5, 12)
    const span = points.slice(1).reduce((sum, [x, y], i) => {
      const [u, v] = points[i]!
      return (
        sum +
        Math.abs(Math.atan2((u - cx) * (y - 100 + cy) - (v - 100 + cy) * (x - cx), (u - cx) * (x - cx) + (v - 100 + cy) * (y - 100 + cy)))
      )
    }, 0)
    // cos(span of the small arc) = 1 - chord^2 / (2 R^2) = 1 - 80 / 50
    const small = Math.acos(1 - 80 / 50)
    expect(span, flags).toBeCloseTo(flags.startsWith('0') ? small : 2 * Math.PI - small, 10)
  }
})

test('sense of an arc: sweep 1 turns clockwise on the screen (y down), so clockwise also with y up', () => {
  const [, first] = chain(drawn('<path d="M10 50A20 20 0 0 1 50 50" fill="none" stroke="red"/>', { sagitta: 1e-4 }))
  // From the left end of a half circle clockwise on the screen goes up the screen, which is up with y up.
  expect(first![1]).toBeGreaterThan(50)
})

test('degenerate arcs: a zero radius is a line, no distance is nothing, tiny radii reach the half circle', () => {
  expect(chain(drawn('<path d="M10 10A0 5 0 0 1 30 10" fill="none" stroke="red"/>'))).toEqual([
    [10, 90],
    [30, 90],
  ])
  expect(chain(drawn('<path d="M10 10A5 5 0 1 1 10 10L20 10" fill="none" stroke="red"/>'))).toEqual([
    [10, 90],
    [20, 90],
  ])
  const half = chain(drawn('<path d="M10 50A1 1 0 0 1 50 50" fill="none" stroke="red"/>', { sagitta: 1e-6 }))
  for (const [x, y] of half) expect(Math.hypot(x - 30, y - 50)).toBeCloseTo(20, 10)
})

test('a cubic is its Bernstein sum: the area under it by the exact integral', () => {
  const p: Point[] = [
    [0, 0],
    [0, 30],
    [40, 30],
    [40, 0],
  ]
  // Exact: the integral of y x' dt over products of Bernstein polynomials,
  // sum_ij 3 (p[i+1] - p[i]).x p[j].y C(2,i) C(3,j) / (6 C(5,i+j)).
  const choose = (n: number, k: number): number => (k === 0 ? 1 : (choose(n, k - 1) * (n - k + 1)) / k)
  let exact = 0
  for (let i = 0; i < 3; i += 1)
    for (let j = 0; j < 4; j += 1) exact += (3 * (p[i + 1]![0] - p[i]![0]) * p[j]![1] * choose(2, i) * choose(3, j)) / choose(5, i + j) / 6
  expect(exact).toBeCloseTo(720, 9)
  const sagitta = 1e-5
  const [loop] = outlines(drawn('<path d="M0 0C0 30 40 30 40 0z"/>', { sagitta }))
  const area = Math.abs(
    loop!.reduce((sum, [x, y], i) => sum + (x * loop![(i + 1) % loop!.length]![1] - loop![(i + 1) % loop!.length]![0] * y) / 2, 0),
  )
  // Chords cut off at most the sagitta (0.01 mm) along the curve (less than 100 mm).
  expect(Math.abs(area - exact)).toBeLessThan(0.01 * 100)
  expect(Math.abs(area - exact)).toBeGreaterThan(0)
})

test('a quadratic: y = x (40 - x) / 40 is the curve of (0,0) (20,20) (40,0)', () => {
  const points = chain(drawn('<path d="M0 0Q20 20 40 0" fill="none" stroke="red"/>', { sagitta: 1e-5 }))
  expect(points.length).toBeGreaterThan(20)
  for (const [x, y] of points) expect(100 - y).toBeCloseTo((x * (40 - x)) / 40, 11)
})

test('the same curve drawn backwards has the same points', () => {
  const forward = chain(drawn('<path d="M3 4C10 40 50 -20 70 30A20 30 25 0 1 90 60" fill="none" stroke="red"/>'))
  const back = chain(drawn('<path d="M90 60A20 30 25 0 0 70 30C50 -20 10 40 3 4" fill="none" stroke="red"/>')).reverse()
  expect(back.length).toBe(forward.length)
  forward.forEach(([x, y], i) => {
    expect(back[i]![0]).toBeCloseTo(x, 11)
    expect(back[i]![1]).toBeCloseTo(y, 11)
  })
})

test('a straight cubic stays one line, and no curve is counted', () => {
  const straight = drawn('<path d="M0 0C10 5 20 10 30 15" fill="none" stroke="red"/>')
  expect(chain(straight)).toEqual([
    [0, 100],
    [30, 85],
  ])
  expect(straight.repairs).toEqual([])
})

test('the sagitta holds in what is drawn: at 1:100 the chords are 100 times finer', () => {
  const circle = '<circle cx="50" cy="50" r="40"/>'
  // Exact: n chords of a circle leave it by r (1 - cos(pi / n)).
  const sagitta = (n: number): number => 40 * (1 - Math.cos(Math.PI / n))
  const coarse = outlines(drawn(circle, { sagitta: 0.005 }))[0]!.length
  const fine = outlines(drawn(circle, { sagitta: 0.005, metresPerUnit: 0.1 }))[0]!.length
  expect(sagitta(coarse)).toBeLessThanOrEqual(5)
  expect(sagitta(fine)).toBeLessThanOrEqual(0.05)
  expect(sagitta(fine - 4)).toBeGreaterThan(0.05)
  expect(fine).toBeGreaterThan(5 * coarse)
})

test('a fault in path data names line, element and character', () => {
  const problem = refusal('\n<rect width="9" height="9"/>\n<path id="p&lt;1" d="M0 0L5 q"/>')
  expect(problem.where).toEqual({ line: 3, entity: '<path> "p<1"' })
  expect(problem.message).toMatch(/^path data, character 8: a number is expected in place of "q"/)
})
