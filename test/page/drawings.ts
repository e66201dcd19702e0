/** Drawings for the page's tests, invented, as the bytes of files. */

export interface File {
  readonly name: string
  readonly mimeType: string
  readonly buffer: Buffer
}

/** m x n bays of 1.5 m as OBJ, skewed by a fifth, with heights z. Its freedom with a free rim is m + n - 2 (z = f(x) + g(y), tilts not counted). */
export function grid(m: number, n: number, name = 'grid.obj', z: (i: number, j: number) => number = () => 0, skew = 0.2): File {
  const lines = ['# unit: m']
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) lines.push(`v ${1.5 * i + 1.5 * skew * j} ${1.5 * j} ${z(i, j)}`)
  for (let j = 0; j < n; j += 1) {
    for (let i = 0; i < m; i += 1) {
      const a = j * (m + 1) + i + 1
      lines.push(`f ${a} ${a + 1} ${a + m + 2} ${a + m + 1}`)
    }
  }
  return { name, mimeType: 'text/plain', buffer: Buffer.from(`${lines.join('\n')}\n`) }
}

/** 8 x 5 bays in mm as lines of a DXF, with an end that falls 0.3 mm short, a line drawn twice and a loose one. */
export function faulty(): File {
  const [m, n] = [8, 5]
  const at = (i: number, j: number): [number, number] => [1500 * i + 300 * j, 1500 * j]
  const lines: number[][] = []
  for (let j = 0; j <= n; j += 1) for (let i = 0; i < m; i += 1) lines.push([...at(i, j), ...at(i + 1, j)])
  for (let j = 0; j < n; j += 1) for (let i = 0; i <= m; i += 1) lines.push([...at(i, j), ...at(i, j + 1)])
  lines[10]![2] = lines[10]![2]! - 0.3
  lines.push([...lines[3]!], [2000, 400, 2500, 900])
  const entity = (line: number[]): string[] => ['0', 'LINE', '8', 'GLAZING', '10', `${line[0]}`, '20', `${line[1]}`, '11', `${line[2]}`, '21', `${line[3]}`]
  const text = ['0', 'SECTION', '2', 'HEADER', '9', '$INSUNITS', '70', '4', '0', 'ENDSEC', '0', 'SECTION', '2', 'ENTITIES', ...lines.flatMap(entity), '0', 'ENDSEC', '0', 'EOF']
  return { name: 'faulty.dxf', mimeType: 'application/dxf', buffer: Buffer.from(`${text.join('\n')}\n`) }
}

export function broken(): File {
  const text = ['0', 'SECTION', '2', 'ENTITIES', '0', 'LINE', '8', '0', '10', 'abc', '20', '0', '11', '1', '21', '1', '0', 'ENDSEC', '0', 'EOF']
  return { name: 'broken.dxf', mimeType: 'application/dxf', buffer: Buffer.from(`${text.join('\n')}\n`) }
}

/** An OBJ read by a reader of its own: nothing of the program's. */
export function readObj(text: string): { nodes: [number, number, number][]; faces: number[][] } {
  const nodes: [number, number, number][] = []
  const faces: number[][] = []
  for (const line of text.split(/\r?\n/)) {
    const words = line.trim().split(/\s+/)
    if (words[0] === 'v') nodes.push([Number(words[1]), Number(words[2]), Number(words[3])])
    if (words[0] === 'f') faces.push(words.slice(1).map((word) => Number(word.split('/')[0]) - 1))
  }
  return { nodes, faces }
}

/** Largest distance, in mm, of a quad's fourth corner from the plane of the other three. */
export function fourthCorner_mm({ nodes, faces }: ReturnType<typeof readObj>): number {
  let most = 0
  for (const face of faces) {
    const [a, b, c, d] = face.map((i) => nodes[i]!) as unknown as [number[], number[], number[], number[]]
    const [u, v, w] = [b, c, d].map((p) => p.map((value, k) => value - a[k]!)) as [number[], number[], number[]]
    const normal = [u[1]! * v[2]! - u[2]! * v[1]!, u[2]! * v[0]! - u[0]! * v[2]!, u[0]! * v[1]! - u[1]! * v[0]!]
    most = Math.max(most, Math.abs(normal.reduce((sum, value, k) => sum + value * w[k]!, 0)) / Math.hypot(...normal))
  }
  return 1000 * most
}

/** Gradient of a panel through its first three corners. */
export function gradient({ nodes, faces }: ReturnType<typeof readObj>, panel: number): [number, number] {
  const [a, b, c] = faces[panel]!.map((i) => nodes[i]!) as unknown as [number[], number[], number[]]
  const [ux, uy, uz] = [b[0]! - a[0]!, b[1]! - a[1]!, b[2]! - a[2]!]
  const [vx, vy, vz] = [c[0]! - a[0]!, c[1]! - a[1]!, c[2]! - a[2]!]
  const det = ux * vy - uy * vx
  return [(uz * vy - uy * vz) / det, (ux * vz - uz * vx) / det]
}

export const project = (text: string, name = 'other.panewise.json'): File => ({ name, mimeType: 'application/json', buffer: Buffer.from(text) })
