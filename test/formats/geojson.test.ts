/** GeoJSON: the examples of RFC 7946, what is taken as what, and the sentence for everything that is wrong. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { sentence } from '../../src/base/result.ts'
import { geojson } from '../../src/formats/geojson.ts'
import type { Drawing } from '../../src/plan/drawing.ts'
import { drawingOf, holes, outlines, problemOf, segments } from './svg-reading.ts'

const corpus = join(import.meta.dirname, '..', 'corpus', 'geojson')
const example = (name: string): Drawing => drawingOf(geojson, readFileSync(join(corpus, `rfc7946-${name}.geojson`), 'utf8'))
const marks = (drawing: Drawing): number[][] => Array.from(drawing.marks, (point) => [...drawing.points.slice(3 * point, 3 * point + 2)])
const polygon = (rings: unknown, more: object = {}): string => JSON.stringify({ type: 'Polygon', coordinates: rings, ...more })
const square = [
  [0, 0],
  [4, 0],
  [4, 4],
  [0, 4],
  [0, 0],
]

test('the examples of RFC 7946, section 1.5 and appendix A', () => {
  const whole = example('1.5-example')
  expect(marks(whole)).toEqual([[102, 0.5]])
  expect(segments(whole)).toEqual([
    [
      [102, 0],
      [103, 1],
    ],
    [
      [103, 1],
      [104, 0],
    ],
    [
      [104, 0],
      [105, 1],
    ],
  ])
  expect(outlines(whole)).toEqual([
    [
      [100, 0],
      [101, 0],
      [101, 1],
      [100, 1],
    ],
  ])
  expect([whole.format, whole.unit, whole.onPaper, whole.layers, whole.leftOut, whole.repairs]).toEqual([
    'GeoJSON',
    null,
    false,
    [''],
    [],
    [],
  ])
  expect(marks(example('a1-point'))).toEqual([[100, 0]])
  expect(segments(example('a2-linestring'))).toEqual([
    [
      [100, 0],
      [101, 1],
    ],
  ])
  expect(outlines(example('a3-polygon-no-holes'))).toEqual([
    [
      [100, 0],
      [101, 0],
      [101, 1],
      [100, 1],
    ],
  ])
  const holed = example('a3-polygon-with-holes')
  expect(outlines(holed)).toEqual([
    [
      [100, 0],
      [101, 0],
      [101, 1],
      [100, 1],
    ],
  ])
  expect(holes(holed)).toEqual([
    [
      [100.8, 0.8],
      [100.8, 0.2],
      [100.2, 0.2],
      [100.2, 0.8],
    ],
  ])
  expect(marks(example('a4-multipoint'))).toEqual([
    [100, 0],
    [101, 1],
  ])
  expect(segments(example('a5-multilinestring'))).toEqual([
    [
      [100, 0],
      [101, 1],
    ],
    [
      [102, 2],
      [103, 3],
    ],
  ])
  const several = example('a6-multipolygon')
  expect(outlines(several)).toEqual([
    [
      [102, 2],
      [103, 2],
      [103, 3],
      [102, 3],
    ],
    [
      [100, 0],
      [101, 0],
      [101, 1],
      [100, 1],
    ],
  ])
  expect(holes(several)).toEqual([
    [
      [100.2, 0.2],
      [100.2, 0.8],
      [100.8, 0.8],
      [100.8, 0.2],
    ],
  ])
  const collection = example('a7-geometrycollection')
  expect([marks(collection), segments(collection)]).toEqual([
    [[100, 0]],
    [
      [
        [101, 0],
        [102, 1],
      ],
    ],
  ])
})

test('a third number is a height; lines are those of the geometry; the sense of rings does not matter', () => {
  const text = `{"type": "GeometryCollection", "geometries": [\n` +
    `{"type": "Polygon", "coordinates": [[[0,0,3],[0,4,3.5],[4,4,4],[0,0,3]]]},\n{"coordinates": [[1,1],[2,2,7]], "type": "LineString"}]}`
  const drawing = drawingOf(geojson, text)
  expect([...drawing.points.filter((_, i) => i % 3 === 2)]).toEqual([3, 3.5, 4, 3, 0, 7])
  expect([...drawing.hasHeight]).toEqual([1, 1, 1, 1, 0, 1])
  expect([...drawing.outlines.line, ...drawing.segmentLine]).toEqual([2, 3])
  expect(outlines(drawing)).toEqual([
    [
      [0, 0],
      [0, 4],
      [4, 4],
    ],
  ])
})

test('numbers read as the doubles nearest to them; further numbers of a position are ignored', () => {
  const values = ['0.1', '-1e-3', '500000.123456789', '1E2', '-0', '4000000.0000000005', '123456789.123456789e-3', '2.5']
  const drawing = drawingOf(geojson, `{"type":"MultiPoint","coordinates":[${values.map((value) => `[${value},1,2,3,4]`).join(',')}]}`)
  expect(marks(drawing).map(([x]) => x)).toEqual(values.map((value) => Number(value) + 0))
})

test('the layer of a feature is its property "layer"; other values of it name none', () => {
  const feature = (layer: unknown, x: number): object => ({
    type: 'Feature',
    properties: { layer },
    geometry: { type: 'Polygon', coordinates: [square.map(([a, b]) => [a! + x, b])] },
  })
  const text = JSON.stringify({
    type: 'FeatureCollection',
    features: [feature('Glass', 0), feature(7, 10), feature('Steel <b>', 20), { ...feature('Glass', 30), properties: null }],
  })
  const all = drawingOf(geojson, text)
  expect([...all.outlines.layer].map((i) => all.layers[i])).toEqual(['Glass', '', 'Steel <b>', ''])
  const glass = drawingOf(geojson, text, { layers: ['gLASS'] })
  expect(outlines(glass)).toHaveLength(1)
  expect(glass.leftOut).toEqual([
    { kind: 'Polygon, layer not chosen', layer: '', count: 2 },
    { kind: 'Polygon, layer not chosen', layer: 'Steel <b>', count: 1 },
  ])
  expect(problemOf(geojson, text, { layers: ['gutter'] })).toMatchObject({
    code: 'no-such-layer',
    cure: 'the file has "Glass", "Steel <b>"',
  })
})

test('what holds no geometry is named: no geometry, empty lists, a reference system', () => {
  const text = JSON.stringify({
    type: 'FeatureCollection',
    crs: { type: 'name', properties: { name: 'urn:ogc:def:crs:EPSG::25832' } },
    features: [
      { type: 'Feature', properties: {}, geometry: null },
      { type: 'Feature', properties: {}, geometry: { type: 'MultiPolygon', coordinates: [] } },
      { type: 'Feature', properties: {}, geometry: { type: 'Polygon', coordinates: [square] } },
    ],
  })
  expect(drawingOf(geojson, text).leftOut.map(({ kind }) => kind)).toEqual(['crs', 'Feature without geometry', 'MultiPolygon, empty'])
})

test('a drawing as small as one in degrees is read, with a note', () => {
  const at = (x: number, y: number, size: number): string => polygon([square.map(([a, b]) => [x + a! * size, y + b! * size])])
  expect(drawingOf(geojson, at(13.4, 52.5, 0.0001)).repairs).toMatchObject([
    { code: 'unit-assumed', message: expect.stringContaining('degrees') },
  ])
  expect(drawingOf(geojson, at(13.4, 52.5, 0.01)).repairs).toEqual([])
  expect(drawingOf(geojson, at(500, 52.5, 0.0001)).repairs).toEqual([])
})

test('what is wrong is said with the path of the value and its line', () => {
  const cases: [string, string][] = [
    [
      '{"type":"Polygon","coordinates":[[[0,0],[1,0],[1,1],[0,1]]]}',
      'line 1, coordinates[0]: the ring is not closed; repeat its first position at its end.',
    ],
    [
      '{"type":"FeatureCollection","features":[\n{"type":"Feature","properties":{},"geometry":' +
        '{"type":"Polygon","coordinates":[[[0,0],[1,0],[1,\n"x"],[0,0]]]}}]}',
      'line 3, features[0].geometry.coordinates[0][2][1]: a number is expected in place of "x"; correct it, or export the file again.',
    ],
    [
      '{"type":"Polygon","coordinates":[[[0,0,1],[1,0,1],[1,1,1],[0,0,2]]]}',
      'line 1, coordinates[0]: the ring is not closed; repeat its first position at its end.',
    ],
    [
      '{"type":"MultiPolygon","coordinates":[[[[0,0],[1,0],[0,0]]]]}',
      'the file has no geometry that can be taken, only 1 x ring without area; export the panels as Polygon or their edges as LineString.',
    ],
    [
      '{"type":"Polygon","coordinates":[[[0,0],[1,0],[0,0],[0,0]]]}',
      'the file has no geometry that can be taken, only 1 x ring without area; export the panels as Polygon or their edges as LineString.',
    ],
    [
      '{"type":"LineString","coordinates":[[0,0]]}',
      'line 1, coordinates: a line needs two positions or more, it has 1; correct it, or export the file again.',
    ],
    [
      '{"type":"LineString","coordinates":[[0,0],[1]]}',
      'line 1, coordinates[1]: a position needs two numbers or more; correct it, or export the file again.',
    ],
    [
      '{"type":"LineString","coordinates":[[0,0],5]}',
      'line 1, coordinates[1]: a position (a list of numbers) is expected in place of 5; correct it, or export the file again.',
    ],
    [
      '{"type":"Point","coordinates":[1e308,5]}',
      'line 1, coordinates[0]: the coordinate is beyond 1e12; move the drawing nearer to its origin.',
    ],
    [
      '{"type":"Point","coordinates":[1e400,5]}',
      'line 1, coordinates[0]: the coordinate is beyond 1e12; move the drawing nearer to its origin.',
    ],
    [
      '{"type":"Point","coordinates":[[0,1],5]}',
      'line 1, coordinates[0]: a number is expected in place of a list; correct it, or export the file again.',
    ],
    [
      '{"type":"Point","coordinates":{"x":1}}',
      'line 1, coordinates: a Point needs a list "coordinates"; correct it, or export the file again.',
    ],
    [
      '{"type":"MultiLineString","coordinates":[true]}',
      'line 1, coordinates[0]: a list of which each is a position is expected in place of true; correct it, or export the file again.',
    ],
    ['{"type":"Feature","properties":null}', 'line 1: a Feature needs a member "geometry"; correct it, or export the file again.'],
    [
      '{"type":"Feature","geometry":{"type":"Feature"}}',
      'line 1, geometry.type: a Feature cannot stand here; correct it, or export the file again.',
    ],
    [
      '{"type":"FeatureCollection","features":[5]}',
      'line 1, features[0]: a Feature is expected in place of 5; correct it, or export the file again.',
    ],
    ['{"type":"FeatureCollection"}', 'line 1: a FeatureCollection needs a member "features"; correct it, or export the file again.'],
    [
      '{"type":"Topology","objects":{}}',
      'line 1, type: "Topology" is no type of GeoJSON; types are written as in RFC 7946, e.g. "Polygon".',
    ],
    ['{"a b":{},"kind":"Polygon"}', 'line 1: the member "type" is missing; correct it, or export the file again.'],
    ['[1,2]', 'line 1: a GeoJSON object is expected in place of a list; correct it, or export the file again.'],
    [
      '{"type":"GeometryCollection","geometries":[{"type":"GeometryCollection","geometries":[{"type":"polygon"}]}]}',
      'line 1, geometries[0].geometries[0].type: "polygon" is no type of GeoJSON; types are written as in RFC 7946, e.g. "Polygon".',
    ],
    [
      '{"type":"FeatureCollection","features":[]}',
      'the file has no geometry that can be taken; export the panels as Polygon or their edges as LineString.',
    ],
  ]
  for (const [text, said] of cases) expect(sentence(problemOf(geojson, text)), text).toBe(said)
})

test('recognised by content', () => {
  for (const head of [
    '{"type":"FeatureCollection","features":[',
    '\ufeff\n {\n "crs": {}, "type" : "Polygon"',
    '{"bbox":[1],"type":"Feature"',
  ])
    expect(geojson.recognises(head), head).toBe(true)
  for (const head of ['{"panewise":"brief","version":1}', '{"type":"Topology"}', '["type":"Feature"]', 'v 1 2 3', '<svg/>', ''])
    expect(geojson.recognises(head), head).toBe(false)
})
