/**
 * The kernels as a WebAssembly module of a thousand bytes, written out here instruction by instruction: two rows to one
 * 128-bit operation, a 4 x 4 block of C in eight registers. No fused multiply-add, so every rounding is that of the plain
 * kernels. Opcodes: WebAssembly Core Specification 2.0 (W3C), section 5.4, with the vector instructions.
 */

const i32 = 0x7f
const v128 = 0x7b

/** Unsigned LEB128, section 5.2.2 of the specification. */
function unsigned(value: number): number[] {
  const bytes: number[] = []
  do {
    const low = value & 0x7f
    value >>>= 7
    bytes.push(value === 0 ? low : low | 0x80)
  } while (value !== 0)
  return bytes
}

/** Signed LEB128. */
function signed(value: number): number[] {
  const bytes: number[] = []
  for (;;) {
    const low = value & 0x7f
    value >>= 7
    if ((value === 0 && (low & 0x40) === 0) || (value === -1 && (low & 0x40) !== 0)) return [...bytes, low]
    bytes.push(low | 0x80)
  }
}

const get = (local: number): number[] => [0x20, ...unsigned(local)]
const set = (local: number): number[] => [0x21, ...unsigned(local)]
const constant = (value: number): number[] => [0x41, ...signed(value)]
const addition = 0x6a
const shiftLeft = 0x74
const increase = (local: number, by: number[]): number[] => [...get(local), ...by, addition, ...set(local)]
const toBytes = (local: number): number[] => [...get(local), ...constant(3), shiftLeft, ...set(local)]
const loop = (body: number[]): number[] => [0x03, 0x40, ...body, 0x0b]
const againWhileNotZero = (local: number): number[] => [...get(local), 0x0d, 0]
const vector = (code: number): number[] => [0xfd, ...unsigned(code)]
/** Loads and stores carry an alignment hint (2^3 bytes: numbers, not pairs, are aligned) and an offset in bytes. */
const load = (address: number, offset: number): number[] => [...get(address), ...vector(0), 3, ...unsigned(offset)]
const loadTwice = (address: number, offset: number): number[] => [...get(address), ...vector(10), 3, ...unsigned(offset)]
const store = (address: number, offset: number, value: number[]): number[] => [
  ...get(address), ...value, ...vector(11), 3, ...unsigned(offset),
]
const multiply = vector(0xf2)
const subtract = vector(0xf1)
const zero = [...vector(12), ...new Array<number>(16).fill(0)]

const section = (id: number, body: number[]): number[] => [id, ...unsigned(body.length), ...body]
const name = (text: string): number[] => [...unsigned(text.length), ...Array.from(text, (letter) => letter.charCodeAt(0))]

const columns = [0, 1, 2, 3]
const halves = [0, 1]

/** One function: its number of i32 parameters, of further i32 and of v128 locals, and its code. */
interface Code {
  readonly parameters: number
  readonly integers: number
  readonly vectors: number
  readonly code: readonly number[]
}

const returnIfZero = (local: number): number[] => [...get(local), 0x45, 0x04, 0x40, 0x0f, 0x0b]

/** sum[half] <- sum[half] - of[half] * factor */
const subtractProduct = (sum: number, of: number, factor: number): number[] => [
  ...get(sum), ...get(of), ...get(factor), ...multiply, ...subtract, ...set(sum),
]

