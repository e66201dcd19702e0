import { readFileSync, readdirSync } from 'node:fs'
import { DxfWriter, Units, point2d, point3d } from '@tarikjabiri/dxf'
import DxfParser, { type IEntity, type ILineEntity, type ILwpolylineEntity } from 'dxf-parser'
import { describe, expect, test } from 'vitest'
import type { Drawing } from '../../src/plan/drawing.ts'
import { drawingOf, outlinesOf, pointAt, segmentsOf, type Point } from './text-read.ts'

const folder = 'test/corpus/dxf'
const file = (name: string): Buffer => readFileSync(`${folder}/${name}`)
const read = (name: string, options = {}): Drawing => drawingOf(file(name), name, options)

// Outside values: the counts that the writers of the files put in (see the README of the folder).
describe('files that other programs wrote', () => {
  test.each([
    ['cells-lines.dxf', 'mm', 0, 73, [{ kind: 'TEXT', layer: 'TEXT', count: 24 }]],
    ['cells-polylines.dxf', 'cm', 24, 0, []],
    ['cells-faults.dxf', null, 0, 85, []],
    ['crossing-lines.dxf', 'mm', 0, 9, []],
    ['ring-blocks.dxf', 'm', 24, 0, []],
    ['surface-polyface.dxf', 'm', 30, 0, []],
  ] as const)('%s', (name, unit, outlines, segments, leftOut) => {
    const drawing = read(name)
    expect([drawing.unit, drawing.outlines.layer.length, drawing.segmentLayer.length]).toEqual([unit, outlines, segments])
    expect(drawing.leftOut).toEqual(leftOut)
    expect(drawing.repairs).toEqual([])
  })

  // The block is a sector of 30 degrees from radius 4 to 7 (see the file), placed twelve times about (500000, 4000000).
  test('ring-blocks.dxf stands at its survey coordinates: all corners on three circles, every corner met twice or four times', () => {
    const drawing = read('ring-blocks.dxf')
    const spots = new Map<string, number>()
    for (const [x, y] of outlinesOf(drawing).flat()) {
      const radius = Math.hypot(x - 500000, y - 4000000)
      expect(Math.min(...[4, 5.5, 7].map((r) => Math.abs(r - radius)))).toBeLessThan(2e-9)
      const key = `${Math.round(1e6 * (x - 500000))} ${Math.round(1e6 * (y - 4000000))}`
      spots.set(key, (spots.get(key) ?? 0) + 1)
    }
    expect(spots.size).toBe(36)
    expect([...spots.values()].sort()).toEqual([...Array<number>(24).fill(2), ...Array<number>(12).fill(4)])
  })

  test('surface-polyface.dxf has a height everywhere, and shares its 42 points', () => {
    const drawing = read('surface-polyface.dxf')
    expect(drawing.points).toHaveLength(3 * 42)
    expect([...drawing.hasHeight]).toEqual(Array(42).fill(1))
    expect(pointAt(drawing, 0)).toEqual([0, 0, 0.6799999999999999])
  })

  test('curves.dxf: half a circle of radius 5 and a spline through its points, 5 mm', () => {
    const drawing = read('curves.dxf')
    expect(drawing.repairs.map(({ code, count }) => [code, count])).toEqual([['chords', 2]])
    expect(drawing.repairs[0]!.message).toContain('no curve leaves its chord by more than 5 mm')
    const arc = segmentsOf(drawing)
      .flat()
      .filter(([x, y]) => Math.abs(Math.hypot(x - 5, y) - 5) < 1e-12 && y >= 0)
    expect(arc.length).toBeGreaterThanOrEqual(2 * Math.ceil(Math.PI / (2 * Math.acos(1 - 0.001))))
  })
})

