/**
 * Roofs that are known to the last digit from their definitions, asked of the whole job and measured on the files it writes
 * by the second reader. Source of every value: exact, worked out by hand from the definition, unless another stands beside it.
 */
import { beforeAll, describe, expect, test } from 'vitest'
import type { Checked } from '../../src/job/check.ts'
import { ask, objText, written } from '../make/ask.ts'
import { flatnessRows, rank } from '../make/dense.ts'
import { hipGrid, type Placed } from '../make/hip-grid.ts'
import { grid } from '../make/plans.ts'
import { level, raise } from '../make/raise.ts'
import { columnOf, flatness, readCsv, readObj, type ReadObj } from './second-reader.ts'

const degrees = 180 / Math.PI
const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0)

/** Points and faces of m x n square bays. */
function bays(m: number, n: number, bay: number): string {
  const points: [number, number][] = []
  const faces: number[][] = []
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) points.push([i * bay, j * bay])
  for (let j = 0; j < n; j += 1) for (let i = 0; i < m; i += 1) faces.push([0, 1, m + 2, m + 1].map((k) => k + j * (m + 1) + i))
  return objText(points, faces)
}

interface Handed {
  readonly checked: Checked
  readonly obj: ReadObj
  readonly numbers: (file: string, column: string) => number[]
}

async function handed(text: string, brief: object): Promise<Handed> {
  const checked = await ask({ text, brief })
  const files = await written(checked)
  const numbers = (file: string, column: string): number[] => columnOf(readCsv(files[file]!), column).map(Number)
  return { checked, obj: readObj(files['roof.obj']!), numbers }
}

describe('barrel by profile: 18 x 12 m in bays of 1.5 m, section an arc of chord 12 and rise 2.4', () => {
  let roof: Handed
  beforeAll(async () => {
    roof = await handed(bays(12, 8, 1.5), {
      unit: 'm',
      conditions: [
        {
          name: 'south side',
          kind: 'level',
          at: {
            run: [
              [0, 0],
              [18, 0],
            ],
          },
          level: 0,
        },
        {
          name: 'north side',
          kind: 'level',
          at: {
            run: [
              [0, 12],
              [18, 12],
            ],
          },
          level: 0,
        },
        {
          name: 'west gable',
          kind: 'profile',
          at: {
            run: [
              [0, 0],
              [0, 12],
            ],
          },
          section: { arc: { rise: 2.4 } },
        },
      ],
    })
  })
  test('it is the only roof: freedom left 0, and lifts in part since the joints up the slope stay unfolded', () => {
    const { stress, held, verdict, plan } = roof.checked.answer.summary
    expect([stress.freedom, stress.freedomLeft, plan.panels]).toEqual([18, 0, 96])
    // Joints along the barrel fold (7 lines of 12); those across it (11 lines of 8) lie in its strips.
    expect([verdict, held.frozenJoints, held.flatGroups]).toEqual(['lifts in part', 88, 8])
  })
  test('heights 0, 1.146, 1.866, 2.270, 2.400; radius 8.700', () => {
    const radius = (6 ** 2 + 2.4 ** 2) / (2 * 2.4)
    expect(radius).toBeCloseTo(8.7, 12)
    for (const [x, y, z] of roof.obj.nodes) {
      expect(Math.abs(z - (Math.sqrt(radius ** 2 - (y - 6) ** 2) - radius + 2.4))).toBeLessThanOrEqual(0.5e-6 + 1e-12)
      expect(x).toBeCloseTo(1.5 * Math.round(x / 1.5), 12)
    }
    const section = [0, 1.5, 3, 4.5, 6].map((at) => roof.obj.nodes.find(([x, y]) => x === 0 && y === at)![2])
    section.forEach((z, k) => expect(z).toBeCloseTo([0, 1.146, 1.866, 2.27, 2.4][k]!, 3))
  })
  test('true panel widths 1887.6, 1664.1, 1553.3, 1505.6 mm, four types of 24; slopes 37.4, 25.7, 15.0, 4.96', () => {
    const widths = roof.numbers('panels.csv', 'area_m2').map((area) => (1000 * area) / 1.5)
    const slopes = roof.numbers('panels.csv', 'slope_deg')
    const types = [
      [1887.6, 37.4, 1],
      [1664.1, 25.7, 1],
      [1553.3, 15, 1],
      [1505.6, 4.96, 2],
    ] as const
    for (const [width, slope, digits] of types) {
      const same = [...widths.keys()].filter((panel) => Math.abs(widths[panel]! - width) < 0.05)
      expect(same).toHaveLength(24)
      for (const panel of same) expect(slopes[panel]!).toBeCloseTo(slope, digits)
    }
  })
  test('folds 11.7, 10.6, 10.1, 9.9 along the barrel; every other joint flat', () => {
    const folds = roof.numbers('joints.csv', 'fold_deg')
    const counts = [11.7, 10.6, 10.1, 9.9].map((fold) => folds.filter((value) => Math.abs(value - fold) < 0.05).length)
    expect(counts).toEqual([24, 24, 24, 12])
    expect(folds.filter((fold) => Math.abs(fold) < 1e-3)).toHaveLength(88)
  })
  test('glass 237.98 m2; vertical gable 19.45 m2; flat as written to the rounding of a micrometre', () => {
    expect(sum(roof.numbers('panels.csv', 'area_m2'))).toBeCloseTo(237.98, 2)
    const gable = roof.obj.nodes.filter(([x]) => x === 0).sort((a, b) => a[1] - b[1])
    expect(sum(gable.slice(1).map((p, k) => ((p[2] + gable[k]![2]) / 2) * (p[1] - gable[k]![1])))).toBeCloseTo(19.45, 2)
    expect(flatness(roof.obj).zone).toBeLessThan(1e-6)
  })
})

