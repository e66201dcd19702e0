/** Exact arithmetic on doubles for tests: doubles as integers in a common unit. Shares no code with what it judges. */

const view = new DataView(new ArrayBuffer(8))

/** The values times 2^shift, exactly, with the least shift that makes them all integers. */
function integers(values: readonly number[]): { readonly whole: bigint[]; readonly shift: number } {
  const parts = values.map((value) => {
    view.setFloat64(0, value)
    const bits = view.getBigUint64(0)
    const exponent = Number((bits >> 52n) & 0x7ffn)
    const fraction = bits & 0xfffffffffffffn
    const mantissa = exponent === 0 ? fraction : fraction | 0x10000000000000n
    return { mantissa: bits >> 63n === 1n ? -mantissa : mantissa, power: Math.max(1, exponent) - 1075 }
  })
  const least = Math.min(...parts.filter(({ mantissa }) => mantissa !== 0n).map(({ power }) => power), 0)
  return { whole: parts.map(({ mantissa, power }) => (mantissa === 0n ? 0n : mantissa << BigInt(power - least))), shift: -least }
}

/** Sign of (b - a) x (c - a). */
export function exactTurn(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  const [px, py, qx, qy, rx, ry] = integers([ax, ay, bx, by, cx, cy]).whole as [bigint, bigint, bigint, bigint, bigint, bigint]
  const value = (qx - px) * (ry - py) - (qy - py) * (rx - px)
  return value > 0n ? 1 : value < 0n ? -1 : 0
}

/** The crossing of lines ab and cd, each coordinate rounded once; null when they are parallel. */
export function exactCrossing(p: readonly number[]): [number, number] | null {
  const { whole, shift } = integers(p)
  const [ax, ay, bx, by, cx, cy, dx, dy] = whole as [bigint, bigint, bigint, bigint, bigint, bigint, bigint, bigint]
  const denominator = (bx - ax) * (dy - cy) - (by - ay) * (dx - cx)
  if (denominator === 0n) return null
  const numerator = (cx - ax) * (dy - cy) - (cy - ay) * (dx - cx)
  const at = (from: bigint, to: bigint): number => quotient(from * denominator + numerator * (to - from), denominator << BigInt(shift))
  return [at(ax, bx), at(ay, by)]
}

/** top / bottom from 70 bits of the quotient, rounded once more. */
function quotient(top: bigint, bottom: bigint): number {
  if (top === 0n) return 0
  if (bottom < 0n) return quotient(-top, -bottom)
  if (top < 0n) return -quotient(-top, bottom)
  const shift = 70 - (top.toString(2).length - bottom.toString(2).length)
  const bits = shift >= 0 ? (top << BigInt(shift)) / bottom : top / (bottom << BigInt(-shift))
  return Number(bits) * 2 ** -shift
}