describe('releases 12 to 2018', () => {
  test.each(['r12', 'r2000', 'r2004', 'r2007', 'r2010', 'r2013', 'r2018'])('%s', (release) => {
    const drawing = read(`release-${release}.dxf`, { metresPerUnit: 0.001 })
    expect(drawing.unit).toBe(release === 'r12' ? null : 'mm')
    expect(drawing.layers).toEqual(['Träger 90°', 'Gläser'])
    expect(outlinesOf(drawing)[0]).toEqual([
      [0, 0, 0],
      [4000, 0, 0],
      [4000, 3000, 0],
      [0, 3000, 0],
    ])
    expect(segmentsOf(drawing).slice(0, 2)).toEqual([
      [
        [0, 0, 0],
        [4000, 0, 0],
      ],
      [
        [4000, 0, 0],
        [4000, 3000, 0],
      ],
    ])
    for (const [x, y] of outlinesOf(drawing)[1]!) expect(Math.hypot(x - 2000, y - 1500)).toBeCloseTo(500, 9)
    expect(drawing.leftOut).toEqual([{ kind: 'TEXT', layer: 'Notes', count: 1 }])
    expect(read(`release-${release}.dxf`, { layers: ['GLÄSER'] }).outlines.layer).toHaveLength(2)
  })
})

// Outside values: the ends of all lines after the library that wrote the file has exploded its blocks itself.
test('nested, mirrored, tilted and repeated blocks, as another program unfolds them', () => {
  const expected = (JSON.parse(file('expected.json').toString('utf8')) as Record<string, [Point, Point, string][]>)['blocks-nested.dxf']!
  const drawing = read('blocks-nested.dxf')
  const found = segmentsOf(drawing).map(([a, b], i) => ({ ends: [...a, ...b], layer: drawing.layers[drawing.segmentLayer[i]!]! }))
  expect(found).toHaveLength(expected.length)
  expect(found).toHaveLength(33)
  for (const [a, b, layer] of expected) {
    const ends = [...a, ...b]
    const at = found.findIndex((line) => line.layer === layer && line.ends.every((value, k) => Math.abs(value - ends[k]!) < 1e-12 * 200))
    if (at < 0) throw new Error(`no line ${ends.join(' ')} on layer ${layer}`)
    found.splice(at, 1)
  }
})

describe('meshes.dxf', () => {
  const drawing = read('meshes.dxf')
  const on = (layer: string): Point[][] => outlinesOf(drawing).filter((_, i) => drawing.layers[drawing.outlines.layer[i]!] === layer)
  const pentagon = [
    [0, 0, 0],
    [4, 0, 0.5],
    [4, 3, 1],
    [2, 5, 1.5],
    [0, 3, 1],
  ]

  test('MESH keeps faces of any number of corners', () => {
    expect(on('MESH')).toEqual([
      pentagon,
      [
        [4, 0, 0.5],
        [8, 0, 1],
        [8, 3, 1.5],
        [4, 3, 1],
      ],
    ])
  })

  test('polyface mesh', () => {
    const [a, b, c, d, e] = pentagon.map(([x, y, z]) => [x! + 20, y, z])
    expect(on('POLYFACE')).toEqual([
      [a, b, c, e],
      [c, d, e],
    ])
  })

  test('mesh of 4 x 3 vertices: 6 faces', () => {
    expect(on('SHEET')).toHaveLength(6)
    expect(on('SHEET')[0]).toEqual([
      [40, 0, 0],
      [41, 0, 0],
      [41, 1, 0.1],
      [40, 1, 0],
    ])
  })

  test('mesh of 3 x 8 vertices closed in its second direction: 16 faces, each corner of the middle ring in four', () => {
    expect(on('RING')).toHaveLength(16)
    expect(
      on('RING')
        .flat()
        .filter(([x, y]) => Math.abs(Math.hypot(x - 60, y) - 3) < 1e-9),
    ).toHaveLength(32)
  })

  test('3DFACEs with the edge between them hidden are one pentagon', () => {
    expect(on('FACES').map((corners) => corners.length)).toEqual([5, 4])
  })

  test('closed polyline in space, and a point', () => {
    expect(on('SPACE')).toEqual([
      [
        [90, 0, 1],
        [94, 0, 2],
        [94, 3, 3],
      ],
    ])
    expect(pointAt(drawing, drawing.marks[0]!)).toEqual([1, 2, 3])
  })
})

