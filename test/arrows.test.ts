/** Imports run one way. This reads every import of src and fails on an arrow that is not listed, and on any cycle. */
import { readFileSync, readdirSync } from 'node:fs'
import { dirname, join, relative } from 'node:path'
import { expect, test } from 'vitest'

const base = ['base', 'base/geometry', 'base/sparse']
const planRooms = ['plan', 'plan/regular', 'plan/project']
const cures = ['adjust', 'move', 'rim', 'joints', 'folds', 'clash', 'balance'].map((room) => `roof/cures/${room}`)
const roofRooms = ['roof/conditions', 'roof/stress', 'roof/raise', ...cures, 'roof/panels', 'roof/answer']
const paper = ['paper/drawing', 'paper/report']

/** room: the rooms it may import besides itself. */
const allowed: Record<string, readonly string[]> = {
  base: [],
  'base/geometry': ['base'],
  'base/sparse': ['base'],
  plan: ['base', 'base/geometry'],
  'plan/lines': ['base', 'base/geometry', 'plan'],
  'plan/regular': ['base', 'base/geometry', 'plan'],
  'plan/reading': ['base', 'base/geometry', 'plan', 'plan/lines', 'plan/regular'],
  'plan/project': ['base', 'plan'],
  'roof/conditions': ['base', 'base/geometry', 'plan', 'plan/project'],
  'roof/stress': [...base, 'plan', 'roof/conditions'],
  'roof/raise': [...base, ...planRooms, 'roof/conditions', 'roof/stress'],
  'roof/cures/adjust': [...base, 'plan', 'plan/regular', 'roof/conditions'],
  'roof/cures/move': [...base, 'plan', 'plan/project', 'roof/conditions', 'roof/stress', 'roof/raise', 'roof/cures/adjust'],
  'roof/cures/rim': [...base, 'plan', 'roof/conditions', 'roof/stress', 'roof/raise'],
  'roof/cures/joints': [...base, 'plan', 'plan/project', 'roof/conditions', 'roof/stress'],
  'roof/cures/folds': [...base, 'plan', 'roof/conditions', 'roof/stress', 'roof/raise'],
  'roof/cures/clash': ['base', 'plan', 'roof/conditions', 'roof/stress', 'roof/raise'],
  'roof/cures/balance': [...base, 'plan'],
  'roof/panels': ['base', 'base/geometry', 'plan', 'roof/stress', 'roof/raise', 'roof/answer'],
  'roof/answer': ['base', 'plan', 'plan/project'],
  formats: ['base', 'base/geometry', 'plan', 'plan/project'],
  'paper/drawing': ['base', 'base/geometry', 'plan', 'plan/project', 'roof/answer'],
  'paper/report': ['base', 'plan', 'roof/answer', 'paper/drawing'],
  job: [...base, ...planRooms, 'plan/reading', ...roofRooms, 'formats', ...paper],
  'job/worker': ['base', 'plan/project', 'roof/answer', 'job'],
  'page/view': ['base', 'base/geometry', ...planRooms, 'roof/answer', 'paper/drawing'],
  'page/store': ['base', ...planRooms, 'roof/answer', 'formats', ...paper, 'job', 'job/worker'],
  'page/app': ['base', ...planRooms, 'roof/answer', 'formats', ...paper, 'job', 'job/worker', 'page/store', 'page/view'],
  cli: ['base', 'plan/project', 'roof/answer', 'formats', 'paper/report', 'job', 'job/worker'],
}

/** Packages, and the rooms that may use each. */
const packages: Record<string, (room: string) => boolean> = {
  'robust-predicates': (room) => room === 'base/geometry',
  'ml-matrix': (room) => room === 'roof/stress',
  saxes: (room) => room === 'formats',
  three: (room) => room.startsWith('page/'),
  '@react-three/fiber': (room) => room === 'page/app' || room === 'page/view',
  react: (room) => room === 'page/app',
  'react-dom': (room) => room === 'page/app',
  earcut: (room) => room === 'page/view',
  highs: (room) => room === 'roof/cures/folds',
}

const root = join(import.meta.dirname, '..')
const source = join(root, 'src')

function files(folder: string): string[] {
  return readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile() && /\.tsx?$/.test(entry.name) && !entry.name.endsWith('.d.ts'))
    .map((entry) => join(entry.parentPath, entry.name))
}

const roomOf = (file: string): string => relative(source, dirname(file)).replaceAll('\\', '/')

/** Module names of all static, dynamic and type imports and re-exports of a file. */
function imports(file: string): string[] {
  const text = readFileSync(file, 'utf8').replace(/\/\*[\s\S]*?\*\//g, '')
  const found: string[] = []
  for (const match of text.matchAll(/(?:^|\n)\s*(?:import|export)\b[^'"\n;]*(?:\n[^'"\n]*){0,12}?\bfrom\s*['"]([^'"]+)['"]/g)) found.push(match[1]!)
  for (const match of text.matchAll(/(?:^|\n)\s*import\s*['"]([^'"]+)['"]/g)) found.push(match[1]!)
  for (const match of text.matchAll(/\bimport\(\s*['"]([^'"]+)['"]/g)) found.push(match[1]!)
  for (const match of text.matchAll(/new URL\(\s*['"](\.[^'"]+)['"]/g)) found.push(match[1]!)
  return found
}

const all = files(source)

test('every arrow between rooms is a listed one', () => {
  expect(all.length).toBeGreaterThan(10)
  const wrong: string[] = []
  for (const file of all) {
    const room = roomOf(file)
    const name = relative(root, file)
    if (allowed[room] === undefined) wrong.push(`${name}: no room called ${room}`)
    for (const target of imports(file)) {
      if (target.startsWith('.')) {
        const path = join(dirname(file), target.replace(/\?.*$/, ''))
        if (!path.startsWith(source)) {
          if (!(room === 'page/store' && path.startsWith(join(root, 'samples')))) wrong.push(`${name} leaves src: ${target}`)
          continue
        }
        const to = roomOf(path)
        if (to !== room && !(allowed[room] ?? []).includes(to)) wrong.push(`${name} (${room}) imports ${to}`)
      } else if (target.startsWith('node:')) {
        if (!(room === 'cli' || (room === 'job/worker' && /node/.test(file)))) wrong.push(`${name} imports ${target}`)
      } else {
        const package_ = target.startsWith('@') ? target.split('/').slice(0, 2).join('/') : target.split('/')[0]!
        const may = packages[package_]
        if (package_.startsWith('@fontsource')) continue
        if (may === undefined || !may(room)) wrong.push(`${name} (${room}) imports the package ${package_}`)
      }
    }
  }
  expect(wrong).toEqual([])
})

test('no file imports itself round a cycle', () => {
  const arrows = new Map(
    all.map((file) => [file, imports(file).filter((to) => to.startsWith('.')).map((to) => join(dirname(file), to.replace(/\?.*$/, '')))]),
  )
  const state = new Map<string, 'open' | 'done'>()
  const cycles: string[] = []
  const visit = (file: string, trail: string[]): void => {
    if (state.get(file) === 'done') return
    if (state.get(file) === 'open') {
      cycles.push([...trail.slice(trail.indexOf(file)), file].map((at) => relative(source, at)).join(' > '))
      return
    }
    state.set(file, 'open')
    for (const to of arrows.get(file) ?? []) visit(to, [...trail, file])
    state.set(file, 'done')
  }
  for (const file of all) visit(file, [])
  expect(cycles).toEqual([])
})
