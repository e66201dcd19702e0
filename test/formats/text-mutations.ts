/** Seeded damage to files, and what must hold of a reader whatever it is given. */
import { random } from '../../src/base/random.ts'
import { sentence } from '../../src/base/result.ts'
import { readDrawing } from '../../src/formats/all.ts'
import { usual } from './text-read.ts'

const spice = [
  '-1',
  '0',
  '1e308',
  'nan',
  '-',
  '\n',
  '\r\n',
  '\0',
  '999999999999',
  '\ufeff',
  '\\U+0000',
  '2147483647',
  '1e-320',
  ' ',
  '70\n1\n',
  '0\nINSERT\n2\nA\n',
  'f 1 2 3\n',
  '\\\n',
]

/** A damaged copy: one to eight bytes, words, cuts, repeats, or lines in the place of others. */
export function damaged(bytes: Uint8Array, next: () => number): Uint8Array {
  let out = bytes
  const rounds = next() < 0.5 ? 1 : 1 + Math.floor(8 * next())
  for (let i = 0; i < rounds; i += 1) {
    const at = Math.floor(out.length * next())
    const length = Math.min(out.length - at, 1 + Math.floor(2 ** (10 * next())))
    const piece = out.slice(at, at + length)
    switch (Math.floor(10 * next())) {
      case 0:
        out = Uint8Array.from(out)
        out[at] = Math.floor(256 * next())
        break
      case 1:
        out = joined(out.slice(0, at), new TextEncoder().encode(spice[Math.floor(spice.length * next())]), out.slice(at))
        break
      case 2:
        out = joined(out.slice(0, at), out.slice(at + length))
        break
      case 3:
        out = joined(out.slice(0, at), piece, piece, out.slice(at + length))
        break
      case 4:
        if (next() < 0.2) out = out.slice(0, at)
        break
      case 5: {
        const to = Math.floor((out.length - length) * next())
        out = Uint8Array.from(out)
        out.set(piece, to)
        break
      }
      case 6: {
        const end = out.indexOf(10, at)
        out = joined(
          out.slice(0, at),
          new TextEncoder().encode(spice[Math.floor(spice.length * next())]),
          out.slice(end < 0 ? out.length : end),
        )
        break
      }
      default: {
        // A line in the place of another keeps codes and values apart, so that the damage reaches the entities.
        const [from, to] = [lineAt(out, at), lineAt(out, Math.floor(out.length * next()))]
        out = joined(out.slice(0, to[0]), out.slice(from[0], from[1]), out.slice(to[1]))
      }
    }
    if (out.length === 0) break
  }
  return out
}

/** Where the line about a byte begins and ends. */
function lineAt(bytes: Uint8Array, at: number): [start: number, end: number] {
  const end = bytes.indexOf(10, at)
  return [at === 0 ? 0 : bytes.lastIndexOf(10, at - 1) + 1, end < 0 ? bytes.length : end]
}

function joined(...parts: Uint8Array[]): Uint8Array {
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0))
  let at = 0
  for (const part of parts) {
    out.set(part, at)
    at += part.length
  }
  return out
}

/** Turns that a file of this size may take: reading yields about every 2,000 entities, unfolding has its own limit. */
const mostTurns = 5_000

/** Reads the bytes; throws what is wrong with the way they are read or refused. */
export function upright(name: string, bytes: Uint8Array): 'read' | 'refused' {
  const steps = readDrawing({ name, bytes }, usual)
  let turns = 0
  let step = steps.next()
  for (; step.done !== true; step = steps.next()) if (++turns > mostTurns) throw new Error('it does not end')
  if (!step.value.ok) {
    const said = sentence(step.value.problem)
    if (!said.startsWith(name) || !said.endsWith('.') || said.length < name.length + 20 || said.length > 1500)
      throw new Error(`no sentence: ${said}`)
    if (step.value.problem.cure === null) throw new Error(`no cure: ${said}`)
    if (/[\u0000-\u001f]|undefined|\[object|NaN\b/.test(said)) throw new Error(`not fit to print: ${JSON.stringify(said)}`)
    return 'refused'
  }
  const { points, outlines, segments, marks, layers, segmentLayer } = step.value.value
  const count = points.length / 3
  if (!points.every((value) => Math.abs(value) <= 1e12)) throw new Error('a coordinate is not finite')
  for (const list of [outlines.point, segments, marks])
    if (!list.every((i) => i >= 0 && i < count)) throw new Error('a point is named that is not there')
  for (const list of [outlines.layer, segmentLayer])
    if (!list.every((i) => i >= 0 && i < layers.length)) throw new Error('a layer is named that is not there')
  for (let i = 0; i < outlines.layer.length; i += 1)
    if (outlines.start[i + 1]! - outlines.start[i]! < 3) throw new Error('an outline has fewer than three corners')
  return 'read'
}

/** Damages each file in turn, `rounds` times in all; the seed of a failure is in its message. */
export function damage(
  files: readonly { name: string; bytes: Uint8Array }[],
  rounds: number,
  firstSeed: number,
): { read: number; refused: number } {
  const count = { read: 0, refused: 0 }
  for (let i = 0; i < rounds; i += 1) {
    const { name, bytes } = files[i % files.length]!
    const seed = firstSeed + i
    try {
      count[upright(name, damaged(bytes, random(seed)))] += 1
    } catch (error) {
      throw new Error(`seed ${seed}, ${name}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`, { cause: error })
    }
  }
  return count
}
