/**
 * A second reader for what the program writes: OBJ and CSV parsed in the plainest way, panels measured by brute force.
 * It imports nothing from src, so that an error there cannot hide here.
 */

export type Point3 = readonly [x: number, y: number, z: number]

export interface ReadObj {
  readonly nodes: readonly Point3[]
  /** The digits of each node as they stand in the file. */
  readonly digits: readonly (readonly [string, string, string])[]
  readonly panels: readonly { readonly name: string; readonly corners: readonly number[] }[]
  readonly comments: readonly string[]
}

/** Reads `v`, `g` and `f` lines and comments; anything else is an error. Indices come back 0-based. */
export function readObj(text: string): ReadObj {
  const nodes: Point3[] = []
  const digits: [string, string, string][] = []
  const panels: { name: string; corners: number[] }[] = []
  const comments: string[] = []
  let group = ''
  for (const line of text.split('\n')) {
    if (line === '') continue
    if (line.startsWith('#')) {
      comments.push(line)
      continue
    }
    const words = line.split(' ')
    if (words[0] === 'v' && words.length === 4) {
      const three = words.slice(1).map((word) => {
        if (!/^-?\d+(\.\d+)?$/.test(word) || /^-0(\.0+)?$/.test(word)) throw new Error(`not a plain number: ${line}`)
        return Number(word)
      })
      nodes.push([three[0]!, three[1]!, three[2]!])
      digits.push([words[1]!, words[2]!, words[3]!])
    } else if (words[0] === 'g' && words.length === 2) group = words[1]!
    else if (words[0] === 'f' && words.length >= 4) {
      panels.push({
        name: group,
        corners: words.slice(1).map((word) => {
          const index = Number(word)
          if (!Number.isInteger(index) || index < 1 || index > nodes.length) throw new Error(`no such node: ${line}`)
          return index - 1
        }),
      })
    } else throw new Error(`unexpected line: ${line}`)
  }
  return { nodes, digits, panels, comments }
}

/** Rows of a CSV file as RFC 4180 has it: CR LF after every row, quotes doubled within quotes. */
export function readCsv(text: string, separator = ','): string[][] {
  const rows: string[][] = []
  let row: string[] = []
  let cell = ''
  let at = 0
  while (at < text.length) {
    if (text[at] === '"' && cell === '') {
      at += 1
      for (;;) {
        if (at >= text.length) throw new Error('a quote is not closed')
        if (text[at] === '"' && text[at + 1] === '"') {
          cell += '"'
          at += 2
        } else if (text[at] === '"') {
          at += 1
          break
        } else {
          cell += text[at]
          at += 1
        }
      }
      if (text[at] !== separator && text[at] !== '\r') throw new Error('text after a closing quote')
    } else if (text[at] === separator) {
      row.push(cell)
      cell = ''
      at += 1
    } else if (text[at] === '\r') {
      if (text[at + 1] !== '\n') throw new Error('CR without LF')
      row.push(cell)
      rows.push(row)
      row = []
      cell = ''
      at += 2
    } else if (text[at] === '\n') throw new Error('LF without CR')
    else {
      cell += text[at]
      at += 1
    }
  }
  if (cell !== '' || row.length > 0) throw new Error('the last row has no line end')
  const width = rows[0]?.length ?? 0
  for (const each of rows) if (each.length !== width) throw new Error(`a row has ${each.length} cells, the first ${width}`)
  return rows
}

/** The column with this title, as text. */
export function columnOf(rows: readonly (readonly string[])[], title: string): string[] {
  const at = rows[0]!.indexOf(title)
  if (at < 0) throw new Error(`no column ${title}`)
  return rows.slice(1).map((row) => row[at]!)
}

const minus = (a: Point3, b: Point3): Point3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
const dot = (a: Point3, b: Point3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
const cross = (a: Point3, b: Point3): Point3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]

/**
 * Least distance between two parallel planes that hold all points between them (flatness as ISO 1101 defines it). The
 * best pair touches three points and one, or two and two: every such direction is tried, each over all points.
 */
