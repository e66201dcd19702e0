/** Writes ASCII DXF for tests, from pairs of group code and value. Shares no code with the reader. */

export type Pairs = readonly (readonly [code: number, value: string | number])[]

/** One entity or table record: its kind, layer, and pairs. */
export interface Written {
  readonly kind: string
  readonly layer?: string
  readonly pairs?: Pairs
}

export interface Content {
  /** $INSUNITS; null leaves it out. */
  readonly units?: number | null
  readonly layers?: readonly { name: string; frozen?: boolean; off?: boolean }[]
  readonly blocks?: Readonly<Record<string, readonly Written[]>>
  readonly base?: readonly [number, number, number]
  readonly entities: readonly Written[]
}

const pairsText = (pairs: Pairs): string => pairs.map(([code, value]) => `${code}\n${value}\n`).join('')

const recordText = ({ kind, layer = '0', pairs = [] }: Written): string => pairsText([[0, kind], [8, layer], ...pairs])

const section = (name: string, body: string): string => `0\nSECTION\n2\n${name}\n${body}0\nENDSEC\n`

/** The whole file. */
export function dxfText({ units = 6, layers = [], blocks = {}, base = [0, 0, 0], entities }: Content): string {
  const header =
    units === null
      ? ''
      : section(
          'HEADER',
          pairsText([
            [9, '$ACADVER'],
            [1, 'AC1032'],
            [9, '$INSUNITS'],
            [70, units],
          ]),
        )
  const table = layers
    .map(({ name, frozen, off }) =>
      pairsText([
        [0, 'LAYER'],
        [2, name],
        [70, frozen === true ? 1 : 0],
        [62, off === true ? -7 : 7],
      ]),
    )
    .join('')
  const tables = layers.length === 0 ? '' : section('TABLES', `0\nTABLE\n2\nLAYER\n70\n${layers.length}\n${table}0\nENDTAB\n`)
  const body = Object.entries(blocks).map(
    ([name, parts]) =>
      `${pairsText([
        [0, 'BLOCK'],
        [8, '0'],
        [2, name],
        [70, 0],
        [10, base[0]],
        [20, base[1]],
        [30, base[2]],
        [3, name],
      ])}${parts.map(recordText).join('')}0\nENDBLK\n8\n0\n`,
  )
  return `${header}${tables}${section('BLOCKS', body.join(''))}${section('ENTITIES', entities.map(recordText).join(''))}0\nEOF\n`
}

/** The pairs of a point: codes c, c + 10, c + 20. */
export const at = (code: number, x: number, y: number, z = 0): Pairs => [
  [code, x],
  [code + 10, y],
  [code + 20, z],
]

export const line = (from: readonly number[], to: readonly number[], layer = '0'): Written => ({
  kind: 'LINE',
  layer,
  pairs: [...at(10, from[0]!, from[1]!, from[2]), ...at(11, to[0]!, to[1]!, to[2])],
})

/** Corners x, y and optional bulge. */
export const polyline = (corners: readonly (readonly number[])[], closed = true, layer = '0', more: Pairs = []): Written => ({
  kind: 'LWPOLYLINE',
  layer,
  pairs: [
    [90, corners.length],
    [70, closed ? 1 : 0],
    ...more,
    ...corners.flatMap(([x, y, bulge]): Pairs => [[10, x!], [20, y!], ...(bulge === undefined ? [] : [[42, bulge] as const])]),
  ],
})

export const face = (corners: readonly (readonly number[])[], hidden = 0, layer = '0'): Written => ({
  kind: '3DFACE',
  layer,
  pairs: [
    ...[0, 1, 2, 3].flatMap((i) => {
      const [x, y, z] = corners[Math.min(i, corners.length - 1)]!
      return at(10 + i, x!, y!, z)
    }),
    [70, hidden],
  ],
})

export const insert = (block: string, x: number, y: number, more: Pairs = [], layer = '0'): Written => ({
  kind: 'INSERT',
  layer,
  pairs: [[2, block], ...at(10, x, y), ...more],
})
