/**
 * The Chebyshev plane of points in a frame: z = a x + b y + c with the least largest vertical distance. Four corners with
 * equal distances of the right signs are exchanged one for one until no corner is farther off (E. Stiefel, "Ueber diskrete
 * und lineare Tschebyscheff-Approximationen", Numer. Math. 1 (1959) 1-28).
 */

/** Slopes a, b of the plane z = a x + b y + c with the least largest vertical distance to the corners (Stiefel's exchange). */
export function chebyshevPlane(p: Float64Array, count: number): [number, number] {
  let reference = startingReference(p, count)
  for (let step = 0; step < 50 * count; step += 1) {
    const { a, b, c, signs, level } = levelled(p, reference)
    let worst = -1
    let most = Math.abs(level) * (1 + 1e-12)
    for (let k = 0; k < count; k += 1) {
      const off = Math.abs(p[3 * k + 2] - a * p[3 * k] - b * p[3 * k + 1] - c)
      if (off > most) {
        most = off
        worst = k
      }
    }
    if (worst < 0) return [a, b]
    const off = p[3 * worst + 2] - a * p[3 * worst] - b * p[3 * worst + 1] - c
    const swapped = exchange(p, reference, signs, worst, Math.sign(off))
    if (swapped === null) return [a, b]
    reference = swapped
  }
  return [0, 0]
}

type Four = readonly [number, number, number, number]

/** Weights of the affine dependency of four points: sum w = 0, sum w (x, y) = 0. */
function dependency(p: Float64Array, four: Four): number[] {
  const area = (i: number, j: number, k: number): number =>
    (p[3 * j] - p[3 * i]) * (p[3 * k + 1] - p[3 * i + 1]) - (p[3 * j + 1] - p[3 * i + 1]) * (p[3 * k] - p[3 * i])
  const [i, j, k, l] = four
  return [area(j, k, l), -area(i, k, l), area(i, j, l), -area(i, j, k)]
}

/** The plane through the reference whose four distances are equal in size with the dependency's signs. */
function levelled(p: Float64Array, four: Four): { a: number; b: number; c: number; signs: number[]; level: number } {
  const w = dependency(p, four)
  const signs = w.map(Math.sign)
  let top = 0, bottom = 0
  four.forEach((k, i) => {
    top += w[i] * p[3 * k + 2]
    bottom += Math.abs(w[i])
  })
  const level = top / bottom
  // Plane through the three corners of the largest triangle, each lifted by its own signed level.
  const order = [0, 1, 2, 3].sort((i, j) => Math.abs(w[i]) - Math.abs(w[j]))
  const out = order[3]
  const [i, j, k] = [0, 1, 2, 3].filter((m) => m !== out).map((m) => ({ at: 3 * four[m], z: p[3 * four[m] + 2] - signs[m] * level }))
  const ux = p[j.at] - p[i.at], uy = p[j.at + 1] - p[i.at + 1], uz = j.z - i.z
  const vx = p[k.at] - p[i.at], vy = p[k.at + 1] - p[i.at + 1], vz = k.z - i.z
  const det = ux * vy - uy * vx
  const a = (uz * vy - uy * vz) / det
  const b = (ux * vz - uz * vx) / det
  return { a, b, c: i.z - a * p[i.at] - b * p[i.at + 1], signs, level }
}

/** Four corners to begin with: far apart in the plane, no three of them in line. */
function startingReference(p: Float64Array, count: number): Four {
  const far = (score: (k: number) => number): number => {
    let best = 0
    for (let k = 1; k < count; k += 1) if (score(k) > score(best)) best = k
    return best
  }
  const i = far((k) => -p[3 * k])
  const j = far((k) => Math.hypot(p[3 * k] - p[3 * i], p[3 * k + 1] - p[3 * i + 1]))
  const off = (k: number): number => (p[3 * j] - p[3 * i]) * (p[3 * k + 1] - p[3 * i + 1]) - (p[3 * j + 1] - p[3 * i + 1]) * (p[3 * k] - p[3 * i])
  const k = far((m) => Math.abs(off(m)))
  const l = far((m) => (m === i || m === j || m === k ? -1 : Math.min(...dependency(p, [i, j, k, m]).map(Math.abs)) + 1e-9 * Math.abs(off(m))))
  return [i, j, k, l]
}

/** The reference with `enter` in place of the corner that keeps the levels growing; null when no exchange is possible. */
function exchange(p: Float64Array, four: Four, signs: readonly number[], enter: number, sign: number): Four | null {
  let best: Four | null = null
  let bestLevel = -1
  for (let out = 0; out < 4; out += 1) {
    const next = four.map((k, i) => (i === out ? enter : k)) as unknown as Four
    const w = dependency(p, next)
    // The entering corner must keep the sign of its distance, up to the common sign of the dependency.
    const flip = Math.sign(w[out]) * sign
    if (flip === 0) continue
    if (next.some((_, i) => i !== out && Math.sign(w[i]) * flip === -signs[i] * Math.sign(levelled(p, four).level))) continue
    const level = Math.abs(levelled(p, next).level)
    if (Number.isFinite(level) && level > bestLevel) {
      bestLevel = level
      best = next
    }
  }
  return best
}