/** The operation `Update` of kernel.ts. */
function update(): Code {
  const [a, aStep, aGrow, b, bStep, c, cStep, cGrow, count, depth, keep] = [0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10]
  const [left, right, rest] = [11, 12, 13]
  const sum = (column: number, half: number): number => 14 + 2 * column + half
  const [low, high, factor] = [22, 23, 24]
  const unrolled = 4
  const step = (k: number): number[] => [
    ...load(left, 32 * k), ...set(low), ...load(left, 32 * k + 16), ...set(high),
    ...columns.flatMap((column) => [
      ...loadTwice(right, 32 * k + 8 * column), ...set(factor),
      ...halves.flatMap((half) => subtractProduct(sum(column, half), half === 0 ? low : high, factor)),
    ]),
  ]
  const inner = loop([
    ...Array.from({ length: unrolled }, (_, k) => step(k)).flat(),
    ...increase(left, constant(32 * unrolled)),
    ...increase(right, constant(32 * unrolled)),
    ...increase(rest, constant(-unrolled)),
    ...againWhileNotZero(rest),
  ])
  const block = columns.flatMap((column) => halves.map((half) => ({ at: sum(column, half), offset: 32 * column + 16 * half })))
  const outer = loop([
    ...get(keep), 0x04, 0x40,
    ...block.flatMap(({ at, offset }) => [...load(c, offset), ...set(at)]),
    0x05,
    ...block.flatMap(({ at }) => [...zero, ...set(at)]),
    0x0b,
    ...get(a), ...set(left), ...get(b), ...set(right), ...get(depth), ...set(rest),
    ...inner,
    ...block.flatMap(({ at, offset }) => store(c, offset, get(at))),
    ...increase(a, get(aStep)), ...increase(aStep, get(aGrow)),
    ...increase(b, get(bStep)),
    ...increase(c, get(cStep)), ...increase(cStep, get(cGrow)),
    ...increase(count, constant(-1)), ...againWhileNotZero(count),
  ])
  return {
    parameters: 11, integers: 3, vectors: 11,
    code: [...returnIfZero(count), ...[a, aStep, aGrow, b, bStep, c, cStep, cGrow].flatMap(toBytes), ...outer],
  }
}

/** The operation `Mirror` of kernel.ts: A stays in eight registers. */
function mirror(): Code {
  const [a, b, c, count] = [0, 1, 2, 3]
  const held = (k: number, half: number): number => 4 + 2 * k + half
  const [low, high, factor] = [12, 13, 14]
  const hold = columns.flatMap((k) => halves.flatMap((half) => [...load(a, 32 * k + 16 * half), ...set(held(k, half))]))
  const outer = loop([
    ...columns.flatMap((column) => [
      ...load(c, 32 * column), ...set(low), ...load(c, 32 * column + 16), ...set(high),
      ...columns.flatMap((k) => [
        ...loadTwice(b, 32 * column + 8 * k), ...set(factor),
        ...subtractProduct(low, held(k, 0), factor), ...subtractProduct(high, held(k, 1), factor),
      ]),
      ...store(c, 32 * column, get(low)), ...store(c, 32 * column + 16, get(high)),
    ]),
    ...increase(b, constant(128)), ...increase(c, constant(128)),
    ...increase(count, constant(-1)), ...againWhileNotZero(count),
  ])
  return { parameters: 4, integers: 0, vectors: 11, code: [...returnIfZero(count), ...[a, b, c].flatMap(toBytes), ...hold, ...outer] }
}

/** The module: it imports its memory as "room"."memory" and exports "update" and "mirror". */
export function kernelBinary(): Uint8Array<ArrayBuffer> {
  const functions = [update(), mirror()]
  const types = functions.flatMap(({ parameters }) => [0x60, ...unsigned(parameters), ...new Array<number>(parameters).fill(i32), 0])
  const bodies = functions.flatMap(({ integers, vectors, code }) => {
    const locals = integers > 0 ? [2, ...unsigned(integers), i32, ...unsigned(vectors), v128] : [1, ...unsigned(vectors), v128]
    const body = [...locals, ...code, 0x0b]
    return [...unsigned(body.length), ...body]
  })
  return Uint8Array.from([
    0x00, 0x61, 0x73, 0x6d, 1, 0, 0, 0,
    ...section(1, [2, ...types]),
    ...section(2, [1, ...name('room'), ...name('memory'), 0x02, 0x00, 1]),
    ...section(3, [2, 0, 1]),
    ...section(7, [2, ...name('update'), 0x00, 0, ...name('mirror'), 0x00, 1]),
    ...section(10, [2, ...bodies]),
  ])
}
