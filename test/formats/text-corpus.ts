/** Files for damage: all of a corpus folder, and what our own writers of tests add to it. */
import { readFileSync, readdirSync } from 'node:fs'
import { at, dxfText, face, insert, line, polyline } from './dxf-writer.ts'
import { bytesOf } from './text-read.ts'

export interface NamedBytes {
  readonly name: string
  readonly bytes: Uint8Array
}

export function corpus(format: 'dxf' | 'obj'): NamedBytes[] {
  const folder = `test/corpus/${format}`
  const files: NamedBytes[] = readdirSync(folder)
    .filter((name) => name.endsWith(`.${format}`))
    .sort()
    .map((name) => ({ name, bytes: new Uint8Array(readFileSync(`${folder}/${name}`)) }))
  // Short files, so that damage hits what matters rather than the head of a long one.
  if (format === 'dxf')
    files.push(...[shortDxf(), shortDxf().replaceAll('\n', '\r\n')].map((text, i) => ({ name: `short-${i}.dxf`, bytes: bytesOf(text) })))
  return files
}

function shortDxf(): string {
  return dxfText({
    layers: [{ name: 'GLASS' }, { name: 'OFF', off: true }],
    blocks: {
      A: [
        line([0, 0], [1, 0]),
        polyline(
          [
            [0, 0, 1],
            [1, 0],
            [1, 1],
          ],
          true,
        ),
      ],
      B: [
        insert('A', 3, 4, [
          [50, 30],
          [70, 2],
          [71, 2],
          [44, 5],
          [45, 5],
        ]),
      ],
    },
    entities: [
      insert('B', 1, 2),
      face(
        [
          [0, 0, 1],
          [4, 0, 1],
          [4, 3, 1],
          [0, 3, 1],
        ],
        4,
      ),
      face(
        [
          [4, 3, 1],
          [2, 5, 1],
          [0, 3, 1],
        ],
        8,
      ),
      { kind: 'TEXT', layer: 'OFF' },
      { kind: 'ARC', pairs: [...at(10, 0, 0), [40, 2], [50, 0], [51, 90]] },
      {
        kind: 'SPLINE',
        pairs: [
          [70, 0],
          [71, 2],
          ...[0, 0, 0, 1, 1, 1].map((k) => [40, k] as const),
          ...[
            [0, 0],
            [1, 1],
            [2, 0],
          ].flatMap(([x, y]) => at(10, x!, y!)),
        ],
      },
      {
        kind: 'SPLINE',
        pairs: [
          [70, 1],
          [71, 3],
          ...[
            [0, 0],
            [1, 1],
            [2, 0],
            [1, -1],
          ].flatMap(([x, y]) => at(11, x!, y!)),
        ],
      },
      {
        kind: 'MESH',
        pairs: [[91, 0], [92, 3], ...at(10, 0, 0), ...at(10, 1, 0), ...at(10, 1, 1), [93, 4], [90, 3], [90, 0], [90, 1], [90, 2], [94, 0]],
      },
      {
        kind: 'POLYLINE',
        pairs: [
          [70, 64],
          [71, 3],
          [72, 1],
        ],
      },
      ...[
        [0, 0],
        [1, 0],
        [1, 1],
      ].map(([x, y]) => ({ kind: 'VERTEX', pairs: [...at(10, x!, y!), [70, 192] as const] })),
      {
        kind: 'VERTEX',
        pairs: [
          [70, 128],
          [71, 1],
          [72, 2],
          [73, 3],
        ],
      },
      { kind: 'SEQEND' },
    ],
  })
}