describe('hipped roof: 18 x 12 m at 20 degrees, hips and ridge as joints', () => {
  const text = objText(
    [
      [0, 0],
      [18, 0],
      [18, 12],
      [0, 12],
      [6, 6],
      [12, 6],
    ],
    [
      [0, 1, 5, 4],
      [1, 2, 5],
      [2, 3, 4, 5],
      [3, 0, 4],
    ],
  )
  let roof: Handed
  beforeAll(async () => {
    roof = await handed(text, {
      unit: 'm',
      shape: 'hipped',
      rise: 6 * Math.tan(20 / degrees),
      conditions: [{ name: 'eaves', kind: 'level', at: { rim: 'outer' }, level: 0 }],
    })
  })
  test('one roof but for its rise; the ridge is level at +2.184 m', () => {
    const { stress, verdict, roof: facts } = roof.checked.answer.summary
    expect([stress.freedomLeft, verdict]).toEqual([1, 'lifts'])
    const ridge = roof.obj.nodes.filter(([, y]) => y === 6).map(([, , z]) => z)
    expect(ridge).toHaveLength(2)
    expect(ridge[0]).toBe(ridge[1])
    expect(ridge[0]).toBeCloseTo(2.184, 3)
    expect(facts!.rise).toBeCloseTo(6 * Math.tan(20 / degrees), 6)
  })
  test('hip slope 14.43, dihedral 152.01 at the hips and 140 at the ridge, all panels at 20 degrees', () => {
    const dihedral = roof.numbers('joints.csv', 'dihedral_deg').sort((a, b) => a - b)
    expect(dihedral).toHaveLength(5)
    expect(dihedral[0]).toBeCloseTo(140, 3)
    for (const angle of dihedral.slice(1)) expect(angle).toBeCloseTo(152.01, 2)
    for (const slope of roof.numbers('panels.csv', 'slope_deg')) expect(slope).toBeCloseTo(20, 3)
    // The hip runs 6 m along each eave: its plan length is 6 sqrt 2.
    const top = roof.obj.nodes.find(([, y]) => y === 6)![2]
    expect(Math.atan2(top, 6 * Math.SQRT2) * degrees).toBeCloseTo(14.43, 2)
  })
  test('area 229.86 m2; catchments 72, 72, 36, 36 m2', () => {
    expect(sum(roof.numbers('panels.csv', 'area_m2'))).toBeCloseTo(229.86, 2)
    expect(
      roof
        .numbers('panels.csv', 'plan_area_m2')
        .sort((a, b) => b - a)
        .map((area) => Number(area.toFixed(3))),
    ).toEqual([72, 72, 36, 36])
  })
})

