/** Seeded damage to markup and JSON, on top of the damage that any text gets. */
import { readFileSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { random } from '../../src/base/random.ts'
import { damaged, upright } from './text-mutations.ts'

const words: Readonly<Record<Kind, readonly string[]>> = {
  svg: [
    '<',
    '>',
    '/>',
    '"',
    '<g>',
    '</g>',
    '<g id="Glass" transform="scale(1e200)">',
    '&amp;',
    '&x;',
    '&#x41;',
    '<![CDATA[',
    ']]>',
    '<!--',
    '<!ENTITY a "b">',
    'M',
    'Z',
    'z',
    'a1 1 0 11',
    'c',
    '1e308',
    '1e999',
    '-',
    '.',
    'e',
    ' 0 0 0 0',
    ' width="0"',
    ' viewBox="0 0 1e-300 1e300"',
    ' transform="rotate(9,1e9)"',
    ' style="display:none',
    '<use href="#pair"/>',
    '<use href="#Glass" x="1"/>',
    '<svg>',
    '<style>',
    ' xmlns="x"',
    ' fill="none"',
    '%',
    'mm',
    'scale(0)',
    'A1e-9 1e9 45 1 0 5 5',
    'S',
    't9 9',
    '#cell',
    '#pair',
    '#bay',
    '\u0000',
  ],
  geojson: [
    '{',
    '}',
    '[',
    ']',
    '[[',
    ']]',
    ',',
    ':',
    '"',
    '\\',
    '\\u12',
    '1e308',
    '1e999',
    '-',
    '0',
    '01',
    'null',
    'true',
    '[]',
    '{}',
    '"type"',
    '"Polygon"',
    '"LineString"',
    '"coordinates"',
    '"geometries"',
    '"features"',
    '"geometry"',
    '"layer":',
    '[0,0],',
    '[[[[',
    '.',
    'e5',
    '"Feature"',
    '"\\ud800"',
    '//',
    '\t',
    '\u0001',
    '"GeometryCollection"',
  ],
}

export type Kind = 'svg' | 'geojson'

const folder = (kind: Kind): string => join(import.meta.dirname, '..', 'corpus', kind)

export function files(kind: Kind): { name: string; bytes: Uint8Array }[] {
  const named = readdirSync(folder(kind))
    .filter((name) => name.endsWith(`.${kind}`))
    .sort()
  return named.map((name) => ({ name, bytes: new Uint8Array(readFileSync(join(folder(kind), name))) }))
}

/** What stands in one place of a file and may stand in another without harm to its grammar, in classes. */
const classes: Readonly<Record<Kind, readonly { find: RegExp; extremes: readonly string[] }[]>> = {
  svg: [
    {
      find: /(?<==)"[^"<]*"/g,
      extremes: [
        '"none"',
        '"0"',
        '"100%"',
        '"1e300"',
        '"url(#a)"',
        '"#Glass"',
        '"#pair"',
        '"M0 0A9 9 0 1 1 0 1e-9zM1 1"',
        '"scale(0 1e9)"',
        '""',
      ],
    },
    { find: /(?<=[-"(,\sA-Za-z])[\d.]+(?=[^<>=?]*")/g, extremes: ['1e308', '0', '1e13', '1e11', '1e-320', '.5.5', '1e999', '-1'] },
    { find: /(?<=[\d\s"])[MLHVCSQTAZmlhvcsqtaz](?=[-\d.\s"])/g, extremes: ['A', 'a', 'S', 'T', 'm', 'z', 'C', 'L0 0'] },
    {
      find: /(?<=<)(?:rect|circle|ellipse|line|polygon|polyline|path|use|image)(?=[\s>/])/g,
      extremes: ['svg', 'g', 'text', 'switch', 'symbol', 'defs'],
    },
  ],
  geojson: [
    {
      find: /-?\d+(?:\.\d+)?(?:e\d+)?/g,
      extremes: ['1e308', '-1e308', '0', '-0', '1e13', '1e400', 'null', 'true', '[]', '{}', '"1"', '[1,2]', '1e11'],
    },
    {
      find: /(?<=: )"[^"\\]*"/g,
      extremes: [
        '"Polygon"',
        '"MultiPolygon"',
        '"Point"',
        '"Feature"',
        '"FeatureCollection"',
        '"GeometryCollection"',
        '""',
        '5',
        'null',
        '[]',
      ],
    },
    { find: /\[[^[\]]*\]/g, extremes: ['[0]', '[1,2]', '[1,2,3,4]', '[]', '[[0,0],[1,0]]', '[null,1]', '5', '"x"', '{}'] },
    {
      find: /(?<=[{,]\s*)"[a-z]+"(?=:)/g,
      extremes: ['"type"', '"coordinates"', '"geometry"', '"geometries"', '"features"', '"properties"'],
    },
  ],
}

/** Values put in the place of others, so that the damage reaches past the grammar. */
function exchanged(kind: Kind, text: string, next: () => number): string {
  let out = text
  const rounds = 1 + Math.floor(3 * next())
  for (let i = 0; i < rounds; i += 1) {
    const { find, extremes } = classes[kind][Math.floor(next() * classes[kind].length)]!
    const places = [...out.matchAll(find)]
    if (places.length === 0) continue
    const place = places[Math.floor(next() * places.length)]!
    const source = places[Math.floor(next() * places.length)]!
    const other = next() < 0.5 ? source[0] : extremes[Math.floor(next() * extremes.length)]!
    out = out.slice(0, place.index) + other + out.slice(place.index + place[0].length)
  }
  return out
}

/** Two in three files have values exchanged; the others one to five words put in or out, and half of those bytes changed. */
function mutated(kind: Kind, bytes: Uint8Array, next: () => number): Uint8Array {
  let text = new TextDecoder().decode(bytes)
  if (next() < 2 / 3) return new TextEncoder().encode(exchanged(kind, text, next))
  const rounds = 1 + Math.floor(5 * next() * next())
  for (let i = 0; i < rounds; i += 1) {
    const at = Math.floor(next() * text.length)
    const cut = next() < 0.5 ? 0 : Math.floor(2 ** (5 * next()))
    text = text.slice(0, at) + (next() < 0.8 ? words[kind][Math.floor(next() * words[kind].length)]! : '') + text.slice(at + cut)
  }
  const out = new TextEncoder().encode(text)
  return next() < 0.5 ? damaged(out, next) : out
}

/** Damages each file in turn; throws with the seed of the first that is not read or refused as it should be. */
export function damagedFiles(kind: Kind, rounds: number, firstSeed: number): { read: number; refused: number; longest_ms: number } {
  const count = { read: 0, refused: 0, longest_ms: 0 }
  const all = files(kind)
  for (let seed = firstSeed; seed < firstSeed + rounds; seed += 1) {
    const { name, bytes } = all[seed % all.length]!
    const start = performance.now()
    try {
      count[upright(name, mutated(kind, bytes, random(seed)))] += 1
    } catch (error) {
      throw new Error(`seed ${seed}, ${name}: ${String(error)}`, { cause: error })
    }
    count.longest_ms = Math.max(count.longest_ms, performance.now() - start)
  }
  return count
}
