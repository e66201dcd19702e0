/** All files or none: with calls that fail, with a process that dies at any call, on a full and on a read-only disk. */
import { execFileSync } from 'node:child_process'
import fs from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, test } from 'vitest'
import type { FileSystem } from '../../src/cli/file-system.ts'
import { openOutput, type OutputOptions } from '../../src/cli/write-safely.ts'
import type { Result } from '../../src/base/result.ts'

const ours = ['roof.obj', 'panels.csv', 'joints.csv', 'summary.json']
const bytes = (text: string): Uint8Array => new TextEncoder().encode(text)

let room = ''
beforeEach(() => {
  room = fs.mkdtempSync(join(tmpdir(), 'panewise-test-'))
})
afterEach(() => fs.rmSync(room, { recursive: true, force: true }))

/** Every file below a folder with its text; folders that are empty end in a slash. */
function tree(folder: string): Record<string, string> {
  const found: Record<string, string> = {}
  for (const entry of fs.readdirSync(folder, { withFileTypes: true, recursive: true })) {
    const path = join(entry.parentPath, entry.name)
    const name = path.slice(folder.length + 1)
    if (entry.isFile()) found[name] = fs.readFileSync(path, 'utf8')
    else if (fs.readdirSync(path).length === 0) found[`${name}/`] = ''
  }
  return found
}

type Where = { fs?: FileSystem; overwrite?: boolean; owned?: readonly string[]; files?: readonly string[]; text?: string }

/** One run of the program as far as writing goes. */
function run(folder: string, where: Where = {}): Result<null> {
  const options: OutputOptions = { overwrite: where.overwrite ?? false, owned: where.owned ?? ours, pid: 99, isAlive: () => false, ...(where.fs && { fs: where.fs }) }
  const opened = openOutput(folder, options)
  if (!opened.ok) return opened
  for (const name of where.files ?? ours) {
    const put = opened.value.put(name, bytes(`${where.text ?? 'new'} ${name}`))
    if (!put.ok) return put
  }
  return opened.value.commit()
}

const written = (text: string, names: readonly string[] = ours): Record<string, string> => Object.fromEntries(names.map((name) => [name, `${text} ${name}`]))

describe('a folder of one run', () => {
  test('is made, with the folders above it', () => {
    expect(run(join(room, 'a/b/out')).ok).toBe(true)
    expect(tree(room)).toEqual(Object.fromEntries(Object.entries(written('new')).map(([name, text]) => [`a/b/out/${name}`, text])))
  })

  test('keeps what it does not own; ours is replaced only when asked, and then as a whole', () => {
    const out = join(room, 'out')
    fs.mkdirSync(out)
    fs.writeFileSync(join(out, 'notes.txt'), 'mine')
    expect(run(out, { text: 'first' }).ok).toBe(true)
    const again = run(out)
    expect(again).toMatchObject({ ok: false, problem: { code: 'files-exist', cure: expect.stringContaining('--overwrite') } })
    expect(tree(out)).toEqual({ 'notes.txt': 'mine', ...written('first') })
    expect(run(out, { overwrite: true, files: ['summary.json'], text: 'second' }).ok).toBe(true)
    expect(tree(out)).toEqual({ 'notes.txt': 'mine', 'summary.json': 'second summary.json' })
  })

  test('a file in the place of the folder, or a folder in the place of a file, is left alone', () => {
    fs.writeFileSync(join(room, 'out'), 'a file')
    expect(run(join(room, 'out'))).toMatchObject({ ok: false, problem: { code: 'out-is-no-folder' } })
    fs.mkdirSync(join(room, 'other/roof.obj'), { recursive: true })
    fs.writeFileSync(join(room, 'other/roof.obj/inside'), 'x')
    expect(run(join(room, 'other'), { overwrite: true })).toMatchObject({ ok: false, problem: { code: 'files-exist' } })
    expect(tree(room)).toEqual({ out: 'a file', 'other/roof.obj/inside': 'x' })
  })

  test('a discarded run leaves no trace, not even the folders above', () => {
    const opened = openOutput(join(room, 'a/b/out'), { overwrite: false, owned: ours })
    if (!opened.ok) throw new Error('not opened')
    expect(opened.value.put('roof.obj', bytes('x')).ok).toBe(true)
    opened.value.discard()
    expect(fs.readdirSync(room)).toEqual([])
  })

  test('two runs into a new folder at once: the second to finish says so and leaves the first alone', () => {
    const options = { overwrite: false, owned: ours, isAlive: () => true }
    const [one, two] = [openOutput(join(room, 'out'), { ...options, pid: 1 }), openOutput(join(room, 'out'), { ...options, pid: 2 })]
    if (!one.ok || !two.ok) throw new Error('not opened')
    one.value.put('roof.obj', bytes('one'))
    two.value.put('roof.obj', bytes('two'))
    expect(one.value.commit().ok).toBe(true)
    expect(two.value.commit()).toMatchObject({ ok: false, problem: { code: 'cannot-write', message: expect.stringContaining('another run') } })
    expect(tree(room)).toEqual({ 'out/roof.obj': 'one' })
  })
})

