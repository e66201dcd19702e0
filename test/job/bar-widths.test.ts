/** Widths of bars that a drawing has: with the joints in their list, and kept in the project when a void is made of a panel. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { filesOf } from '../../src/job/files.ts'
import { run } from '../../src/job/run.ts'
import { finish } from '../../src/base/steps.ts'
import { noOptions } from '../../src/plan/project/options.ts'
import { readDrawing } from '../../src/formats/all.ts'
import { planOfLines } from '../../src/plan/reading/which-lines.ts'
import { emptyBrief } from '../../src/plan/project/brief.ts'
import { projectOf } from '../../src/plan/project/project-record.ts'
import { projectText } from '../../src/plan/project/project-text.ts'
import { readProject } from '../../src/plan/project/read-project.ts'
import { withVoids } from '../../src/plan/project/turned-face.ts'
import { plainly } from '../plan/drawings.ts'

const name = 'bars-through.dxf'
const bytes = new Uint8Array(readFileSync(join(import.meta.dirname, '../corpus/office', name)))

test('bar_width_mm follows the columns of joints.csv, 60 mm as drawn', async () => {
  const answer = await run({ command: 'raise', source: { name, bytes }, options: { ...noOptions, accept: ['double-lines'] }, brief: null, levels: null, given: {} })
  if (!answer.ok) throw new Error(answer.problem.message)
  const file = finish(filesOf(answer.value)).find((each) => each.name === 'joints.csv')
  const [header, ...rows] = new TextDecoder().decode(file!.bytes).trimEnd().split('\r\n')
  expect(header!.endsWith('form_density_no_load,form_force_no_load,bar_width_mm')).toBe(true)
  expect([rows.length, new Set(rows.map((row) => row.split(',').at(-1)))]).toEqual([38, new Set(['60'])])
})

test('a project keeps them, side by side of its faces', () => {
  const drawing = finish(readDrawing({ name, bytes }, { layers: null, sagitta: 0.005, metresPerUnit: null }))
  if (!drawing.ok) throw new Error(drawing.problem.message)
  const read = finish(planOfLines(drawing.value, { ...plainly, accept: ['double-lines'] }))
  if (!read.ok) throw new Error(read.problem.message)
  const text = projectText(projectOf(read.value, { name, sha256: null, brief: emptyBrief, target: null, leastSlope: null }))
  const again = readProject(text, 'a.panewise.json')
  if (!again.ok) throw new Error(again.problem.message)
  expect(Array.from(again.value.read.barWidth!)).toEqual(Array.from(read.value.barWidth!))
  expect(projectText(again.value)).toBe(text)
  const turned = withVoids(again.value, [[2000, 2000]])
  if (!turned.ok) throw new Error(turned.problem.message)
  // 24 panels less one: 58 edges still, each with its bar.
  expect(Array.from(turned.value.read.barWidth!)).toEqual(new Array(58).fill(60))
  const cut = readProject(text.replace(/("bar_widths"[\s\S]*?\[)\s*\[[^\]]*\],/, '$1'), 'a.panewise.json')
  expect(cut.ok ? 'read' : cut.problem.code).toBe('damaged')
})
