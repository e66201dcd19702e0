/** The binary kernels against the plain ones, bit by bit, and both against the definition. */
import { describe, expect, test } from 'vitest'
import { gaussians } from '../../../src/base/random.ts'
import { newStore, type Store } from '../../../src/base/sparse/store.ts'
import { same } from './plans.ts'

const numbers = 20_000
const filled = (binary: boolean): Store => {
  const store = newStore(numbers, binary)
  store.data.set(gaussians(numbers, 21))
  return store
}

describe('update', () => {
  const cases = [[4, 1, 1, 0, 0], [8, 5, 0, 0, 16], [64, 12, 1, 0, 16], [20, 9, 1, 80, 0], [12, 0, 1, 0, 0]] as const
  for (const [depth, count, keep, bStep, growth] of cases) {
    test(`depth ${depth}, ${count} blocks, keep ${keep}`, () => {
      const [a, b, c] = [16, 12_000, 14_000]
      const [aStep, cStep] = [4 * depth, 32]
      const plain = filled(false)
      const binary = filled(true)
      const before = plain.data.slice()
      for (const { update } of [plain, binary]) update(a, aStep, growth, b, bStep, c, cStep, growth, count, depth, keep)
      expect(same(binary.data, plain.data)).toBe(true)
      const expected = before.slice()
      for (let n = 0; n < count; n++) {
        const at = a + n * aStep + (growth * n * (n - 1)) / 2
        const to = c + n * cStep + (growth * n * (n - 1)) / 2
        for (let j = 0; j < 4; j++) {
          for (let i = 0; i < 4; i++) {
            let sum = keep === 1 ? before[to + 4 * j + i]! : 0
            for (let k = 0; k < depth; k++) sum -= before[at + 4 * k + i]! * before[b + n * bStep + 4 * k + j]!
            expected[to + 4 * j + i] = sum
          }
        }
      }
      expect(same(plain.data, expected)).toBe(true)
    })
  }
})

test('mirror', () => {
  const [a, b, c, count] = [40, 2_000, 9_000, 7]
  const plain = filled(false)
  const binary = filled(true)
  const expected = plain.data.slice()
  for (const { mirror } of [plain, binary]) mirror(a, b, c, count)
  expect(same(binary.data, plain.data)).toBe(true)
  for (let n = 0; n < 16 * count; n += 16) {
    for (let j = 0; j < 4; j++) {
      for (let i = 0; i < 4; i++) {
        const to = c + n + 4 * j + i
        for (let k = 0; k < 4; k++) expected[to] = expected[to]! - expected[a + 4 * k + i]! * expected[b + n + 4 * j + k]!
      }
    }
  }
  expect(same(plain.data, expected)).toBe(true)
})

test('the binary kernels do run here', () => {
  expect(newStore(64, true).data.buffer).not.toBeInstanceOf(SharedArrayBuffer)
  expect(newStore(64, true).update.toString()).toContain('native code')
})