describe('12 x 8 quads of 1.5 m under conditions', () => {
  test('rim free 18, rim level 0: two edges on the level rim make a panel level, and so on through the grid', async () => {
    const text = bays(12, 8, 1.5)
    const free = (await ask({ text })).answer.summary
    expect([free.stress.freedom, free.stress.freedomLeft, free.verdict]).toEqual([18, 21, 'lifts'])
    const held = (await ask({ text, options: { rim: 'level' } })).answer.summary
    expect([held.stress.freedom, held.stress.freedomLeft, held.held.flatGroups, held.reasonKind]).toEqual([18, 0, 1, 'propagation'])
    // As the rule is stated: the four corner panels begin, all 96 follow.
    expect(held.reason).toMatch(/^P1, P12, P85 and P96 .*all 96 panels level$/)
  })
  test.each([0, 3, -7.77, 112.35])('the whole rim at level %d: the same plane at another level, and no joint folds', async (at) => {
    const { stress, held, verdict, reason } = (await ask({ text: bays(12, 8, 1.5), options: { rim: { level: at } } })).answer.summary
    expect([stress.freedomLeft, held.frozenJoints, held.flatGroups, verdict]).toEqual([0, 172, 1, 'does not lift'])
    expect(reason).toMatch(/all 96 panels level$/)
  })
  test.each([
    ['dome', false],
    ['pitched', false],
    ['barrel', true],
  ] as const)('nothing held, a datum of 1.5 and a rise of 0.7: a %s stands on the datum (hangs: %s)', async (shape, down) => {
    const { answer } = await ask({ text: bays(12, 8, 1.5), options: { datum: 1.5, rise: 0.7, shape, down } })
    const { plan, roof, summary } = answer
    const rim = [...roof!.written].filter((_, node) => plan.rimPasses[node]! > 0)
    expect(summary.roof!.rise).toBeCloseTo(0.7, 6)
    expect(down ? Math.max(...rim) : Math.min(...rim)).toBeCloseTo(1.5, 6)
    expect(down ? 1.5 - Math.min(...roof!.written) : Math.max(...roof!.written) - 1.5).toBeCloseTo(0.7, 6)
  })
  test('both long sides at level 0: 7 (every lift is f(x) + g(y), f constant, g zero at both ends)', () => {
    const { under, verdict } = raise(grid(12, 8, { bay: 1.5 }), {
      conditions: [
        level('south', {
          run: [
            [0, 0],
            [18, 0],
          ],
        }),
        level('north', {
          run: [
            [0, 12],
            [18, 12],
          ],
        }),
      ],
    })
    expect([under.freedomLeft, verdict]).toEqual([7, 'lifts in part'])
  })

  /** Freedom with a free rim, freedom left with the rim level, and the latter by the dense road. */
  const counts = (rings: number, place?: Placed): [number, number | null, number] => {
    const of = hipGrid(rings, place)
    const { free, under } = raise(of, { conditions: [level('rim', { rim: 'outer' })] })
    const held = [...of.rimPasses.keys()]
      .filter((node) => of.rimPasses[node]! > 0)
      .map((node) => {
        const row = new Array<number>(of.nodeCount).fill(0)
        row[node] = 1
        return row
      })
    return [free.freedom, under.freedomLeft, of.nodeCount - rank([...flatnessRows(of), ...held], of.nodeCount)]
  }
  test.each([
    [1, 22],
    [2, 26],
    [3, 30],
    [4, 34],
  ])('diagonals along the hips, %d at each corner: free rim %d, and so many ways left', (rings, free) => {
    expect(counts(rings)).toEqual([free, rings, rings])
  })

  // Each row of panels along a side shares one plane through its level eave; the inner node of a corner panel is the same
  // height in both rows: with slopes a (south, east, north, west) and the node's distances d from both eaves a_s d_s = a_w d_w
  // and so on round: one way is left exactly when the product of the four ratios is 1, and none otherwise.
  const bay = 1.5
  const wave = (k: number): number => 0.3 * Math.sin(2 * k + 1)
  const parallel: [string, Placed][] = [
    ['oblong bays', (i, j) => [1.2 * i, 2 * j]],
    ['sheared (an affine change of the plan keeps every lift)', (i, j) => [bay * i + 0.4 * j, bay * j]],
    ['uneven bays', (i, j) => [bay * i + wave(i), bay * j + wave(j + 5)]],
    ['tapered one way: the ratios still cancel in pairs', (i, j) => [bay * i, bay * j * (1 + 0.02 * i)]],
  ]
  test.each(parallel)('%s: as many ways left as on square bays', (_, place) => {
    expect([counts(1, place), counts(3, place)]).toEqual([
      [22, 1, 1],
      [30, 3, 3],
    ])
  })
  const inside = (i: number, j: number): number => (i > 0 && i < 12 && j > 0 && j < 8 ? 0.1 : 0)
  const skewed: [string, Placed][] = [
    ['tapered both ways', (i, j) => [bay * i * (1 + 0.03 * j), bay * j * (1 + 0.02 * i)]],
    [
      'straight rim, nodes inside moved by up to 0.1 m',
      (i, j) => [bay * i + inside(i, j) * Math.sin(7 * i + 3 * j), bay * j + inside(i, j) * Math.sin(5 * i - 2 * j)],
    ],
  ]
  test.each(skewed)('%s: the same diagonals leave nothing', (_, place) => {
    expect([1, 2, 3, 4].map((rings) => counts(rings, place))).toEqual([
      [22, 0, 0],
      [26, 0, 0],
      [30, 0, 0],
      [34, 0, 0],
    ])
  })
})