export function minimumZone(points: readonly Point3[]): number {
  if (points.length < 4) return 0
  let least = Infinity
  const size = Math.max(...points.map((p) => Math.hypot(...minus(p, points[0]!))))
  const attempt = (direction: Point3): void => {
    const length = Math.hypot(...direction)
    if (length < 1e-9 * size * size) return
    const along = points.map((p) => dot(minus(p, points[0]!), direction) / length)
    least = Math.min(least, Math.max(...along) - Math.min(...along))
  }
  const edges: Point3[] = []
  for (let i = 0; i < points.length; i += 1) for (let j = i + 1; j < points.length; j += 1) edges.push(minus(points[j]!, points[i]!))
  for (let a = 0; a < edges.length; a += 1) for (let b = a + 1; b < edges.length; b += 1) attempt(cross(edges[a]!, edges[b]!))
  return least === Infinity ? 0 : least
}

/** Largest distance of a corner from the least-squares plane of the others; others in a line hold no plane. */
export function cornerDeviation(points: readonly Point3[]): number {
  if (points.length < 4) return 0
  let largest = 0
  for (let out = 0; out < points.length; out += 1) {
    const others = points.filter((_, i) => i !== out)
    const normal = leastSquaresNormal(others)
    if (normal === null) continue
    const centre = mean(others)
    largest = Math.max(largest, Math.abs(dot(minus(points[out]!, centre), normal)))
  }
  return largest
}

const mean = (points: readonly Point3[]): Point3 => {
  const sum = points.reduce<Point3>((s, p) => [s[0] + p[0], s[1] + p[1], s[2] + p[2]], [0, 0, 0])
  return [sum[0] / points.length, sum[1] / points.length, sum[2] / points.length]
}

/**
 * Unit normal of the plane through the middle with the least sum of squared distances; null for points in a line. From
 * the largest triangle's normal by Newton steps on the sphere.
 */
function leastSquaresNormal(points: readonly Point3[]): Point3 | null {
  const centre = mean(points)
  const from = points.map((p) => minus(p, centre))
  const size = Math.max(...from.map((p) => Math.hypot(...p)))
  let start: Point3 | null = null
  let largest = 1e-6 * size * size
  for (let i = 0; i < from.length; i += 1) {
    for (let j = i + 1; j < from.length; j += 1) {
      const normal = cross(minus(from[i]!, from[0]!), minus(from[j]!, from[0]!))
      const length = Math.hypot(...normal)
      if (length > largest) {
        largest = length
        start = [normal[0] / length, normal[1] / length, normal[2] / length]
      }
    }
  }
  if (start === null) return null
  if (points.length === 3) return start
  // Newton on the sphere: n = n0 + a u + b v with u, v across n0; the sum of squares is a 2 x 2 quadratic in (a, b).
  let n: Point3 = start
  for (let round = 0; round < 30; round += 1) {
    const u0 = cross(n, Math.abs(n[0]) < 0.6 ? [1, 0, 0] : [0, 1, 0])
    const ul = Math.hypot(...u0)
    const u: Point3 = [u0[0] / ul, u0[1] / ul, u0[2] / ul]
    const v = cross(n, u)
    let [uu, uv, vv, un, vn, nn] = [0, 0, 0, 0, 0, 0]
    for (const p of from) {
      const [pu, pv, pn] = [dot(p, u), dot(p, v), dot(p, n)]
      uu += pu * pu
      uv += pu * pv
      vv += pv * pv
      un += pu * pn
      vn += pv * pn
      nn += pn * pn
    }
    const det = (uu - nn) * (vv - nn) - uv * uv
    if (det === 0) break
    const a = -((vv - nn) * un - uv * vn) / det
    const b = -((uu - nn) * vn - uv * un) / det
    const next: Point3 = [n[0] + a * u[0] + b * v[0], n[1] + a * u[1] + b * v[1], n[2] + a * u[2] + b * v[2]]
    const length = Math.hypot(...next)
    n = [next[0] / length, next[1] / length, next[2] / length]
    if (Math.hypot(a, b) < 1e-15) break
  }
  return n
}

/** Largest minimum zone and corner deviation over all panels of a file, in the file's unit. */
export function flatness(obj: ReadObj): { zone: number; corner: number; zones: number[]; corners: number[] } {
  const zones = obj.panels.map(({ corners }) => minimumZone(corners.map((n) => obj.nodes[n]!)))
  const corners = obj.panels.map((panel) => cornerDeviation(panel.corners.map((n) => obj.nodes[n]!)))
  return { zone: Math.max(0, ...zones), corner: Math.max(0, ...corners), zones, corners }
}
