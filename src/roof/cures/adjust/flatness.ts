/**
 * Flatness of the panels as conditions on positions and heights together. For a panel with k corners let X = [1 x y] and N an
 * orthonormal basis of what is orthogonal to its columns (k x (k - 3)). Its corners lie in one plane when N^T z = 0. Moving
 * the corners by dp and dz, with the plane's gradient a, changes that by
 *     N^T (dz - a . dp)
 * up to products of small quantities: the plane's own three unknowns are eliminated, panel by panel.
 */
import type { Plan } from '../../../plan/plan.ts'
import type { RowBlock } from './rows.ts'

/** The most corners of any panel. */
function widestPanel({ panelStart, panelCount }: Plan): number {
  let most = 3
  for (let p = 0; p < panelCount; p += 1) most = Math.max(most, panelStart[p + 1] - panelStart[p])
  return most
}

export function flatnessBlock(plan: Plan): RowBlock {
  const { panelStart, corner, panelCount, work: drawn } = plan
  const counts: number[] = []
  const node: number[] = []
  const at: number[] = []
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], count = panelStart[p + 1] - from
    let x = 0, y = 0
    for (let k = 0; k < count; k += 1) {
      x += drawn[2 * corner[from + k]] / count
      y += drawn[2 * corner[from + k] + 1] / count
    }
    for (let j = 0; j < count - 3; j += 1) {
      counts.push(count)
      at.push(x, y)
      for (let k = 0; k < count; k += 1) node.push(corner[from + k])
    }
  }
  const panel = panelRoom(widestPanel(plan))
  return {
    counts: Int32Array.from(counts), node: Int32Array.from(node), at: Float64Array.from(at),
    give: 0,
    fill({ work, heights }, { cx, cy, cz, right }, firstEntry, firstRow) {
      let entry = firstEntry, row = firstRow
      for (let p = 0; p < panelCount; p += 1) {
        const from = panelStart[p], count = panelStart[p + 1] - from
        if (count === 3) continue
        panel.take(corner, from, count, work, heights)
        for (let j = 0; j < count - 3; j += 1) {
          let misfit = 0
          for (let k = 0; k < count; k += 1) {
            const weight = panel.basis[j * count + k]
            cz[entry] = weight
            cx[entry] = -weight * panel.slope[0]
            cy[entry] = -weight * panel.slope[1]
            misfit += weight * panel.z[k]
            entry += 1
          }
          right[row++] = -misfit
        }
      }
    },
  }
}

/** |N^T z| summed over the panels: the size of what is unflat, in spans. */
export function unflatness(plan: Plan, work: Float64Array, heights: Float64Array): { sum: number; largest: number } {
  const { panelStart, corner, panelCount } = plan
  const panel = panelRoom(widestPanel(plan))
  let sum = 0, largest = 0
  for (let p = 0; p < panelCount; p += 1) {
    const from = panelStart[p], count = panelStart[p + 1] - from
    if (count === 3) continue
    panel.take(corner, from, count, work, heights)
    let squares = 0
    for (let j = 0; j < count - 3; j += 1) {
      let misfit = 0
      for (let k = 0; k < count; k += 1) misfit += panel.basis[j * count + k] * panel.z[k]
      squares += misfit * misfit
    }
    sum += Math.sqrt(squares)
    largest = Math.max(largest, Math.sqrt(squares))
  }
  return { sum, largest }
}

interface PanelRoom {
  /** Row j of N^T at basis[j * k ..]. */
  readonly basis: Float64Array
  /** Heights of the corners from the first one. */
  readonly z: Float64Array
  /** Gradient of the least-squares plane. */
  readonly slope: Float64Array
  take(corner: Int32Array, from: number, count: number, work: Float64Array, heights: Float64Array): void
}

/** Room for one panel at a time: N by three Householder reflections of [1 x y] (A. Householder 1958), exact to rounding. */
function panelRoom(widest: number): PanelRoom {
  const q = new Float64Array(3 * widest)
  const basis = new Float64Array(widest * widest)
  const z = new Float64Array(widest)
  const slope = new Float64Array(2)
  const r = new Float64Array(9)
  const turned = new Float64Array(widest)
  return {
    basis, z, slope,
    take(corner, from, count, work, heights) {
      const first = corner[from]
      const x0 = work[2 * first], y0 = work[2 * first + 1]
      let reach = 0
      for (let k = 0; k < count; k += 1) {
        const n = corner[from + k]
        z[k] = heights[n] - heights[first]
        turned[k] = z[k]
        q[k] = 1
        q[count + k] = work[2 * n] - x0
        q[2 * count + k] = work[2 * n + 1] - y0
        reach = Math.max(reach, Math.abs(q[count + k]), Math.abs(q[2 * count + k]))
      }
      for (let k = count; k < 3 * count; k += 1) q[k] /= reach
      // Column c becomes the c-th reflection's vector v, scaled so that H = I - v v^T.
      for (let c = 0; c < 3; c += 1) {
        const column = c * count
        let squares = 0
        for (let k = c; k < count; k += 1) squares += q[column + k] ** 2
        const head = q[column + c]
        const alpha = head > 0 ? -Math.sqrt(squares) : Math.sqrt(squares)
        r[3 * c + c] = alpha
        const scale = Math.sqrt(squares - head * alpha)
        q[column + c] = head - alpha
        for (let k = c; k < count; k += 1) q[column + k] = scale > 0 ? q[column + k] / scale : 0
        for (let d = c + 1; d < 3; d += 1) {
          reflect(q, column, c, count, q, d * count)
          r[3 * c + d] = q[d * count + c]
        }
        reflect(q, column, c, count, turned, 0)
      }
      // R (height, slopes) = first three of Q^T z.
      const gy = turned[2] / r[8]
      slope[0] = (turned[1] - r[5] * gy) / r[4] / reach
      slope[1] = gy / reach
      for (let j = 0; j < count - 3; j += 1) {
        const at = j * count
        basis.fill(0, at, at + count)
        basis[at + 3 + j] = 1
        for (let c = 2; c >= 0; c -= 1) reflect(q, c * count, c, count, basis, at)
      }
    },
  }
}

/** y <- (I - v v^T) y on the entries from c on. */
function reflect(v: Float64Array, vAt: number, c: number, count: number, y: Float64Array, yAt: number): void {
  let share = 0
  for (let k = c; k < count; k += 1) share += v[vAt + k] * y[yAt + k]
  for (let k = c; k < count; k += 1) y[yAt + k] -= share * v[vAt + k]
}
