/**
 * Chords of rational Bezier curves. C(t) = P(t) / w(t), with P = sum B_i(t) w_i p_i and w = sum B_i(t) w_i.
 *
 * A chord over a step h of t leaves the curve by at most h^2/8 max |C''| (the error of linear interpolation). With d the
 * degree and all lengths measured from p_0:
 *   |P'| <= d max |D P|, |P''| <= d (d-1) max |D^2 P|, the same for w (D: differences of the control values),
 *   |C| <= r = max |p_i|, |C'| <= (|P'| + r |w'|) / w_min, |C''| <= (|P''| + 2 |w'| |C'| + r |w''|) / w_min.
 * For equal weights this is G. Wang's bound (The subdivision method for finding the intersection of two Bezier curves,
 * 1984). Where it asks for more than a few chords the curve is halved first, so that flat stretches get few.
 *
 * Tried and dropped: halving until the control points lie within the sagitta of the chord. It needs no derivatives, but
 * took 1.4 to 2 times the chords for the same sagitta.
 */

/** Chords up to which a piece is cut evenly rather than halved. */
const evenUpTo = 4

/** Points between the ends, x y z ..; null when they are more than `most`. `points` x y z .., `weights` null: all 1. */
export function bezierInterior(
  points: readonly number[], weights: readonly number[] | null, sagitta: number, most: number,
): number[] | null {
  const origin = [points[0], points[1], points[2]]
  const controls: number[] = []
  for (let i = 0; 3 * i < points.length; i += 1) {
    const w = weights === null ? 1 : weights[i]
    for (let k = 0; k < 3; k += 1) controls.push(w * (points[3 * i + k] - origin[k]))
    controls.push(w)
  }
  const out: number[] = []
  if (!chorded(controls, sagitta, most, out)) return null
  out.length -= 3 // the end itself
  for (let i = 0; i < out.length; i += 1) out[i] += origin[i % 3]
  return out
}

/** Adds the points after the start, the end included. `controls`: X Y Z w .., homogeneous. */
function chorded(controls: number[], sagitta: number, most: number, out: number[]): boolean {
  const count = Math.max(1, Math.ceil(Math.sqrt(secondDerivative(controls) / (8 * sagitta))))
  if (!(count <= most && out.length <= 3 * most)) return false
  if (count > evenUpTo) {
    const [left, right] = halves(controls)
    return chorded(left, sagitta, most, out) && chorded(right, sagitta, most, out)
  }
  for (let i = 1; i <= count; i += 1) pointAt(controls, i / count, out)
  return true
}

/** A bound of |C''| over the whole curve. */
function secondDerivative(controls: readonly number[]): number {
  const degree = controls.length / 4 - 1
  if (degree < 2) return 0
  let first = 0
  let firstWeight = 0
  let second = 0
  let secondWeight = 0
  let reach = 0
  let least = Infinity
  const shifted = fromFirst(controls)
  for (let i = 0; i < shifted.length; i += 4) {
    least = Math.min(least, shifted[i + 3])
    reach = Math.max(reach, Math.hypot(shifted[i], shifted[i + 1], shifted[i + 2]) / shifted[i + 3])
  }
  for (let i = 4; i < controls.length; i += 4) {
    const d = [0, 1, 2, 3].map((k) => shifted[i + k] - shifted[i - 4 + k])
    first = Math.max(first, Math.hypot(d[0], d[1], d[2]))
    firstWeight = Math.max(firstWeight, Math.abs(d[3]))
    if (i === 4) continue
    const e = [0, 1, 2, 3].map((k) => shifted[i + k] - 2 * shifted[i - 4 + k] + shifted[i - 8 + k])
    second = Math.max(second, Math.hypot(e[0], e[1], e[2]))
    secondWeight = Math.max(secondWeight, Math.abs(e[3]))
  }
  const speed = (degree * (first + reach * firstWeight)) / least
  return (degree * (degree - 1) * (second + reach * secondWeight) + 2 * degree * firstWeight * speed) / least
}

/** The same curve measured from its first control point. */
function fromFirst(controls: readonly number[]): number[] {
  const out = [...controls]
  const w = controls[3]
  for (let i = 0; i < out.length; i += 4) for (let k = 0; k < 3; k += 1) out[i + k] -= (out[i + 3] * controls[k]) / w
  return out
}

/** De Casteljau at t = 1/2: the control points of both halves. */
function halves(controls: readonly number[]): [left: number[], right: number[]] {
  const n = controls.length / 4
  const work = [...controls]
  const left = new Array<number>(controls.length)
  const right = new Array<number>(controls.length)
  for (let level = 0; level < n; level += 1) {
    for (let k = 0; k < 4; k += 1) {
      left[4 * level + k] = work[k]
      right[4 * (n - 1 - level) + k] = work[4 * (n - 1 - level) + k]
    }
    for (let i = 0; i < 4 * (n - 1 - level); i += 1) work[i] = (work[i] + work[i + 4]) / 2
  }
  return [left, right]
}

/** Adds C(t) by de Casteljau. */
function pointAt(controls: readonly number[], t: number, out: number[]): void {
  const work = [...controls]
  for (let last = controls.length - 4; last > 0; last -= 4) {
    for (let i = 0; i < last; i += 1) work[i] += t * (work[i + 4] - work[i])
  }
  for (let k = 0; k < 3; k += 1) out.push(work[k] / work[3])
}
