/**
 * Minimum zone: the least distance between two parallel planes that enclose all corners (flatness as ISO 1101 defines it).
 *
 * The optimal pair touches three corners and one, or two and two, so for up to a dozen corners every such candidate is
 * measured over all corners; above, the three-variable linear program min t, |z - a x - b y - c| <= t in the frame of the
 * best plane is solved by exchange (Chebyshev fit, one corner in, one out: Stiefel 1959), re-framed until it rests.
 */
import { chebyshevPlane } from './chebyshev-plane.ts'
import { leastSquaresPlane, leastSquaresZone, noCorner } from './least-squares-plane.ts'

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

const plane = new Float64Array(6)

/** Every candidate normal in turn; one is given up at the first corner that makes it wider than the best so far. */
function zoneByEnumeration(p: Float64Array, offset: number, count: number): number {
  // The least-squares plane's zone is an upper bound and sends most candidates away early.
  let best = leastSquaresZone(p, offset, count, plane)
  let reach = 0
  for (let k = 1; k < count; k += 1) {
    const at = offset + 3 * k
    const dx = p[at] - p[offset], dy = p[at + 1] - p[offset + 1], dz = p[at + 2] - p[offset + 2]
    reach = Math.max(reach, dx * dx + dy * dy + dz * dz)
  }
  // A cross product below rounding of the size squared has no direction.
  const least = reach * 2 ** -44
  const end = offset + 3 * count
  for (let a = offset; a < end; a += 3) {
    for (let b = a + 3; b < end; b += 3) {
      const ux = p[b] - p[a], uy = p[b + 1] - p[a + 1], uz = p[b + 2] - p[a + 2]
      // Three corners a, b, d with d after b (c = a), then the pair (a, b) against every pair (c, d) with c after a.
      for (let c = a; c < end; c += 3) {
        if (c === b) continue
        for (let d = c === a ? b + 3 : c + 3; d < end; d += 3) {
          if (d === b) continue
          const vx = p[d] - p[c], vy = p[d + 1] - p[c + 1], vz = p[d + 2] - p[c + 2]
          const nx = uy * vz - uz * vy, ny = uz * vx - ux * vz, nz = ux * vy - uy * vx
          if (!(Math.abs(nx) > least || Math.abs(ny) > least || Math.abs(nz) > least)) continue
          const length = Math.sqrt(nx * nx + ny * ny + nz * nz)
          const bound = best * length
          let low = 0, high = 0
          for (let k = offset; k < end && high - low < bound; k += 3) {
            const t = nx * (p[k] - p[a]) + ny * (p[k + 1] - p[a + 1]) + nz * (p[k + 2] - p[a + 2])
            if (t < low) low = t
            else if (t > high) high = t
          }
          if (high - low < bound) best = (high - low) / length
        }
      }
    }
  }
  return best
}

/** Exchange in a frame whose third axis is the current normal; the frame turns to each solution until it stays. */
function zoneByExchange(points: Float64Array, offset: number, count: number): number {
  leastSquaresPlane(points, offset, count, noCorner, plane)
  let normal: readonly [number, number, number] = [plane[3], plane[4], plane[5]]
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
