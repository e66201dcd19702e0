/** Files that change, vanish or cannot be opened while they are read: each a sentence. */
import nodeFs from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, test } from 'vitest'
import { readInput, type ReadCalls } from '../../src/cli/read-input.ts'

const room = nodeFs.mkdtempSync(join(tmpdir(), 'panewise-read-'))
afterAll(() => nodeFs.rmSync(room, { recursive: true }))
const path = join(room, 'plan.obj')
const content = Buffer.from('v 0 0 0\n'.repeat(400_000))
nodeFs.writeFileSync(path, content)

const calls = (changed: Partial<ReadCalls>): ReadCalls => ({ ...nodeFs, ...changed })
const failing = (code: string) => (): never => {
  throw Object.assign(new Error(code), { code })
}

test('the bytes and the last part of the name', async () => {
  const read = await readInput(path)
  if (!read.ok) throw new Error(read.problem.message)
  expect(read.value.name).toBe('plan.obj')
  expect(Buffer.compare(content, Buffer.from(read.value.bytes))).toBe(0)
})

test('a file that grows, shrinks or is written while it is read', async () => {
  const changes: (() => void)[] = [
    () => nodeFs.appendFileSync(path, 'v 1 1 1\n'),
    () => nodeFs.truncateSync(path, 100),
    () => nodeFs.utimesSync(path, new Date(0), new Date(1)),
  ]
  for (const change of changes) {
    nodeFs.writeFileSync(path, content)
    let isDone = false
    const readSync = ((...args: Parameters<typeof nodeFs.readSync>): number => {
      if (!isDone) change()
      isDone = true
      return nodeFs.readSync(...args)
    }) as typeof nodeFs.readSync
    expect(await readInput(path, calls({ readSync }))).toMatchObject({ ok: false, problem: { code: 'file-changed', where: { file: path } } })
  }
  nodeFs.writeFileSync(path, content)
})

test('what the system refuses is said in words, and the file is closed', async () => {
  let closed = 0
  const closeSync = (file: number): void => {
    closed += 1
    nodeFs.closeSync(file)
  }
  expect(await readInput(path, calls({ readSync: failing('EIO') as never, closeSync }))).toMatchObject({ ok: false, problem: { code: 'cannot-read', message: 'the file cannot be read, since the disk reports a fault' } })
  expect(closed).toBe(1)
  expect(await readInput(path, calls({ openSync: failing('EACCES') }))).toMatchObject({ ok: false, problem: { message: 'the file cannot be read, since access is denied' } })
  expect(await readInput(join(room, 'none.obj'))).toMatchObject({ ok: false, problem: { cure: 'check its name' } })
  expect(await readInput(room)).toMatchObject({ ok: false, problem: { code: 'is-a-folder' } })
})

test.skipIf(!nodeFs.existsSync('/dev/zero'))('a device without an end is not read for ever', async () => {
  expect(await readInput('/dev/zero', nodeFs, 8 * 2 ** 20)).toMatchObject({ ok: false, problem: { code: 'too-large', message: 'this is more than 8 MiB' } })
  expect(await readInput(path, nodeFs, 2 ** 20)).toMatchObject({ ok: false, problem: { code: 'too-large' } })
})
