/** A roof in the middle of everything else that an office's drawing holds: for reading what is large and mostly beside the point. */
import { random } from '../../src/base/random.ts'

/** A grid of m x n panes of 1.5 m among furniture in blocks, hatches and letters drawn as strokes, as DXF in mm; `segments` in all. */
export function clutteredDxf(m: number, n: number, segments: number, seed = 1): string {
  const next = random(seed)
  const entities: string[] = []
  const line = (layer: string, x1: number, y1: number, x2: number, y2: number): void => {
    entities.push(`0\nLINE\n8\n${layer}\n10\n${x1.toFixed(3)}\n20\n${y1.toFixed(3)}\n11\n${x2.toFixed(3)}\n21\n${y2.toFixed(3)}\n`)
  }
  let drawn = 0
  const bay = 1500
  for (let j = 0; j <= n; j += 1) for (let i = 0; i <= m; i += 1) {
    if (i < m) line('ROOF', i * bay, j * bay, (i + 1) * bay, j * bay)
    if (j < n) line('ROOF', i * bay, j * bay, i * bay, (j + 1) * bay)
    drawn += (i < m ? 1 : 0) + (j < n ? 1 : 0)
  }
  // A chair of 20 lines as a block, put in turned.
  const chair = Array.from({ length: 20 }, (_, k) => {
    const [a, b] = [(k * Math.PI) / 10, ((k + 1) * Math.PI) / 10]
    return `0\nLINE\n8\n0\n10\n${(300 * Math.cos(a)).toFixed(3)}\n20\n${(300 * Math.sin(a)).toFixed(3)}\n11\n${(300 * Math.cos(b)).toFixed(3)}\n21\n${(300 * Math.sin(b)).toFixed(3)}\n`
  }).join('')
  const [width, depth] = [m * bay, n * bay]
  for (let kind = 0; drawn < segments; kind = (kind + 1) % 3) {
    const [x, y] = [next() * width * 1.4 - 0.2 * width, next() * depth * 1.4 - 0.2 * depth]
    if (kind === 0) {
      entities.push(`0\nINSERT\n8\nFURNITURE\n2\nCHAIR\n10\n${x.toFixed(3)}\n20\n${y.toFixed(3)}\n50\n${(360 * next()).toFixed(3)}\n`)
      drawn += 20
    } else if (kind === 1) {
      // A hatch of 60 strokes across a wall of 6 m.
      for (let k = 0; k < 60; k += 1) line('HATCH', x + 100 * k, y, x + 100 * k + 240, y + 240)
      drawn += 60
    } else {
      for (let k = 0; k < 20; k += 1) line('TEXT', x + 80 * k, y, x + 80 * k + 60 * next(), y + 90 * next())
      drawn += 20
    }
  }
  return `0\nSECTION\n2\nHEADER\n9\n$INSUNITS\n70\n4\n0\nENDSEC\n0\nSECTION\n2\nBLOCKS\n0\nBLOCK\n8\n0\n2\nCHAIR\n10\n0\n20\n0\n${chair}0\nENDBLK\n0\nENDSEC\n0\nSECTION\n2\nENTITIES\n${entities.join('')}0\nENDSEC\n0\nEOF\n`
}
