/**
 * The samples: plans of Tern Yard, an invented market hall with a glazed roof, in several variants. Everything here is made
 * from numbers below and a seed, so the folder can be written again: node test/make/write-samples.mjs.
 */
import { random } from '../../src/base/random.ts'
import type { Options } from '../../src/plan/project/options.ts'
import type { Verdict } from '../../src/roof/answer/answer.ts'
import { dxfText, line, polyline } from '../formats/dxf-writer.ts'
import { hipPoints } from './hip-grid.ts'
import type { Points } from './plans.ts'
import { powerDiagram, type Site } from './power.ts'
import { withNodesOnSides } from './random-plans.ts'

export interface Sample {
  /** File name; the brief, if there is one, is called the same with `.brief.json` in the place of the extension. */
  readonly name: string
  /** null: the file is drawn by hand and only listed and checked here. */
  readonly text: string | null
  readonly brief: object | null
  readonly options: Partial<Options>
  /** The line in the folder's README. */
  readonly why: string
  readonly expected: Expected
}

export interface Expected {
  readonly verdict: Verdict
  readonly panels: number
  readonly voids: number
  readonly freedom: number
  readonly count: number
  readonly freedomLeft: number
  /** Joints that stay unfolded under the brief. */
  readonly frozen: number
  readonly reasonKind: 'propagation' | 'clash' | 'rank' | null
}

type Faces = readonly (readonly number[])[]

/** The hall: 18 by 12 m in bays of 1.5 m. */
const [width, depth, bay] = [18, 12, 1.5]
const [columns, rows] = [width / bay, depth / bay]

/** A coordinate with so many decimals at most, as drawings have them. */
const digits = (value: number, decimals: number): string => String(Number(value.toFixed(decimals)) + 0)

function obj(title: string, points: Points, faces: Faces, options: { decimals?: number; heights?: readonly number[] } = {}): string {
  const { decimals = 3, heights } = options
  const nodes = points.map(([x, y], k) => `v ${digits(x, decimals)} ${digits(y, decimals)} ${digits(heights?.[k] ?? 0, 3)}`)
  return [
    `# Tern Yard, ${title}. An invented building; metres.`,
    ...nodes,
    ...faces.map((face) => `f ${face.map((node) => node + 1).join(' ')}`),
    '',
  ].join('\n')
}

const brief = (wishes: object): object => ({ panewise: 'brief', version: 1, unit: 'm', ...wishes })
const levelAt = (name: string, from: readonly number[], to: readonly number[], height: number): object => ({
  name,
  kind: 'level',
  at: { run: [from, to] },
  level: height,
})
const eaves = (height: number): object[] => [
  levelAt('south eaves', [0, 0], [width, 0], height),
  levelAt('north eaves', [0, depth], [width, depth], height),
]
const levelRim = { name: 'eaves', kind: 'level', at: { rim: 'outer' }, level: 0 }

const square = hipPoints(columns, rows, 0, (i, j) => [bay * i, bay * j])
const hips = hipPoints(columns, rows, 4, (i, j) => [bay * i, bay * j])

/** Cells of 73 weighted sites in staggered rows; the shortest edge is 0.78 m. */
function cells(): { points: Points; faces: Faces } {
  const next = random(276)
  const [across, along] = [10, 7]
  const sites: Site[] = []
  for (let j = 0; j < along; j += 1) {
    for (let i = 0; i < across + (j % 2); i += 1) {
      const x = i + (j % 2 === 0 ? 0.5 : 0) + 0.22 * (next() - 0.5)
      const y = j + 0.5 + 0.22 * (next() - 0.5)
      sites.push({ x: (x * width) / across, y: (y * depth) / along, weight: 0.3 * next() })
    }
  }
  return powerDiagram(sites, width, depth)
}

/** Nodes inside moved by up to `most` metres either way: as a plan is that was drawn for its looks. */
function shifted(points: Points, most: number): Points {
  const next = random(5)
  const onRim = ([x, y]: readonly [number, number]): boolean => Math.min(x, y, width - x, depth - y) < 1e-6
  return points.map((p) => {
    const [dx, dy] = [2 * most * (next() - 0.5), 2 * most * (next() - 0.5)]
    return onRim(p) ? p : [p[0] + dx, p[1] + dy]
  })
}

