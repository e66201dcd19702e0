/**
 * Minimum zone: the least distance between two parallel planes that enclose all corners (flatness as ISO 1101 defines it).
 *
 * The optimal pair touches three corners and one, or two and two, so for up to a dozen corners every such candidate is
 * measured over all corners; above, the three-variable linear program min t, |z - a x - b y - c| <= t in the frame of the
 * best plane is solved by exchange (Chebyshev fit, one corner in, one out: Stiefel 1959), re-framed until it rests.
 */
import { chebyshevPlane } from './chebyshev-plane.ts'
import { leastSquaresPlane, noCorner } from './least-squares-plane.ts'

/** Up to here the candidates are enumerated: 12 corners make 220 + 1485 of them. */
const enumerated = 12

/** Minimum zone of `count` corners, x y z x y z .. from `offset`, in their own unit. */
export function minimumZone(points: Float64Array, offset: number, count: number): number {
  if (count <= 3) return 0
  return count <= enumerated ? zoneByEnumeration(points, offset, count) : zoneByExchange(points, offset, count)
}

/** Distance between the planes of normal (nx, ny, nz) that enclose the corners; the normal need not be of length 1. */
function zoneAlong(points: Float64Array, offset: number, count: number, nx: number, ny: number, nz: number): number {
  let low = Infinity, high = -Infinity
  const x0 = points[offset], y0 = points[offset + 1], z0 = points[offset + 2]
  for (let k = offset; k < offset + 3 * count; k += 3) {
    const t = nx * (points[k] - x0) + ny * (points[k + 1] - y0) + nz * (points[k + 2] - z0)
    if (t < low) low = t
    if (t > high) high = t
  }
  return (high - low) / Math.sqrt(nx * nx + ny * ny + nz * nz)
}

function zoneByEnumeration(p: Float64Array, offset: number, count: number): number {
  let best = Infinity
  let reach = 0
  for (let k = 1; k < count; k += 1) {
    const at = offset + 3 * k
    reach = Math.max(reach, Math.hypot(p[at] - p[offset], p[at + 1] - p[offset + 1], p[at + 2] - p[offset + 2]))
  }
  // A cross product below rounding of the size squared has no direction.
  const least = reach * reach * 2 ** -44
  const attempt = (ax: number, ay: number, az: number, bx: number, by: number, bz: number): void => {
    const nx = ay * bz - az * by, ny = az * bx - ax * bz, nz = ax * by - ay * bx
    if (!(Math.max(Math.abs(nx), Math.abs(ny), Math.abs(nz)) > least)) return
    const zone = zoneAlong(p, offset, count, nx, ny, nz)
    if (zone < best) best = zone
  }
  for (let i = 0; i < count; i += 1) {
    const a = offset + 3 * i
    for (let j = i + 1; j < count; j += 1) {
      const b = offset + 3 * j
      const ux = p[b] - p[a], uy = p[b + 1] - p[a + 1], uz = p[b + 2] - p[a + 2]
      for (let k = j + 1; k < count; k += 1) {
        const c = offset + 3 * k
        attempt(ux, uy, uz, p[c] - p[a], p[c + 1] - p[a + 1], p[c + 2] - p[a + 2])
      }
      // The pair (i, j) against every pair (k, l) with k > i that shares no corner with it.
      for (let k = i + 1; k < count; k += 1) {
        if (k === j) continue
        for (let l = k + 1; l < count; l += 1) {
          if (l === j) continue
          const c = offset + 3 * k, d = offset + 3 * l
          attempt(ux, uy, uz, p[d] - p[c], p[d + 1] - p[c + 1], p[d + 2] - p[c + 2])
        }
      }
    }
  }
  return best === Infinity ? 0 : best
}

/** Exchange in a frame whose third axis is the current normal; the frame turns to each solution until it stays. */
function zoneByExchange(points: Float64Array, offset: number, count: number): number {
  let normal: readonly [number, number, number] = leastSquaresPlane(points, offset, count, noCorner).normal
  let best = zoneAlong(points, offset, count, normal[0], normal[1], normal[2])
  for (let turn = 0; turn < 20; turn += 1) {
    const [u, v] = axesAcross(normal)
    const local = new Float64Array(3 * count)
    for (let k = 0; k < count; k += 1) {
      const x = points[offset + 3 * k] - points[offset], y = points[offset + 3 * k + 1] - points[offset + 1], z = points[offset + 3 * k + 2] - points[offset + 2]
      local[3 * k] = u[0] * x + u[1] * y + u[2] * z
      local[3 * k + 1] = v[0] * x + v[1] * y + v[2] * z
      local[3 * k + 2] = normal[0] * x + normal[1] * y + normal[2] * z
    }
    const [a, b] = chebyshevPlane(local, count)
    const next = [0, 1, 2].map((i) => normal[i] - a * u[i] - b * v[i])
    const length = Math.hypot(...next)
    const turned: readonly [number, number, number] = [next[0] / length, next[1] / length, next[2] / length]
    const zone = zoneAlong(points, offset, count, turned[0], turned[1], turned[2])
    if (!(zone < best * (1 - 1e-12))) return Math.min(best, zone)
    best = zone
    normal = turned
  }
  return best
}

function axesAcross(n: readonly [number, number, number]): [readonly number[], readonly number[]] {
  const helper = Math.abs(n[0]) < 0.6 ? [1, 0, 0] : [0, 1, 0]
  const u = [n[1] * helper[2] - n[2] * helper[1], n[2] * helper[0] - n[0] * helper[2], n[0] * helper[1] - n[1] * helper[0]]
  const length = Math.hypot(...u)
  const unit = u.map((value) => value / length)
  return [unit, [n[1] * unit[2] - n[2] * unit[1], n[2] * unit[0] - n[0] * unit[2], n[0] * unit[1] - n[1] * unit[0]]]
}
