/** Office drawings with more on them than the panels, for test/corpus/office: each for one way of telling the panels from the rest. */
import { random } from '../../src/base/random.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { at, dxfText, insert, line, polyline, type Content, type Written } from '../formats/dxf-writer.ts'
import type { Point } from '../plan/drawings.ts'
import { grid } from './plans.ts'
import { axes, columns, dimensions, furniture, hatch, levelText, middleText, moved, onLayer, scaled, section, titleBlock, walls } from './sheet.ts'
import { ways } from './spoilt.ts'

const bay = 1.5

/** Panels of m x n bays as a way draws them. */
export function panels(way: string, plan: Plan, layer = 'GLAZING', more: Written['pairs'] = []): Written[] {
  const found = ways.find(({ name }) => name === way)
  if (found === undefined) throw new Error(way)
  return onLayer(found.draw(plan, random(3)), layer, more)
}

const inMillimetres = (entities: readonly Written[], more: Partial<Content> = {}): string => dxfText({ units: 4, entities: scaled(entities, 1000), ...more })

const roof = (): Plan => grid(8, 4, { bay })

/** Everything that an office puts round the plan of a roof of 8 x 4 bays. */
export function around(): Written[] {
  return [
    ...axes(8, 4, bay), ...dimensions(8, bay, 0), ...walls(12, 6), ...columns(8, 4, bay), ...furniture(12, 6), ...hatch(12, 6.5),
    ...titleBlock(-5, -5, 24, 24), ...moved(section(12, 'SECTION'), 0, 14),
  ]
}

/** The rows of a plan's lines that run across, and the rest. */
function halves(entities: readonly Written[]): [Written[], Written[]] {
  const isAcross = ({ pairs = [] }: Written): boolean => {
    const value = (code: number): number => Number(pairs.find(([c]) => c === code)?.[1] ?? 0)
    return Math.abs(value(21) - value(20)) < Math.abs(value(11) - value(10))
  }
  return [entities.filter(isAcross), entities.filter((each) => !isAcross(each))]
}

/** A level at every corner of the rim and one beside the plan. */
function levels(): Written[] {
  const corners: readonly (readonly [Point, string])[] = [[[0, 0], '+112.350'], [[12, 0], '+112,35'], [[12, 6], '+112.500 m'], [[0, 6], '+112.50'], [[6, -2], '%%p0.00']]
  return corners.flatMap(([place, words]) => levelText(words, place))
}

/** A survey's point as a block with its number and level. */
const surveyBlock: Readonly<Record<string, readonly Written[]>> = {
  LEVELPOINT: [line([-0.05, 0], [0.05, 0]), line([0, -0.05], [0, 0.05])],
}

function surveyPoint(number: number, [x, y]: Point, level: string): Written[] {
  const attribute = (tag: string, value: string, dy: number): Written => ({ kind: 'ATTRIB', layer: 'SURVEY', pairs: [...at(10, x + 0.1, y + dy), [40, 0.12], [1, value], [2, tag]] })
  return [insert('LEVELPOINT', x, y, [[66, 1]], 'SURVEY'), attribute('NUMBER', String(number), 0.1), attribute('LEVEL', level, -0.2), { kind: 'SEQEND', layer: 'SURVEY' }]
}

/** Lines lifted to a height. */
const atHeight = (entities: readonly Written[], z: number): Written[] => entities.map((each) => ({ ...each, pairs: [...(each.pairs ?? []).filter(([code]) => code !== 30 && code !== 31), [30, z], [31, z]] }))