/** Eight columns of square bays, then panels in staggered bond to the east gable. */
function bond(): { points: Points; faces: Faces } {
  const points: [number, number][] = []
  const node = (x: number, y: number): number => {
    const known = points.findIndex(([px, py]) => px === x && py === y)
    return known >= 0 ? known : points.push([x, y]) - 1
  }
  const loops: number[][] = []
  for (let j = 0; j < rows; j += 1) {
    const ends = j % 2 === 0 ? [12, 13.5, 15, 16.5, 18] : [12, 14.25, 15.75, 18]
    const stations = [...Array.from({ length: 8 }, (_, i) => i * bay), ...ends]
    for (let i = 0; i + 1 < stations.length; i += 1) {
      const [a, b, south, north] = [stations[i]!, stations[i + 1]!, j * bay, (j + 1) * bay]
      loops.push([node(a, south), node(b, south), node(b, north), node(a, north)])
    }
  }
  return { points, faces: loops.map((loop) => withNodesOnSides(loop, points)) }
}

/** A site that narrows from 12 m at the west gable to 9.6 m at the east, and a warped surface over it as target. */
function target(): string {
  const { points, faces } = hipPoints(columns, rows, 0, (i, j) => [bay * i, depth / 2 + (bay * j - depth / 2) * (1 - (0.2 * i) / columns)])
  const heights = points.map(([x, y]) => {
    const half = (depth / 2) * (1 - (0.2 * x) / width)
    return 3.2 + (1.1 + 1.3 * Math.sin((Math.PI * x) / width)) * (1 - ((y - depth / 2) / half) ** 2)
  })
  return obj('warped surface over a site that narrows', points, faces, { heights })
}

/** Bar lines of a hall of 24 by 18 m in bays of 2 m; the court in the middle is 8 by 6 m, and no bar crosses it. */
function court(): string {
  const [east, north, step] = [24, 18, 2]
  const [court0, court1] = [
    [8, 6],
    [16, 12],
  ] as const
  const bars = []
  for (let x = 0; x <= east; x += step) {
    if (x <= court0[0] || x >= court1[0]) bars.push(line([x, 0], [x, north], 'BARS'))
    else bars.push(line([x, 0], [x, court0[1]], 'BARS'), line([x, court1[1]], [x, north], 'BARS'))
  }
  for (let y = 0; y <= north; y += step) {
    if (y <= court0[1] || y >= court1[1]) bars.push(line([0, y], [east, y], 'BARS'))
    else bars.push(line([0, y], [court0[0], y], 'BARS'), line([court1[0], y], [east, y], 'BARS'))
  }
  return dxfText({ units: 6, layers: [{ name: 'BARS' }], entities: bars })
}

/**
 * The square bays as they come from a hurried hand: each bar bay by bay, ends off by up to 0.3 mm, some bars drawn twice, some
 * running 20 mm past the rim, and a loose line inside a panel.
 */
function hurried(): string {
  const next = random(7)
  const off = (): number => 0.0003 * (2 * next() - 1)
  const bars = []
  const bar = (a: readonly [number, number], b: readonly [number, number]): void => {
    const drawn = (): void => void bars.push(line([a[0] + off(), a[1] + off()], [b[0] + off(), b[1] + off()], 'BARS'))
    drawn()
    if (next() < 0.08) drawn()
  }
  const past = (): number => (next() < 0.2 ? 0.02 : 0)
  for (let j = 0; j <= rows; j += 1) {
    for (let i = 0; i < columns; i += 1) bar([i * bay - (i === 0 ? past() : 0), j * bay], [(i + 1) * bay + (i === columns - 1 ? past() : 0), j * bay])
  }
  for (let i = 0; i <= columns; i += 1) for (let j = 0; j < rows; j += 1) bar([i * bay, j * bay], [i * bay, (j + 1) * bay])
  bars.push(line([4.9, 4.8], [5.6, 5.5], 'BARS'))
  return dxfText({ units: 6, layers: [{ name: 'BARS' }], entities: bars })
}

/** The square bays as closed polylines in millimetres. */
function panelsInMillimetres(): string {
  const outlines = square.faces.map((face) =>
    polyline(
      face.map((node) => square.points[node]!.map((value) => 1000 * value)),
      true,
      'GLASS',
    ),
  )
  return dxfText({ units: 4, layers: [{ name: 'GLASS' }], entities: outlines })
}

const half = (test: (panel: number) => boolean): string[] => square.faces.flatMap((_, panel) => (test(panel) ? [`P${panel + 1}`] : []))

