/** The page about a drawing: everything that was done, asked and left out is in it, numbered as on the drawing, and no name is markup. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { SaxesParser } from 'saxes'
import { describe, expect, test } from 'vitest'
import { planFacts } from '../../../src/job/check.ts'
import { read as readJob } from '../../../src/job/run.ts'
import { drawingHtml } from '../../../src/paper/report/drawing-html.ts'
import { drawingMarkdown } from '../../../src/paper/report/drawing-markdown.ts'
import { drawingPage } from '../../../src/paper/report/drawing-page.ts'
import { drawingSheet } from '../../../src/paper/report/drawing-sheet.ts'
import type { ReadPlan } from '../../../src/plan/read-plan.ts'
import { noOptions, type Options } from '../../../src/plan/project/options.ts'
import { read as sketched } from '../../plan/drawings.ts'

interface Made {
  readonly html: string
  readonly markdown: string
  readonly svg: string
  readonly summary: Parameters<typeof drawingPage>[0]
}

function made(summary: Made['summary'], read: ReadPlan): Made {
  const page = drawingPage(summary, read)
  const { svg, numbers } = drawingSheet(read)
  return { html: drawingHtml(page, svg, numbers), markdown: drawingMarkdown(page, 'reading.svg'), svg, summary }
}

async function ofFile(folder: string, name: string, options: Partial<Options> = {}): Promise<Made> {
  const bytes = new Uint8Array(readFileSync(join(import.meta.dirname, '../../corpus', folder, name)))
  const answer = await readJob({ command: 'read', source: { name, bytes }, options: { ...noOptions, ...options }, brief: null, levels: null, given: {} })
  if (!answer.ok) throw new Error(answer.problem.message)
  return made(answer.value.summary, answer.value.readPlan)
}

/** Text of each element of a kind, by an XML parser of another make; the page is well-formed but for its first line and three empty elements. */
function texts(html: string, element: string, className: string | null = null): string[] {
  const found: string[] = []
  const open: { name: string; wanted: boolean; text: string }[] = []
  const parser = new SaxesParser()
  parser.on('error', (error) => { throw error })
  parser.on('opentag', ({ name, attributes }) => {
    open.push({ name, text: '', wanted: name === element && (className === null || String(attributes['class'] ?? '').split(' ').includes(className)) })
  })
  parser.on('text', (text) => { for (const each of open) each.text += text })
  parser.on('closetag', () => {
    const { wanted, text } = open.pop()!
    if (wanted) found.push(text)
  })
  parser.write(html.replace('<!doctype html>', '').replace(/<(meta|br)([^>]*)>/g, '<$1$2/>').replace(/&nbsp;/g, ' ')).close()
  return found
}

const drawings: [string, string, Partial<Options>][] = [
  ['dxf', 'cells-faults.dxf', { unit: 'mm' }], ['dxf', 'leftovers.dxf', {}], ['dxf', 'curves-of-all-kinds.dxf', {}], ['svg', 'cells.svg', { scale: 100 }],
  ['office', 'bars-through.dxf', {}], ['office', 'crooked.dxf', {}], ['office', 'crooked.dxf', { accept: ['straighten'] }], ['office', 'unit-wrong.dxf', {}], ['office', 'panes-apart.dxf', {}],
]

describe.each(drawings)('%s/%s %j', (folder, name, options) => {
  test('every repair, question, notice and thing left out is in it, in both', async () => {
    const { html, markdown, summary } = await ofFile(folder, name, options)
    const items = texts(html, 'li')
    const plainMarkdown = markdown.replace(/\\([^\w\s])/g, '$1')
    const asked = new Set(summary.questions.map(({ code }) => code))
    for (const { message, code, state } of summary.repairs) {
      if (state === 'proposed' && asked.has(code)) continue
      expect(items.filter((text) => text.includes(message.replace(/\.$/, '')))).toHaveLength(1)
      expect(plainMarkdown).toContain(message.replace(/\.$/, ''))
    }
    for (const { message, options: typed } of summary.questions) {
      const [item] = items.filter((text) => text.includes(message))
      for (const option of typed) expect(item).toContain(option)
      expect(plainMarkdown).toContain(message)
    }
    for (const notice of summary.notices) expect(items.some((text) => text.includes(notice.slice(1).replace(/\.$/, '')))).toBe(true)
    for (const { kind, layer, count } of summary.leftOut) {
      const words = `${count} ${kind.replace(/, (.*)$/, ' ($1)')}${layer === '' ? '' : ` on layer "${layer}"`}`
      expect(items).toContain(words)
      expect(plainMarkdown).toContain(`- ${words}`)
    }
    expect(items).toHaveLength(summary.repairs.filter(({ code, state }) => !(state === 'proposed' && asked.has(code))).length + summary.questions.length + summary.notices.length + summary.leftOut.length)
  })

  test('numbers in balloons are those of the list', async () => {
    const { html, svg, summary } = await ofFile(folder, name, options)
    const onDrawing = texts(svg, 'text').filter((text) => /^\d+$/.test(text) && text !== '0').map(Number).sort((a, b) => a - b)
    const inList = texts(html, 'span', 'n').map(Number).sort((a, b) => a - b)
    const bare = texts(html, 'span', 'bare').map(Number)
    expect(inList.filter((number) => !bare.includes(number))).toEqual(onDrawing)
    expect(inList).toEqual(summary.repairs.map((_, i) => i + 1))
    // What has a place has a balloon, in all of these drawings.
    expect(onDrawing).toEqual(summary.repairs.flatMap(({ where }, i) => (where.length > 0 ? [i + 1] : [])))
  })
})

test('balloons do not cover each other', async () => {
  const { svg } = await ofFile('office', 'crooked.dxf')
  const circles = [...svg.matchAll(/<circle cx="([\d.]+)" cy="([\d.]+)" r="10"\/>/g)].map(([, x, y]) => [Number(x), Number(y)] as const)
  expect(circles.length).toBeGreaterThanOrEqual(4)
  // The north point has that radius too.
  circles.forEach(([x, y], i) => circles.slice(0, i).forEach(([u, v]) => expect(Math.hypot(x - u, y - v)).toBeGreaterThan(20)))
})

test('names with markup stay text', () => {
  const name = '<script>alert(1)</script>&amp;*[x](y)`"\u202e.dxf'
  const read = sketched({ outlines: [[[0, 0], [1, 0], [1, 1], [0, 1]], [[1, 0], [2, 0], [2, 1], [1, 1]]] })
  const leftOut = [{ kind: 'TEXT', layer: '</li><b>x</b>|_a_', count: 2 }]
  const { html, markdown } = made({ version: '0', input: { name, sha256: '' }, plan: planFacts(read.plan), repairs: read.repairs, questions: [], leftOut, notices: ['<img src=x onerror=y> is "noticed"'] }, read)
  expect(texts(html, 'h1')[0]).toBe(`The plan in ${name.replace('\u202e', '\ufffd')}, as it was read`)
  expect(texts(html, 'script')).toEqual([])
  expect(texts(html, 'b')).toEqual([])
  expect(texts(html, 'li').at(-1)).toBe('2 TEXT on layer "</li><b>x</b>|_a_"')
  expect(markdown).toContain('\\<script\\>alert(1)\\</script\\>\\&amp;\\*\\[x\\](y)\\`"')
  expect(markdown).not.toMatch(/[^\\]<(script|b|img)/)
})
