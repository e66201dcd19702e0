/**
 * Times the built page in Chromium, as a hand meets it, with WebGL (in software where there is no card) and without:
 *
 * - answer: from the question that a pointer move makes to its answer on the page, medians over a dragged node. The first move
 *   stands apart: it asks of new rows.
 * - drawn: from the pointer move to the frame after the one in which the last picture that the answer changes was painted.
 *   Pixels of a canvas or of a software WebGL are made, or read back, as that frame is handed over, so they are in it.
 * - frame: the same from a pointer move that turns the roof, a move at a time.
 * - longest tasks: the longest stretch for which the page hears nothing, while a drawing is read, when it is accepted and drawn,
 *   and over the whole drag.
 *
 * Rows are kept in page.csv.
 *
 *   node test/bench/run.mjs page [panels ...] [--kind cells|quads] [--webgl yes|no] [--keep]
 */
import { execFileSync, spawnSync } from 'node:child_process'
import { appendFileSync, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { cpus, tmpdir } from 'node:os'
import { extname, join } from 'node:path'
import type { Page } from 'playwright-core'
import { startBrowser } from '../page/chromium.ts'
import { benchPlan, kinds, type Kind } from './solver-plans.ts'

const head = 'date,commit,processor,plan,panels,webgl,open_ms,first_answer_ms,first_move_ms,answer_ms,answer_worst_ms,drawn_ms,frame_ms,frame_worst_ms,longest_task_read_ms,longest_task_accept_ms,longest_task_drag_ms'
const moves = 48

/** What the page's own measures say, by name, and what it did not hear through. */
interface Seen {
  readonly answers: number[]
  /** When a set of pictures was last painted to the end, on the page's clock. */
  readonly drawn: number[]
  readonly tasks: number[]
}

async function main(words: readonly string[]): Promise<void> {
  const option = (name: string): string | null => (words.includes(name) ? (words[words.indexOf(name) + 1] ?? null) : null)
  const sizes = words.filter((word) => /^\d+$/.test(word)).map(Number)
  const chosen: readonly Kind[] = kinds.filter((kind) => option('--kind') === null || kind === option('--kind'))
  const webgl = [true, false].filter((on) => option('--webgl') === null || on === (option('--webgl') === 'yes'))
  const root = execFileSync('git', ['rev-parse', '--show-toplevel'], { encoding: 'utf8' }).trim()
  const folder = mkdtempSync(join(tmpdir(), 'panewise-bench-'))
  const built = spawnSync(process.execPath, [join(root, 'node_modules/vite/bin/vite.js'), 'build', '--mode', 'page', '--outDir', folder, '--emptyOutDir', '--logLevel', 'error'],
    { cwd: root, stdio: 'inherit', env: { ...process.env, NODE_ENV: 'production' } })
  if (built.status !== 0) throw new Error('the page could not be built')
  const server = served(folder)
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const address = `http://127.0.0.1:${(server.address() as AddressInfo).port}/`
  const rows: string[] = []
  process.stdout.write(`${head}\n`)
  for (const withWebGl of webgl) {
    const browser = await startBrowser(withWebGl ? [] : ['--disable-3d-apis'])
    for (const kind of chosen) {
      for (const size of sizes.length > 0 ? sizes : [400, 2000, 10_000]) {
        const page = await (await browser.newContext({ viewport: { width: 1440, height: 900 } })).newPage()
        page.setDefaultTimeout(120_000)
        const plan = benchPlan(kind, size)
        const figures = await timed(page, address, plan)
        const row = [new Date().toISOString().slice(0, 10), commit(root), processor(), kind, plan.start.length - 1, withWebGl ? 'software' : 'none', ...figures.map((ms) => ms.toFixed(0))].join(',')
        process.stdout.write(`${row}\n`)
        rows.push(row)
        await page.context().close()
      }
    }
    await browser.close()
  }
  server.close()
  rmSync(folder, { recursive: true })
  const file = join(process.env['BENCH_FOLDER'] ?? '.', 'page.csv')
  if (!words.includes('--keep')) return
  if (!existsSync(file)) writeFileSync(file, `${head}\n`)
  appendFileSync(file, `${rows.join('\n')}\n`)
}

async function timed(page: Page, address: string, plan: ReturnType<typeof benchPlan>): Promise<number[]> {
  await page.addInitScript(() => {
    const seen: Seen = { answers: [], drawn: [], tasks: [] }
    Object.assign(window, { seen })
    new PerformanceObserver((list) => {
      for (const entry of list.getEntries()) {
        if (entry.name === 'answer') {
          seen.answers.push(entry.duration)
          Object.assign(window, { answeredAt: entry.startTime + entry.duration })
        }
        if (entry.name === 'drawn') seen.drawn.push(entry.startTime + entry.duration)
      }
    }).observe({ entryTypes: ['measure'] })
    new PerformanceObserver((list) => { for (const entry of list.getEntries()) seen.tasks.push(entry.duration) }).observe({ entryTypes: ['longtask'] })
    // When the hand moved last, as the page heard it.
    window.addEventListener('pointermove', (event) => { Object.assign(window, { moved: event.timeStamp }) }, { capture: true })
  })
  await page.goto(address)
  await page.waitForSelector('.sheet')
  await page.waitForTimeout(1000)
  const seen = (): Promise<Seen & { moved: number }> => page.evaluate(() => {
    const { seen, moved } = window as unknown as { seen: Seen; moved: number }
    const copy = { answers: [...seen.answers], drawn: [...seen.drawn], tasks: [...seen.tasks], moved }
    seen.answers.length = 0
    seen.drawn.length = 0
    seen.tasks.length = 0
    return copy
  })
  const drawn = (): Promise<unknown> => page.waitForFunction(() => {
    const { seen, answeredAt = 0 } = window as unknown as { seen: Seen; answeredAt?: number }
    return (seen.drawn.at(-1) ?? -1) > answeredAt
  })
  const answered = async (): Promise<void> => {
    await page.waitForFunction(() => (window as unknown as { seen: Seen }).seen.answers.length > 0)
    await drawn()
  }

  await seen()
  const opened = Date.now()
  await page.setInputFiles('#open-file', { name: 'plan.obj', mimeType: 'text/plain', buffer: Buffer.from(objText(plan)) })
  await page.waitForSelector('.report .solid:not([disabled])')
  const openMs = Date.now() - opened
  await page.waitForTimeout(500)
  const read = await seen()
  await page.click('.report .solid')
  await answered()
  await page.waitForTimeout(2000)
  const first = await seen()

  // A node in the middle of the list, dragged by its handle a move at a time, each once the one before is answered and drawn.
  await page.locator('.rows').focus()
  await page.keyboard.press('PageDown')
  await page.waitForSelector('.plate .round .word')
  await page.locator('.plate .round .word').first().click()
  const handle = (await page.locator('.cell-plan .handle').first().boundingBox())!
  const [x, y] = [handle.x + handle.width / 2, handle.y + handle.height / 2]
  await page.mouse.move(x, y)
  await page.mouse.down()
  await page.waitForTimeout(300)
  const tasks = (await seen()).tasks
  const answers: number[] = []
  const pictures: number[] = []
  for (let move = 1; move <= moves; move += 1) {
    await page.mouse.move(x, y - 2 * move)
    await answered()
    const now = await seen()
    answers.push(now.answers[0]!)
    if (move > 1) pictures.push(now.drawn.at(-1)! - now.moved)
    tasks.push(...now.tasks)
  }
  await page.mouse.up()
  await answered()
  await page.keyboard.press('Escape')
  await page.waitForTimeout(500)
  tasks.push(...(await seen()).tasks)

  const roof = (await page.locator('.roof canvas').boundingBox())!
  await page.mouse.move(roof.x + roof.width / 2, roof.y + roof.height / 2)
  await page.mouse.down()
  const frames: number[] = []
  for (let move = 1; move <= 24; move += 1) {
    await seen()
    await page.mouse.move(roof.x + roof.width / 2 + 3 * move, roof.y + roof.height / 2)
    await drawn()
    const now = await seen()
    if (move > 1) frames.push(now.drawn.at(-1)! - now.moved)
  }
  await page.mouse.up()
  const [firstMove, ...others] = answers
  return [openMs, first.answers[0] ?? NaN, firstMove ?? NaN, median(others), Math.max(...others), median(pictures), median(frames), Math.max(...frames), Math.max(0, ...read.tasks), Math.max(0, ...first.tasks), Math.max(0, ...tasks)]
}

function objText({ coordinates, start, index }: ReturnType<typeof benchPlan>): string {
  const lines = ['# unit: m']
  for (let i = 0; i < coordinates.length; i += 2) lines.push(`v ${coordinates[i]} ${coordinates[i + 1]} 0`)
  for (let p = 0; p + 1 < start.length; p += 1) lines.push(`f ${Array.from(index.subarray(start[p], start[p + 1]), (node) => node + 1).join(' ')}`)
  return `${lines.join('\n')}\n`
}

const types: Record<string, string> = { '.html': 'text/html', '.js': 'text/javascript', '.css': 'text/css', '.woff2': 'font/woff2', '.wasm': 'application/wasm' }

function served(folder: string): ReturnType<typeof createServer> {
  return createServer((request, response) => {
    const path = join(folder, (request.url ?? '/').replace(/\?.*$/, '').replace(/\/$/, '/index.html'))
    if (!existsSync(path)) response.writeHead(404).end()
    else response.writeHead(200, { 'content-type': types[extname(path)] ?? 'application/octet-stream' }).end(readFileSync(path))
  })
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted.length === 0 ? NaN : sorted[Math.floor(sorted.length / 2)]!
}

const commit = (root: string): string => execFileSync('git', ['rev-parse', '--short', 'HEAD'], { cwd: root, encoding: 'utf8' }).trim()
const processor = (): string => (cpus()[0]?.model ?? '').split(/\s+/).slice(0, 2).join(' ')

await main(process.argv.slice(2))