export function samples(): readonly Sample[] {
  const plain = cells()
  const staggered = bond()
  return [
    {
      name: 'tern-yard-bays.obj',
      brief: null,
      options: {},
      text: obj('hall of 12 by 8 square bays', square.points, square.faces),
      why: '96 square bays with the rim free: every joint can fold, and 18 adjustments are left to shape the roof with.',
      expected: { verdict: 'lifts', panels: 96, voids: 0, freedom: 18, count: 18, freedomLeft: 21, frozen: 0, reasonKind: null },
    },
    {
      name: 'tern-yard-cells.obj',
      brief: null,
      options: {},
      text: obj('roof of 73 cells', plain.points, plain.faces, { decimals: 6 }),
      why: '73 cells of a power diagram, written to the micrometre: it lifts in one way only, whose one figure is the rise.',
      expected: { verdict: 'lifts', panels: 73, voids: 0, freedom: 1, count: -42, freedomLeft: 4, frozen: 0, reasonKind: null },
    },
    {
      name: 'tern-yard-cells-mm.obj',
      brief: null,
      options: {},
      text: obj('roof of 73 cells', plain.points, plain.faces),
      why: 'The same cells to the millimetre: rounding takes the one lift away, and moves of less than a millimetre bring it back.',
      expected: {
        verdict: 'lifts within plan tolerance', panels: 73, voids: 0,
        freedom: 0, count: -42, freedomLeft: 3, frozen: 186, reasonKind: 'rank',
      },
    },
    {
      name: 'tern-yard-cells-near.obj',
      brief: null,
      options: {},
      text: obj('roof of 73 cells, nearly', shifted(plain.points, 0.015), plain.faces),
      why: 'The same cells with nodes moved by up to 15 mm: no exact roof, but the nearest keeps every panel within a millimetre.',
      expected: {
        verdict: 'lifts within tolerance', panels: 73, voids: 0,
        freedom: 0, count: -42, freedomLeft: 3, frozen: 186, reasonKind: 'rank',
      },
    },
    {
      name: 'tern-yard-cells-free-hand.obj',
      brief: null,
      options: {},
      text: obj('roof of 73 cells drawn by eye', shifted(plain.points, 0.1), plain.faces),
      why: 'The same cells with nodes moved by up to 100 mm: no joint can fold, and no roof near the dome is flat to a millimetre.',
      expected: { verdict: 'does not lift', panels: 73, voids: 0, freedom: 0, count: -42, freedomLeft: 3, frozen: 186, reasonKind: 'rank' },
    },
    {
      name: 'tern-yard-bond.obj',
      brief: null,
      options: {},
      text: obj('square bays and a staggered bond', staggered.points, staggered.faces),
      why: 'Square bays that end in a staggered bond: its short joints meet straight bars as Ts and stay unfolded.',
      expected: { verdict: 'lifts in part', panels: 92, voids: 0, freedom: 15, count: 0, freedomLeft: 18, frozen: 20, reasonKind: 'rank' },
    },
    {
      name: 'tern-yard-court.dxf',
      options: {},
      brief: brief({
        voids: [[12, 9]],
        datum: 3.6,
        rise: 2,
        conditions: [{ name: 'post heads', kind: 'level', at: { nodes: [[0, 0], [24, 0]] } }],
      }),
      text: court(),
      why: 'Bar lines in metres round a court of 8 by 6 m that the brief calls a void, with two corner posts at +3.600.',
      expected: { verdict: 'lifts', panels: 96, voids: 1, freedom: 25, count: 25, freedomLeft: 26, frozen: 0, reasonKind: null },
    },
    {
      name: 'tern-yard-hurried.dxf',
      options: {},
      brief: null,
      text: hurried(),
      why: 'The square bays drawn in a hurry: ends that miss, bars drawn twice or run past the rim, a loose line; every repair is counted and located.',
      expected: { verdict: 'lifts', panels: 96, voids: 0, freedom: 18, count: 18, freedomLeft: 21, frozen: 0, reasonKind: null },
    },
    {
      name: 'tern-yard-level-rim.obj',
      options: {},
      brief: brief({ conditions: [levelRim] }),
      text: obj('hall of 12 by 8 square bays on a level rim', square.points, square.faces),
      why: 'The square bays with all eaves at one level: the corner panels have two edges on the rim, and that makes every panel level.',
      expected: {
        verdict: 'does not lift', panels: 96, voids: 0,
        freedom: 18, count: 18, freedomLeft: 0, frozen: 172, reasonKind: 'propagation',
      },
    },
    {
      name: 'tern-yard-hips.obj',
      options: {},
      brief: brief({ shape: 'hipped', rise: 2.1, conditions: [levelRim] }),
      text: obj('hall with divided corners on a level rim', hips.points, hips.faces),
      why: 'The same with 16 diagonals that run inwards from the corners along the hips: four ways are left, one for each ring.',
      expected: { verdict: 'lifts in part', panels: 112, voids: 0, freedom: 34, count: 34, freedomLeft: 4, frozen: 96, reasonKind: 'rank' },
    },
    {
      name: 'tern-yard-target.obj',
      brief: null,
      options: {},
      text: target(),
      why: 'Bays on a site that narrows, drawn as a warped surface: its heights are the target to come near to.',
      expected: { verdict: 'lifts', panels: 96, voids: 0, freedom: 18, count: 18, freedomLeft: 21, frozen: 0, reasonKind: null },
    },
    {
      name: 'tern-yard-barrel.dxf',
      options: {},
      brief: brief({
        conditions: [
          ...eaves(0),
          { name: 'west gable', kind: 'profile', at: { run: [[0, 0], [0, depth]] }, section: { arc: { rise: 2.4 } } },
        ],
      }),
      text: panelsInMillimetres(),
      why: 'Panels in millimetres, a brief in metres: an arc of rise 2.4 m at one gable and two level eaves leave one roof.',
      expected: {
        verdict: 'lifts in part', panels: 96, voids: 0,
        freedom: 18, count: 18, freedomLeft: 0, frozen: 88, reasonKind: 'propagation',
      },
    },
    {
      name: 'tern-yard-pitched.obj',
      options: {},
      brief: brief({
        shape: 'pitched',
        rise: 2.4,
        conditions: [
          ...eaves(0),
          { name: 'south slope', kind: 'coplanar', at: { panels: half((panel) => panel < 48) } },
          { name: 'north slope', kind: 'coplanar', at: { panels: half((panel) => panel >= 48) } },
        ],
      }),
      text: obj('two slopes', square.points, square.faces),
      why: 'Each half of the bays in one plane from its level eaves: only the ridge folds, and its height is the one figure left.',
      expected: { verdict: 'lifts in part', panels: 96, voids: 0, freedom: 18, count: 18, freedomLeft: 1, frozen: 160, reasonKind: 'rank' },
    },
    {
      name: 'tern-yard-court.geojson',
      text: null,
      brief: null,
      options: {},
      why: 'A ring roof round a round court, from a site map in metres.',
      expected: { verdict: 'lifts', panels: 36, voids: 1, freedom: 15, count: 15, freedomLeft: 18, frozen: 0, reasonKind: null },
    },
    {
      name: 'tern-yard-hall.svg',
      text: null,
      brief: null,
      options: { scale: 100 },
      why: 'Glass strips of the nave as paths on paper, 1:100: read it with `--scale 1:100`.',
      expected: { verdict: 'lifts', panels: 52, voids: 0, freedom: 16, count: 16, freedomLeft: 19, frozen: 0, reasonKind: null },
    },
  ]
}

