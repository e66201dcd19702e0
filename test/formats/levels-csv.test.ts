/** Lists of levels as surveyors send them. Exact: each list states the same four points, worked out by hand. */
import { describe, expect, test } from 'vitest'
import { levelsFromCsv, type ListedLevel } from '../../src/formats/levels-csv.ts'

const rows = (text: string): readonly ListedLevel[] => {
  const made = levelsFromCsv(text, 'levels.csv')
  if (!made.ok) throw new Error(made.problem.message)
  return made.value.rows
}
const row = (name: string | null, x: number, y: number, level: number): ListedLevel => ({ name, at: [x, y], level })

describe('numbers', () => {
  test.each([
    ['decimal comma, semicolons', 'P1;3512345,25;5412345,75;112,35'],
    ['decimal comma, tabs', 'P1\t3512345,25\t5412345,75\t112,35'],
    ['decimal comma, blanks between columns', 'P1 3512345,25   5412345,75  112,35'],
    ['points, blanks between columns', '  P1 3512345.25 5412345.75 112.35'],
    ['decimal comma in quotes', 'P1,"3512345,25","5412345,75","112,35"'],
    ['digits in threes by blanks', 'P1;3 512 345,25;5 412 345,75;112,35'],
    ['digits in threes by hard blanks', 'P1;3\u00a0512\u00a0345,25;5\u202f412\u202f345,75;112,35'],
    ['digits in threes by points', 'P1;3.512.345,25;5.412.345,75;112,35'],
    ['digits in threes by commas', 'P1;3,512,345.25;5,412,345.75;112.35'],
    ['digits in threes by apostrophes', "P1,3'512'345.25,5'412'345.75,112.35"],
  ])('%s', (_, text) => {
    expect(rows(text)).toEqual([row('P1', 3512345.25, 5412345.75, 112.35)])
  })
  test('what is no number is named with its line', () => {
    const made = levelsFromCsv('name,x,y,level\nP1,1,2,3\nP2,1,2,high\n', 'levels.csv')
    expect(made.ok ? null : [made.problem.code, made.problem.message, made.problem.where?.line]).toEqual(['not-a-number', '"high" is not a number', 3])
  })
  test.each(['', 'x,y,level\n', 'a;b\n', '1,2\n', 'P1,,,\n', '"\n', ';;;\n;;;\n'])('%j is refused with a sentence', (text) => {
    expect(levelsFromCsv(text, 'levels.csv').ok).toBe(false)
  })
})

describe('columns', () => {
  test('a header in any order, units in brackets', () => {
    expect(rows('Level [m];Northing;Point;Easting\n112,3;20;A;10\n')).toEqual([row('A', 10, 20, 112.3)])
  })
  test('under a header x and y are offered swapped too', () => {
    const made = levelsFromCsv('point,x,y,h\nA,20,10,112.3\n', 'levels.csv')
    expect(made.ok && made.value.otherwise).toEqual([{ order: 'name, y, x, level', rows: [row('A', 10, 20, 112.3)] }])
  })
  test('a header of other words is none of the rows', () => {
    expect(rows('Vermarkung;Ostwert;Nordwert;OK\nA;10;20;112,3\n')).toEqual([row('A', 10, 20, 112.3)])
  })
  test('without a header every order of the numbers is offered, a fourth column being the name', () => {
    const made = levelsFromCsv('112.3,10,20\n112.4,11,20\n', 'levels.csv')
    if (!made.ok) throw new Error(made.problem.message)
    expect(made.value.rows[0]).toEqual(row(null, 112.3, 10, 20))
    expect(made.value.otherwise.length).toBe(5)
    expect(made.value.otherwise.find(({ order }) => order === 'level, x, y')?.rows).toEqual([row(null, 10, 20, 112.3), row(null, 11, 20, 112.4)])
    const named = levelsFromCsv('10,20,112.3,P7\n', 'levels.csv')
    expect(named.ok && named.value.rows).toEqual([row('P7', 10, 20, 112.3)])
  })
})
