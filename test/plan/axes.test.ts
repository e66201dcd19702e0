/** Building axes: values follow from how the plans are made (exact: worked out by hand from the definition). */
import { expect, test } from 'vitest'
import { axesOfPlan, axisLetter, runOfAxis } from '../../src/plan/axes.ts'
import { grid, plan, voronoi, type Points } from '../make/plans.ts'

const names = (axes: readonly { readonly name: string }[]): string => axes.map(({ name }) => name).join(' ')

test('8 x 5 bays: numbers 1 to 9 from left to right along the longer side, letters A to F from below', () => {
  const axes = axesOfPlan(grid(8, 5, { bay: 1.5 }))
  expect(names(axes)).toBe('1 2 3 4 5 6 7 8 9 A B C D E F')
  expect(axes[0]).toEqual({ name: '1', from: [0, 7.5], to: [0, 0] })
  expect(axes[8]).toEqual({ name: '9', from: [12, 7.5], to: [12, 0] })
  expect(axes[9]).toEqual({ name: 'A', from: [0, 0], to: [12, 0] })
})

test('the letters are along the shorter side when the plan stands upright, and I and O are left out', () => {
  const axes = axesOfPlan(grid(3, 20))
  expect(names(axes.slice(0, 21))).toBe(Array.from({ length: 21 }, (_, i) => i + 1).join(' '))
  expect(axes[0].from).toEqual([0, 0])
  expect(names(axes.slice(21))).toBe('A B C D')
  expect(Array.from({ length: 26 }, (_, i) => axisLetter(i)).join(' ')).toBe('A B C D E F G H J K L M N P Q R S T U V W X Y Z AA AB')
})

test('a void parts a line and not its axis; the run of the axis leaves out what the void took', () => {
  const made = grid(5, 5, { voids: [[2, 2], [2, 1]] })
  const axes = axesOfPlan(made)
  expect(axes.length).toBe(12)
  // Horizontal line y = 2 loses the joint between the two voids, none of its nodes.
  const middle = axes.find(({ name }) => name === 'C')!
  expect(runOfAxis(made, middle).map((node) => made.x[node])).toEqual([0, 1, 2, 3, 4, 5])
  expect(runOfAxis(made, middle).every((node) => made.y[node] === 2)).toBe(true)
})

test('skewed and turned bays keep their axes', () => {
  const bays: [number, number][] = []
  const faces: number[][] = []
  const at = (i: number, j: number): number => j * 7 + i
  for (let j = 0; j <= 4; j += 1) for (let i = 0; i <= 6; i += 1) bays.push([1.4 * i + 0.5 * j, 0.6 * i + 1.2 * j])
  for (let j = 0; j < 4; j += 1) for (let i = 0; i < 6; i += 1) faces.push([at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)])
  expect(names(axesOfPlan(plan(bays as Points, faces)))).toBe('1 2 3 4 5 6 7 A B C D E')
})

test('cells and bays that are moved by a fifth have none: their rims alone are no axes', () => {
  expect(axesOfPlan(voronoi(60, 3).plan)).toEqual([])
  expect(axesOfPlan(grid(8, 6, { loose: 0.2, bay: 1.5 }))).toEqual([])
})

test('one row of bays has an axis at each cross joint', () => {
  expect(names(axesOfPlan(grid(6, 1)))).toBe('1 2 3 4 5 6 7 A B')
})