/** Which calls change the disk: a process that dies dies before or after one of these. */
const changes = ['mkdirSync', 'writeFileSync', 'renameSync', 'rmSync', 'rmdirSync'] as const

class Died extends Error {}

/** A file system whose n-th change fails (and, when it `dies`, everything after it too, so that nothing is cleaned up). */
function failing(n: number, dies: boolean, code = 'EIO'): { fs: FileSystem; count: () => number } {
  let count = 0
  const wrapped: Record<string, unknown> = { ...fs }
  for (const name of changes) {
    const real = fs[name] as (...args: unknown[]) => unknown
    wrapped[name] = (...args: unknown[]): unknown => {
      count += 1
      if (count < n || (!dies && count > n)) return real(...args)
      // A file that is being written when the disk fails has some of its bytes.
      if (count === n && name === 'writeFileSync') fs.writeFileSync(args[0] as string, 'ha')
      throw dies ? new Died('killed') : Object.assign(new Error(code), { code })
    }
  }
  return { fs: wrapped as FileSystem, count: () => count }
}

const several = [...['north', 'south'].flatMap((folder) => ours.map((name) => join(folder, name))), 'summary.csv']

const scenes: { name: string; below?: string; prepare: (out: string) => void; where: Where }[] = [
  { name: 'a new folder', prepare: () => {}, where: {} },
  { name: 'a new folder below new ones', below: 'a/b', prepare: () => {}, where: {} },
  { name: 'an empty folder', prepare: (out) => fs.mkdirSync(out), where: {} },
  {
    name: 'old files to replace, foreign ones to keep',
    prepare: (out) => {
      run(out, { text: 'old' })
      fs.writeFileSync(join(out, 'notes.txt'), 'mine')
    },
    where: { overwrite: true, files: ['roof.obj', 'summary.json'] },
  },
  {
    name: 'several plans',
    prepare: (out) => {
      run(out, { text: 'old', owned: several, files: ['north/roof.obj', 'north/summary.json', 'summary.csv'] })
      fs.writeFileSync(join(out, 'north/notes.txt'), 'mine')
    },
    where: { overwrite: true, owned: several, files: ['north/roof.obj', 'north/summary.json', 'south/roof.obj', 'south/summary.json', 'summary.csv'] },
  },
]

describe.each(scenes)('$name', ({ prepare, where, below = '' }) => {
  /** What is there before the run and after a whole one. */
  function states(): { before: Record<string, string>; after: Record<string, string>; calls: number } {
    const out = join(room, 'probe', below, 'out')
    fs.mkdirSync(join(room, 'probe'))
    prepare(out)
    const before = tree(join(room, 'probe'))
    const counter = failing(Infinity, false)
    expect(run(out, { ...where, fs: counter.fs }).ok).toBe(true)
    const after = tree(join(room, 'probe'))
    expect(after).not.toEqual(before)
    return { before, after, calls: counter.count() }
  }

  test('any one call fails: nothing or everything is there, and a sentence says which', () => {
    const { before, after, calls } = states()
    for (let n = 1; n <= calls; n += 1) {
      const place = join(room, `fail-${n}`)
      fs.mkdirSync(place)
      prepare(join(place, below, 'out'))
      const result = run(join(place, below, 'out'), { ...where, fs: failing(n, false, 'ENOSPC').fs })
      // What cannot be cleaned away at once goes with the next run.
      const left = openOutput(join(place, below, 'out'), { overwrite: true, owned: ours, pid: 100, isAlive: () => false })
      if (left.ok) left.value.discard()
      expect(tree(place), `call ${n}`).toEqual(result.ok ? after : before)
      if (!result.ok) expect(result.problem).toMatchObject({ code: 'cannot-write', message: 'nothing was written, since the disk is full' })
    }
    expect(calls).toBeGreaterThan(5)
  })

  test('the process dies at any call: the next run finds nothing or everything, and clears up', () => {
    const { before, after, calls } = states()
    let [none, all] = [0, 0]
    for (let n = 1; n <= calls; n += 1) {
      const place = join(room, `die-${n}`)
      fs.mkdirSync(place)
      prepare(join(place, below, 'out'))
      run(join(place, below, 'out'), { ...where, fs: failing(n, true).fs })
      // The next run dies while it clears up, at any call; the one after it must still cope.
      for (let m = 1; m <= 6; m += 1) openOutput(join(place, below, 'out'), { overwrite: true, owned: ours, pid: 101, isAlive: () => false, fs: failing(m, true).fs })
      const next = openOutput(join(place, below, 'out'), { overwrite: true, owned: ours, pid: 102, isAlive: () => false })
      if (!next.ok) throw new Error(next.problem.message)
      next.value.discard()
      // Empty folders above the output may stay: they are not known to be ours any more.
      const left = Object.fromEntries(Object.entries(tree(place)).filter(([name]) => below === '' || !name.endsWith('/')))
      const isAll = JSON.stringify(left) === JSON.stringify(after)
      if (isAll) all += 1
      else {
        none += 1
        expect(left, `call ${n}`).toEqual(before)
      }
    }
    expect(none).toBeGreaterThan(2)
    expect(all + none).toBe(calls)
  })
})

