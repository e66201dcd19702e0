/** The files of raise, read again by a reader that shares no code with the program. */
import { readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { columnOf, flatness, readCsv, readObj, type ReadObj } from '../oracle/second-reader.ts'
import { gridObj, program, type Program } from './program.ts'

let cli: Program
beforeAll(async () => {
  cli = await program()
  cli.file('bays.obj', gridObj(12, 8, 1.5))
  // Nodes on radii and rings: an ordinary plan whose coordinates are no round numbers, far from the origin, with a void.
  const [rings, radii] = [5, 14]
  const lines: string[] = []
  for (let r = 1; r <= rings; r += 1) {
    for (let k = 0; k < radii; k += 1) {
      const turn = (2 * Math.PI * (k + 0.1 * Math.sin(3 * k))) / radii
      lines.push(`v ${3_456_000 + r * 1.7 * Math.cos(turn)} ${5_700_000 + r * 1.7 * Math.sin(turn)}`)
    }
  }
  for (let r = 0; r < rings - 1; r += 1) {
    for (let k = 0; k < radii; k += 1) {
      const [a, b] = [r * radii + k + 1, r * radii + ((k + 1) % radii) + 1]
      lines.push(`f ${a} ${b} ${b + radii} ${a + radii}`)
    }
  }
  cli.file('ring.obj', `${lines.map((line) => (line.startsWith('v') ? `${line} 0` : line)).join('\n')}\n`)
})
afterAll(() => cli.close())

const read = (name: string): string => readFileSync(join(cli.room, name), 'utf8')
interface Summary {
  verdict: string
  near?: boolean
  files: string[]
  roof: { rise: number; rimVariation: number; cornerMax_mm: number; flatnessMax_mm: number; flatnessRms_mm: number }
}
const summaryOf = (folder: string): Summary => JSON.parse(read(`${folder}/summary.json`)) as Summary

type Node = readonly [number, number, number]

/** Area vector of a polygon by triangles from its middle (not from its first corner, as the program has it). */
function areaVector(nodes: readonly Node[]): Node {
  const c: Node = [0, 1, 2].map((i) => nodes.reduce((sum, node) => sum + node[i]!, 0) / nodes.length) as unknown as Node
  let [x, y, z] = [0, 0, 0]
  nodes.forEach((a, i) => {
    const b = nodes[(i + 1) % nodes.length]!
    const [p, q] = [[a[0] - c[0], a[1] - c[1], a[2] - c[2]], [b[0] - c[0], b[1] - c[1], b[2] - c[2]]] as const
    x += (p[1] * q[2] - p[2] * q[1]) / 2
    y += (p[2] * q[0] - p[0] * q[2]) / 2
    z += (p[0] * q[1] - p[1] * q[0]) / 2
  })
  return [x, y, z]
}

describe.each([
  ['a barrel over bays', 'bays.obj', ['--shape', 'barrel', '--rise', '2.4']],
  ['a dome over a ring, survey coordinates', 'ring.obj', ['--shape', 'dome', '--rise', '3']],
  ['a barrel, rounded to a millimetre', 'bays.obj', ['--decimals', '3', '--shape', 'dome']],
  ['the nearest roof under a level rim', 'bays.obj', ['--rim', 'level', '--near']],
])('%s', (_name, plan, words) => {
  const folder = `out-${words.join('').replace(/\W/g, '')}`
  let obj: ReadObj
  let summary: Summary

  test('every file is there, and nothing else', () => {
    const { code, err } = cli.run(['raise', plan, '--out', folder, ...words])
    expect(err).toBe('')
    expect([0, 1, 3]).toContain(code)
    expect(readdirSync(join(cli.room, folder)).sort()).toEqual(['joints.csv', 'nodes.csv', 'panels.csv', 'roof.obj', 'summary.json'])
    obj = readObj(read(`${folder}/roof.obj`))
    summary = summaryOf(folder)
    expect(summary.files).toEqual(['roof.obj', 'panels.csv', 'joints.csv', 'nodes.csv', 'summary.json'])
    expect(obj.panels.map(({ name }) => name)).toEqual(obj.panels.map((_, p) => `P${p + 1}`))
    expect(obj.comments.join(' ')).toContain('This is geometry only.')
  })

  test('flatness, rise and rim as the summary says, measured anew', () => {
    const { zone, corner, zones, corners } = flatness(obj)
    // Coordinates of 6e6 m leave 1e-9 m; the measure itself is good to 1e-12 of a panel.
    const close = (mm: number, metres: number): void => expect(Math.abs(mm - metres * 1000)).toBeLessThan(5e-6)
    close(summary.roof.flatnessMax_mm, zone)
    close(summary.roof.cornerMax_mm, corner)
    close(summary.roof.flatnessRms_mm, Math.sqrt(zones.reduce((sum, each) => sum + each * each, 0) / zones.length))
    const panels = readCsv(read(`${folder}/panels.csv`))
    columnOf(panels, 'flatness_mm').forEach((mm, p) => close(Number(mm), zones[p]!))
    columnOf(panels, 'corner_mm').forEach((mm, p) => close(Number(mm), corners[p]!))
    const edges = new Map<string, number>()
    for (const { corners: nodes } of obj.panels) {
      nodes.forEach((a, i) => {
        const b = nodes[(i + 1) % nodes.length]!
        const key = `${Math.min(a, b)} ${Math.max(a, b)}`
        edges.set(key, (edges.get(key) ?? 0) + 1)
      })
    }
    // The outer rim is the rim loop with the largest radius about the middle: here all rim nodes that are not nearest to it.
    const rim = new Set([...edges].filter(([, count]) => count === 1).flatMap(([key]) => key.split(' ').map(Number)))
    const mid = [0, 1].map((i) => obj.nodes.reduce((sum, node) => sum + node[i]!, 0) / obj.nodes.length)
    const far = (n: number): number => Math.hypot(obj.nodes[n]![0] - mid[0]!, obj.nodes[n]![1] - mid[1]!)
    const outer = [...rim].filter((n) => plan === 'bays.obj' || far(n) > 5)
    const levels = outer.map((n) => obj.nodes[n]![2])
    const rounding = words.includes('--decimals') ? 1e-3 : 2e-6
    expect(Math.abs(Math.max(...levels) - Math.min(...levels) - summary.roof.rimVariation)).toBeLessThan(rounding)
    expect(Math.abs(Math.max(...obj.nodes.map((node) => node[2])) - Math.min(...levels) - summary.roof.rise)).toBeLessThan(rounding)
  })

  test('areas, slopes, falls, lengths and folds of the lists follow from the model', () => {
    const panels = readCsv(read(`${folder}/panels.csv`))
    const joints = readCsv(read(`${folder}/joints.csv`))
    const nodes = readCsv(read(`${folder}/nodes.csv`))
    const rounded = words.includes('--decimals')
    const tolerance = rounded ? 2e-3 : 5e-6
    const normals = obj.panels.map(({ corners }) => areaVector(corners.map((n) => obj.nodes[n]!)))
    columnOf(panels, 'area_m2').forEach((area, p) => expect(Math.abs(Number(area) - Math.hypot(...normals[p]!))).toBeLessThan(tolerance))
    columnOf(panels, 'plan_area_m2').forEach((area, p) => expect(Math.abs(Number(area) - normals[p]![2])).toBeLessThan(tolerance))
    columnOf(panels, 'slope_deg').forEach((slope, p) => {
      const [x, y, z] = normals[p]!
      expect(Math.abs(Number(slope) - (Math.atan2(Math.hypot(x, y), z) * 180) / Math.PI)).toBeLessThan(100 * tolerance)
    })
    columnOf(panels, 'fall_deg').forEach((fall, p) => {
      const [x, y, z] = normals[p]!
      if (Math.hypot(x, y) < 0.01 * z) return
      const bearing = ((Math.atan2(x, y) * 180) / Math.PI + 360) % 360
      expect(Math.abs(((Number(fall) - bearing + 540) % 360) - 180)).toBeLessThan(1e4 * tolerance)
    })
    const sides = new Map<string, number[]>()
    obj.panels.forEach(({ corners }, p) =>
      corners.forEach((a, i) => {
        const b = corners[(i + 1) % corners.length]!
        const key = `N${Math.min(a, b) + 1} N${Math.max(a, b) + 1}`
        sides.set(key, [...(sides.get(key) ?? []), p])
      }),
    )
    const inner = [...sides].filter(([, two]) => two.length === 2)
    expect(joints.length - 1).toBe(inner.length)
    const fold = columnOf(joints, 'fold_deg')
    const dihedral = columnOf(joints, 'dihedral_deg')
    const word = columnOf(joints, 'fold')
    const to = columnOf(joints, 'to')
    const force = columnOf(joints, 'form_force_no_load')
    const length = columnOf(joints, 'length_m')
    columnOf(joints, 'from').forEach((from, j) => {
      const [a, b] = [from, to[j]!].map((name) => obj.nodes[Number(name.slice(1)) - 1]!)
      expect(Math.abs(Number(length[j]) - Math.hypot(a![0] - b![0], a![1] - b![1], a![2] - b![2]))).toBeLessThan(tolerance)
      const [one, two] = sides.get(`${from} ${to[j]!}`)!.map((p) => normals[p]!)
      const dot = one![0] * two![0] + one![1] * two![1] + one![2] * two![2]
      const across = Math.hypot(one![1] * two![2] - one![2] * two![1], one![2] * two![0] - one![0] * two![2], one![0] * two![1] - one![1] * two![0])
      const angle = (Math.atan2(across, dot) * 180) / Math.PI
      expect(Math.abs(Number(fold[j]) - angle)).toBeLessThan(200 * tolerance)
      expect(Number(dihedral[j])).toBeCloseTo(word[j] === 'ridge' ? 180 - Number(fold[j]) : 180 + Number(fold[j]), 6)
      if (!summary.near) {
        // The jump of the gradient is the form force: positive at a valley.
        const jump = Math.hypot(one![0] / one![2] - two![0] / two![2], one![1] / one![2] - two![1] / two![2])
        expect(Math.abs(Math.abs(Number(force[j])) - jump)).toBeLessThan(4 * tolerance)
        if (jump > 10 * tolerance) expect(word[j]).toBe(Number(force[j]) > 0 ? 'valley' : 'ridge')
      }
    })
    columnOf(nodes, 'z').forEach((z, n) => expect(z).toBe(obj.digits[n]![2]))
    columnOf(nodes, 'x').forEach((x, n) => expect(x).toBe(obj.digits[n]![0]))
    expect(columnOf(nodes, 'valence').reduce((sum, each) => sum + Number(each), 0)).toBe(2 * sides.size)
  })
})

test('x and y are exactly the plan\'s', () => {
  const given = new Set(readFileSync(join(cli.room, 'ring.obj'), 'utf8').split('\n').filter((line) => line.startsWith('v')).map((line) => line.split(' ').slice(1, 3).map(Number).join(' ')))
  expect(cli.run(['raise', 'ring.obj', '--out', 'exact']).code).toBe(0)
  const obj = readObj(read('exact/roof.obj'))
  expect(obj.nodes.length).toBe(given.size)
  for (const [x, y] of obj.nodes) expect(given).toContain(`${x} ${y}`)
})

describe('what is written when', () => {
  test('does not lift: the summary alone, unless the near roof is asked for', () => {
    const { code, out } = cli.run(['raise', 'bays.obj', '--rim', 'level', '--out', 'no'])
    expect(code).toBe(1)
    expect(readdirSync(join(cli.room, 'no'))).toEqual(['summary.json'])
    expect(summaryOf('no').files).toEqual(['summary.json'])
    expect(out).toContain('Written to no: summary.json.')
    const near = cli.run(['raise', 'bays.obj', '--rim', 'level', '--out', 'no', '--near', '--overwrite'])
    expect(near.code).toBe(1)
    expect(summaryOf('no')).toMatchObject({ near: true, verdict: 'does not lift' })
    expect(read('no/roof.obj')).toContain('its panels are not exactly flat')
    // Going back to no roof takes the roof away: files of two runs never stand together.
    expect(cli.run(['raise', 'bays.obj', '--rim', 'level', '--out', 'no', '--overwrite']).code).toBe(1)
    expect(readdirSync(join(cli.room, 'no'))).toEqual(['summary.json'])
  })

  test('lifts within tolerance: the near roof', () => {
    expect(cli.run(['raise', 'bays.obj', '--rim', 'level', '--flat', '10m', '--out', 'within']).code).toBe(3)
    expect(readdirSync(join(cli.room, 'within')).length).toBe(5)
  })

  test('check writes nothing, whatever it is given; bad input neither', () => {
    const before = readdirSync(cli.room)
    expect(cli.run(['check', 'bays.obj', '--out', 'never']).code).toBe(0)
    cli.file('empty.obj', '')
    expect(cli.run(['raise', 'empty.obj', '--out', 'never/ever']).code).toBe(2)
    expect(cli.run(['raise', 'bays.obj', '--brief', 'bays.obj', '--out', 'never']).code).toBe(2)
    expect(readdirSync(cli.room).sort()).toEqual([...before, 'empty.obj'].sort())
  })

  test('foreign files stay; ours are replaced only when asked', () => {
    expect(cli.run(['raise', 'bays.obj', '--out', 'kept']).code).toBe(0)
    writeFileSync(join(cli.room, 'kept/notes.txt'), 'mine')
    const first = read('kept/roof.obj')
    const { code, err } = cli.run(['raise', 'bays.obj', '--rise', '2', '--out', 'kept'])
    expect([code, err]).toEqual([2, 'kept: roof.obj is there already; name another folder with --out, or add --overwrite to replace it.\n'])
    expect(read('kept/roof.obj')).toBe(first)
    expect(cli.run(['raise', 'bays.obj', '--rise', '2', '--out', 'kept', '--overwrite']).code).toBe(0)
    expect(read('kept/roof.obj')).not.toBe(first)
    expect(read('kept/notes.txt')).toBe('mine')
  })

  test('an input is never replaced, not even with --overwrite', () => {
    cli.file('roof.obj', gridObj(2, 2, 1))
    const { code, err } = cli.run(['raise', 'roof.obj', '--out', '.', '--overwrite'])
    expect([code, err]).toEqual([2, 'roof.obj: the output would replace this input; name another folder with --out.\n'])
    expect(read('roof.obj')).toBe(gridObj(2, 2, 1))
    rmSync(join(cli.room, 'roof.obj'))
  })

  test('same input, same bytes', () => {
    for (const folder of ['one', 'two']) expect(cli.run(['raise', 'ring.obj', '--out', folder, '--full']).code).toBe(0)
    for (const name of readdirSync(join(cli.room, 'one'))) expect(read(`one/${name}`)).toBe(read(`two/${name}`))
  })

  test('--csv semicolon: decimal commas in the lists', () => {
    expect(cli.run(['raise', 'bays.obj', '--csv', 'semicolon', '--out', 'semi']).code).toBe(0)
    const rows = readCsv(read('semi/panels.csv'), ';')
    expect(columnOf(rows, 'plan_area_m2')[0]).toBe('2,250000')
    rmSync(join(cli.room, 'semi'), { recursive: true })
  })
})