test('leftovers.dxf: all that is not taken is named, with its layer and count', () => {
  const drawing = read('leftovers.dxf')
  expect(outlinesOf(drawing)).toEqual([
    [
      [0, 0, 0],
      [2, 0, 0],
      [2, 2, 0],
      [0, 2, 0],
    ],
  ])
  expect(segmentsOf(drawing)).toEqual([
    [
      [10, 0, 0],
      [11, 0, 0],
    ],
  ])
  const said = Object.fromEntries(drawing.leftOut.map(({ kind, layer, count }) => [`${kind} on ${layer}`, count]))
  expect(said).toEqual({
    'LINE, layer frozen on Frozen': 3,
    'LINE, layer off on off': 2,
    'LINE, invisible on PLAN': 1,
    'TEXT on PLAN': 2,
    'MTEXT on 0': 1,
    'HATCH on 0': 1,
    'DIMENSION on 0': 1,
    'SOLID on 0': 1,
    'RAY on 0': 1,
    'XLINE on 0': 1,
    'LEADER on 0': 1,
    'ATTRIB on PLAN': 1,
    'ATTDEF on PLAN': 1,
    'ATTDEF, layer off on Off': 1,
    'INSERT, layer frozen on Frozen': 1,
    'INSERT, its block is not in the file on 0': 1,
    'LINE, paper space on 0': 1,
    'CIRCLE, paper space on 0': 1,
  })
})

// Twin road: another reader (dxf-parser, MIT) on the same files.
describe('the same lines and polylines as another reader finds', () => {
  test.each(readdirSync(folder).filter((name) => /^(cells|crossing|release)-.*\.dxf$/.test(name)))('%s', (name) => {
    const other = new DxfParser().parseSync(file(name).toString('latin1'))!.entities
    const drawing = read(name)
    const is =
      <T extends IEntity>(type: string) =>
      (entity: IEntity): entity is T =>
        entity.type === type
    const lines = other.filter(is<ILineEntity>('LINE')).map(({ vertices }) => vertices.slice(0, 2).map(({ x, y, z }) => [x, y, z]))
    expect(segmentsOf(drawing).slice(0, lines.length)).toEqual(lines)
    const closed = other
      .filter(is<ILwpolylineEntity>('LWPOLYLINE'))
      .filter(({ shape }) => shape)
      .map(({ vertices }) => vertices.map(({ x, y }) => [x, y, 0]))
    expect(outlinesOf(drawing).slice(0, closed.length)).toEqual(closed)
    expect(lines.length + closed.length).toBeGreaterThan(0)
  })
})

// An outside writer (@tarikjabiri/dxf, MIT): what went in comes out.
test('a file from another writer', () => {
  const writer = new DxfWriter()
  writer.setUnits(Units.Centimeters)
  writer.addLayer('Glass', 7, 'Continuous')
  writer.setCurrentLayerName('Glass')
  const outline = [
    [0, 0],
    [120.5, 0],
    [120.5, 80.25],
    [-3, 79.125],
  ]
  writer.addLWPolyline(
    outline.map(([x, y]) => ({ point: point2d(x!, y!) })),
    { flags: 1 },
  )
  writer.addLine(point3d(1, 2, 0), point3d(3, 4, 0))
  writer.add3dFace(point3d(0, 0, 1), point3d(1, 0, 2), point3d(1, 1, 3), point3d(0, 1, 4))
  writer.addCircle(point3d(10, 20, 0), 5)
  writer.addPolyline3D([{ point: point3d(0, 0, 1) }, { point: point3d(5, 0, 2) }, { point: point3d(5, 5, 3) }], { flags: 1 | 8 })
  const block = writer.addBlock('Post')
  block.addLine(point3d(0, 0, 0), point3d(0, 7, 0))
  writer.addInsert('Post', point3d(50, 60, 0), { rotationAngle: 90 })
  const drawing = drawingOf(writer.stringify(), 'written.dxf')
  expect(drawing.unit).toBe('cm')
  const outlines = outlinesOf(drawing)
  expect(outlines[0]).toEqual(outline.map(([x, y]) => [x, y, 0]))
  expect(outlines[1]).toEqual([
    [0, 0, 1],
    [1, 0, 2],
    [1, 1, 3],
    [0, 1, 4],
  ])
  for (const [x, y] of outlines[2]!) expect(Math.hypot(x - 10, y - 20)).toBeCloseTo(5, 12)
  expect(outlines[3]).toEqual([
    [0, 0, 1],
    [5, 0, 2],
    [5, 5, 3],
  ])
  expect(segmentsOf(drawing)).toEqual([
    [
      [1, 2, 0],
      [3, 4, 0],
    ],
    [
      [50, 60, 0],
      [43, 60, 0],
    ],
  ])
  expect(drawing.layers[drawing.outlines.layer[0]!]).toBe('Glass')
})