/** Text by file name. */
export function sheetFiles(): ReadonlyMap<string, string> {
  const lines = panels('single lines', roof())
  const [across, up] = halves(lines)
  const rim = polyline([[0, 0], [12, 0], [12, 6], [0, 6]], true, 'RIM')
  const inRim = ({ pairs = [] }: Written): boolean => {
    const value = (code: number): number => Number(pairs.find(([c]) => c === code)?.[1] ?? 0)
    return [[10, 12, 11], [20, 6, 21]].some(([a, most, b]) => value(a!) === value(b!) && (value(a!) === 0 || value(a!) === most))
  }
  return new Map([
    ['sheet-whole.dxf', inMillimetres([...lines, ...around()])],
    ['sheet-double-lines.dxf', inMillimetres([...panels('double lines, trimmed', roof()), ...around()])],
    ['axes-one-layer.dxf', inMillimetres([...lines, ...axes(8, 4, bay, { layer: 'GLAZING', lineType: 'CONTINUOUS' })])],
    ['joints-on-two-layers.dxf', inMillimetres([
      ...across.map((each) => ({ ...each, layer: 'PURLINS' })), ...up.map((each) => ({ ...each, layer: 'RAFTERS' })), ...furniture(12, 6), ...dimensions(8, bay, 0, { gap: 0 }),
    ])],
    ['rim-on-its-layer.dxf', inMillimetres([...lines.filter((each) => !inRim(each)), rim, ...walls(12, 6)])],
    ['section-beside.dxf', inMillimetres([...lines, ...moved(section(12, 'GLAZING'), 0, 12), ...titleBlock(-5, -5, 24, 24, 'GLAZING')])],
    ['storeys-beside.dxf', inMillimetres([...lines, ...moved(lines, 16, 0)])],
    ['storeys-above.dxf', inMillimetres([...lines.map((each) => ({ ...each, layer: 'LEVEL 1' })), ...moved(panels('single lines', grid(6, 5, { bay: 1.4 }), 'LEVEL 2'), 0.3, 0.4)])],
    ['storeys-one-layer.dxf', inMillimetres([...atHeight(lines, 3.6), ...atHeight(moved(panels('single lines', grid(6, 5, { bay: 1.4 })), 0.3, 0.4), 7.2)])],
    ['one-layer.dxf', inMillimetres([
      ...onLayer({ lines: lines.map(segmentOf) }, '0', [[62, 5]]), ...onLayer({ lines: furniture(12, 6).filter(({ kind }) => kind === 'LINE').map(segmentOf), outlines: boxes() }, '0', [[62, 3], [6, 'DASHED']]),
      polyline([[-0.2, -0.2], [12.2, -0.2], [12.2, 6.2], [-0.2, 6.2]], true, 'LIMIT'),
    ])],
    ['levels-in-words.dxf', inMillimetres([...lines, ...levels(), middleText('ROOF PLAN', [6, 8], 0.4, 'NOTES')])],
    ['levels-of-blocks.dxf', inMillimetres([
      ...lines, ...surveyPoint(11, [0, 0], '112.350'), ...surveyPoint(12, [12, 0], '112.350'), ...surveyPoint(13, [12, 6], '112.500'), ...surveyPoint(14, [0, 6], '112.500'),
    ], { blocks: { LEVELPOINT: scaled(surveyBlock.LEVELPOINT ?? [], 1000) } })],
    ['levels-of-points.dxf', inMillimetres([
      ...lines, ...([[0, 0, 3.2], [12, 0, 3.2], [12, 6, 3.4], [0, 6, 3.4], [6, 9, 3.1]] as const).map(([x, y, z]): Written => ({ kind: 'POINT', layer: 'SURVEY', pairs: at(10, x, y, z) })),
    ])],
  ])
}

const segmentOf = ({ pairs = [] }: Written): readonly [Point, Point] => {
  const value = (code: number): number => Number(pairs.find(([c]) => c === code)?.[1] ?? 0)
  return [[value(10), value(20)], [value(11), value(21)]]
}

/** Tables under the roof, across its joints. */
function boxes(): Point[][] {
  return [1.1, 4.2].flatMap((y) => [0.9, 5.2, 9.5].map((x): Point[] => [[x, y], [x + 1.6, y], [x + 1.6, y + 0.8], [x, y + 0.8]]))
}