/** Name of the brief beside a sample. */
export const briefName = (name: string): string => name.replace(/\.[a-z]+$/, '.brief.json')

/** Every file of the folder that is made here, by name. */
export function sampleFiles(): ReadonlyMap<string, string> {
  const files = new Map<string, string>()
  for (const { name, text, brief: wishes } of samples()) {
    if (text !== null) files.set(name, text)
    if (wishes !== null) files.set(briefName(name), `${onFewLines(JSON.stringify(wishes, null, 2))}\n`)
  }
  files.set('README.md', readme())
  return files
}

/** Lists of numbers and of names on one line each. */
const onFewLines = (json: string): string =>
  json.replace(/\[[^[\]{}]*\]/g, (list) => list.replace(/\s+/g, ' ').replace(/^\[ | \]$/g, (end) => end.trim()))

function readme(): string {
  const line = ({ name, brief: wishes, why, expected }: Sample): string =>
    `| \`${name}\`${wishes === null ? '' : ' with its brief'} | ${expected.panels} | ${why} | ${expected.verdict} |`
  return [
    '# Samples',
    '',
    'Plans of Tern Yard, an invented market hall with a glazed roof, in several variants.',
    'Where conditions are needed they stand in `NAME.brief.json` beside the plan:',
    '',
    '    panewise check samples/tern-yard-barrel.dxf --brief samples/tern-yard-barrel.brief.json',
    '',
    '| plan | panels | why it is here | verdict |',
    '| --- | --- | --- | --- |',
    ...samples().map(line),
    '',
    'The files are made by `test/make/samples.ts` (`node test/make/write-samples.mjs` writes them again); the SVG and the',
    'GeoJSON plan are drawn by hand. `test/samples.test.ts` holds every line above. What it takes to make the others lift, with',
    'figures, stands in `cures.md`.',
    '',
  ].join('\n')
}
