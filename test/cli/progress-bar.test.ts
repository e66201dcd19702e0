import { expect, test } from 'vitest'
import { ProgressBar } from '../../src/cli/progress-bar.ts'

/** A terminal that keeps what is written to it, and a clock that is set by hand. */
function desk(isTTY: boolean, columns = 80): { written: string[]; now: { ms: number }; bar: (isWanted?: boolean) => ProgressBar } {
  const written: string[] = []
  const now = { ms: 500 }
  return { written, now, bar: (isWanted = true) => new ProgressBar({ isTTY, columns, write: (text: string) => written.push(text) }, isWanted, () => now.ms) }
}

test('nothing in the first second, then the stage and its share, at most ten times a second', () => {
  const { written, now, bar } = desk(true)
  const shown = bar()
  now.ms = 1499
  shown.show({ stage: 'Reading', done: 0.5 })
  expect(written).toEqual([])
  now.ms = 1500
  shown.show({ stage: 'Factoring', done: 0.5 })
  now.ms = 1599
  shown.show({ stage: 'Factoring', done: 0.6 })
  now.ms = 1600
  shown.show({ stage: 'Factoring', done: 1.2 })
  expect(written).toEqual([`\r\u001b[KFactoring [${'='.repeat(15)}${' '.repeat(15)}] 50 %`, `\r\u001b[KFactoring [${'='.repeat(30)}] 100 %`])
  shown.clear()
  expect(written[2]).toBe('\r\u001b[K')
})

test('not where standard error is no terminal, nor when it is not wanted; what was never shown is not cleared', () => {
  for (const [isTTY, isWanted] of [[false, true], [true, false]] as const) {
    const { written, now, bar } = desk(isTTY)
    const shown = bar(isWanted)
    now.ms = 5000
    shown.show({ stage: 'Reading', done: 0.5 })
    shown.clear()
    expect(written).toEqual([])
  }
})

test('a narrow terminal gets the stage without a bar, never a broken line', () => {
  const { written, now, bar } = desk(true, 24)
  const shown = bar()
  now.ms = 2000
  shown.show({ stage: 'Writing the lists', done: 0.25 })
  expect(written).toEqual(['\r\u001b[KWriting the lists 25 %'])
})