test('a run that is still alive is not cleared away', () => {
  fs.mkdirSync(join(room, 'out/.panewise-4321/new'), { recursive: true })
  fs.mkdirSync(join(room, '.out.panewise-77'))
  fs.writeFileSync(join(room, 'out/.panewise-notes'), 'foreign')
  const opened = openOutput(join(room, 'out'), { overwrite: false, owned: ours, pid: 5, isAlive: (pid) => pid === 4321 })
  if (!opened.ok) throw new Error('not opened')
  opened.value.discard()
  expect(fs.readdirSync(join(room, 'out')).sort()).toEqual(['.panewise-4321', '.panewise-notes'])
  expect(fs.readdirSync(room)).toEqual(['out'])
})

/** Mounts a file system for a test; false where this is not allowed. */
function mounted(place: string, options: string): boolean {
  fs.mkdirSync(place, { recursive: true })
  try {
    execFileSync('mount', ['-t', 'tmpfs', '-o', options, 'none', place], { stdio: 'ignore' })
    return true
  } catch {
    return false
  }
}

const canMount = ((): boolean => {
  const place = fs.mkdtempSync(join(tmpdir(), 'panewise-mount-'))
  const could = mounted(place, 'size=64k')
  if (could) execFileSync('umount', [place])
  fs.rmdirSync(place)
  return could
})()

describe.skipIf(!canMount)(`real disks${canMount ? '' : ' (skipped: this user may not mount a file system)'}`, () => {
  afterEach(() => {
    for (const name of ['full', 'sealed']) {
      try {
        execFileSync('umount', [join(room, name)], { stdio: 'ignore' })
      } catch {
        // It was not mounted by this test.
      }
    }
  })

  test('a full disk leaves nothing, in a new folder and in one with files', () => {
    expect(mounted(join(room, 'full'), 'size=256k')).toBe(true)
    const out = join(room, 'full/out')
    expect(run(out, { text: 'old' }).ok).toBe(true)
    const before = tree(join(room, 'full'))
    for (const folder of [out, join(room, 'full/fresh/out')]) {
      const result = run(folder, { overwrite: true, text: 'x'.repeat(150_000) })
      expect(result).toMatchObject({ ok: false, problem: { code: 'cannot-write', message: 'nothing was written, since the disk is full' } })
      expect(tree(join(room, 'full'))).toEqual(before)
    }
    // What was written aside is gone, so there is room again.
    expect(run(out, { overwrite: true, text: 'y'.repeat(40_000) }).ok).toBe(true)
  })

  test('a read-only disk is a sentence', () => {
    expect(mounted(join(room, 'sealed'), 'size=64k')).toBe(true)
    fs.mkdirSync(join(room, 'sealed/out'))
    execFileSync('mount', ['-o', 'remount,ro', join(room, 'sealed')])
    for (const folder of ['sealed/out', 'sealed/new']) {
      expect(run(join(room, folder))).toMatchObject({ ok: false, problem: { code: 'cannot-write', message: 'nothing was written, since the file system is read-only' } })
    }
  })
})
