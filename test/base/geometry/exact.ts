/** Exact arithmetic on doubles for tests: a double is an integer times a power of two. Shares no code with what it judges. */

/** The value times 2^1074, exactly. */
function integer(value: number): bigint {
  const view = new DataView(new ArrayBuffer(8))
  view.setFloat64(0, value)
  const bits = view.getBigUint64(0)
  const exponent = Number((bits >> 52n) & 0x7ffn)
  const fraction = bits & 0xfffffffffffffn
  const mantissa = exponent === 0 ? fraction : fraction | 0x10000000000000n
  const scaled = mantissa << BigInt(Math.max(0, exponent - 1))
  return bits >> 63n === 1n ? -scaled : scaled
}

/** Sign of (b - a) x (c - a). */
export function exactTurn(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  const [x0, y0] = [integer(ax), integer(ay)]
  const value = (integer(bx) - x0) * (integer(cy) - y0) - (integer(by) - y0) * (integer(cx) - x0)
  return value > 0n ? 1 : value < 0n ? -1 : 0
}

/** The crossing of lines ab and cd, each coordinate rounded once; null when they are parallel. */
export function exactCrossing(p: readonly number[]): [number, number] | null {
  const [ax, ay, bx, by, cx, cy, dx, dy] = p.map(integer) as [bigint, bigint, bigint, bigint, bigint, bigint, bigint, bigint]
  const denominator = (bx - ax) * (dy - cy) - (by - ay) * (dx - cx)
  if (denominator === 0n) return null
  const numerator = (cx - ax) * (dy - cy) - (cy - ay) * (dx - cx)
  return [quotient(ax * denominator + numerator * (bx - ax), denominator), quotient(ay * denominator + numerator * (by - ay), denominator)]
}

/** (top / bottom) / 2^1074 from 70 bits of the quotient, rounded once more. */
function quotient(top: bigint, bottom: bigint): number {
  if (top === 0n) return 0
  if (bottom < 0n) return quotient(-top, -bottom)
  if (top < 0n) return -quotient(-top, bottom)
  const divisor = bottom << 1074n
  const shift = 70 - (top.toString(2).length - divisor.toString(2).length)
  const bits = shift >= 0 ? (top << BigInt(shift)) / divisor : top / (divisor << BigInt(-shift))
  return Number(bits) * 2 ** -shift
}
