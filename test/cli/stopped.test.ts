/** Runs that are stopped or killed: an exit code that says so, and never half the files. */
import { type ChildProcess } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { random } from '../../src/base/random.ts'
import { gridObj, program, type Program } from './program.ts'

let cli: Program
beforeAll(async () => {
  cli = await program()
  cli.file('large.obj', gridObj(70, 60, 1.5))
  cli.file('small.obj', gridObj(12, 8, 1.5))
})
afterAll(() => cli.close())

interface End {
  readonly code: number | null
  readonly signal: NodeJS.Signals | null
  readonly out: string
  readonly err: string
}

function ended(child: ChildProcess): Promise<End> {
  let [out, err] = ['', '']
  child.stdout?.on('data', (data: Buffer) => (out += data.toString()))
  child.stderr?.on('data', (data: Buffer) => (err += data.toString()))
  return new Promise((resolve) => child.on('close', (code, signal) => resolve({ code, signal, out, err })))
}

const wait = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms))
const all = ['joints.csv', 'nodes.csv', 'panels.csv', 'roof.obj', 'summary.json']
/** Everything in the room but the inputs. */
const left = (): string[] => readdirSync(cli.room).filter((name) => !name.endsWith('.obj'))

/** Waits until the run has made its folder aside, which it does before it works: by then it listens to signals. */
async function begun(): Promise<void> {
  while (!left().some((name) => name.includes('.panewise-'))) await wait(5)
}

describe('stopped', () => {
  test.each([
    ['SIGINT', 130],
    ['SIGTERM', 143],
    ['SIGHUP', 143],
  ] as const)('%s ends with %i, a sentence, and nothing written', async (signal, code) => {
    const child = cli.start(['raise', 'large.obj', '--out', 'stopped'])
    const end = ended(child)
    await begun()
    child.kill(signal)
    expect(await end).toEqual({ code, signal: null, out: '', err: 'Stopped, nothing was written.\n' })
    expect(left()).toEqual([])
  })

  test('with --json the object says so too', async () => {
    const child = cli.start(['raise', 'large.obj', '--json', '--out', 'stopped'])
    const end = ended(child)
    await begun()
    child.kill('SIGINT')
    const { code, out } = await end
    expect(code).toBe(130)
    expect(JSON.parse(out)).toMatchObject({ error: { code: 'cancelled' } })
  })

  test.each([['raise', '-'], ['raise', 'small.obj', '--brief', '-']])('while it waits for standard input: %s %s', async (...words) => {
    const child = cli.start([...words, '--out', 'stopped'])
    const end = ended(child)
    await begun()
    await wait(100)
    child.kill('SIGINT')
    expect((await end).code).toBe(130)
    expect(left()).toEqual([])
  })

  test('in the middle of several plans nothing is written either', async () => {
    const child = cli.start(['raise', 'small.obj', 'large.obj', 'large.obj', '--out', 'several'])
    const end = ended(child)
    await begun()
    while (!readdirSync(cli.room, { recursive: true }).some((name) => String(name).endsWith('roof.obj'))) await wait(5)
    child.kill('SIGINT')
    expect((await end).code).toBe(130)
    expect(left()).toEqual([])
  })
})

describe('killed at random moments (seed 20)', () => {
  const next = random(20)

  /** How long a whole run takes here, so that the kills fall everywhere. */
  async function whole(words: readonly string[]): Promise<number> {
    const from = performance.now()
    expect((await ended(cli.start(words))).code).toBe(0)
    return performance.now() - from
  }

  test('into a new folder: all files or no folder, and the next run clears up', async () => {
    const words = ['raise', 'small.obj', '--out', 'killed']
    const time = await whole(words)
    rmSync(join(cli.room, 'killed'), { recursive: true })
    let finished = 0
    for (let round = 0; round < 20; round += 1) {
      const child = cli.start(words)
      const end = ended(child)
      // Most of the writing is in the last third.
      await wait(time * (round % 2 === 0 ? next() : 0.6 + 0.5 * next()))
      child.kill('SIGKILL')
      await end
      if (existsSync(join(cli.room, 'killed'))) {
        expect(readdirSync(join(cli.room, 'killed')).sort()).toEqual(all)
        finished += 1
        rmSync(join(cli.room, 'killed'), { recursive: true })
      }
    }
    expect(finished).toBeLessThan(20)
    expect((await ended(cli.start(words))).code).toBe(0)
    expect(left()).toEqual(['killed'])
    expect(readdirSync(join(cli.room, 'killed')).sort()).toEqual(all)
  }, 180_000)

  test('over an earlier run: after the next run the folder is whole, and foreign files are still there', async () => {
    mkdirSync(join(cli.room, 'kept'))
    writeFileSync(join(cli.room, 'kept/notes.txt'), 'mine')
    const words = (rise: number): string[] => ['raise', 'small.obj', '--rise', String(rise), '--out', 'kept', '--overwrite']
    const time = await whole(words(1))
    const riseOf = (): number => (JSON.parse(readFileSync(join(cli.room, 'kept/summary.json'), 'utf8')) as { roof: { riseAsked: number } }).roof.riseAsked
    for (let round = 0; round < 16; round += 1) {
      const child = cli.start(words(2))
      const end = ended(child)
      await wait(time * (0.5 + 0.6 * next()))
      child.kill('SIGKILL')
      await end
      expect(readFileSync(join(cli.room, 'kept/notes.txt'), 'utf8')).toBe('mine')
      // Between two moves of one exchange a kill leaves a gap of microseconds; a folder with a summary is whole.
      const names = readdirSync(join(cli.room, 'kept')).filter((name) => !name.startsWith('.'))
      if (!names.includes('summary.json')) continue
      expect(names.sort()).toEqual([...all, 'notes.txt'].sort())
      expect([1, 2]).toContain(riseOf())
    }
    expect((await ended(cli.start(words(3)))).code).toBe(0)
    expect(readdirSync(join(cli.room, 'kept')).sort()).toEqual([...all, 'notes.txt'].sort())
    expect(riseOf()).toBe(3)
  }, 180_000)
})
