/** What the page's tests share: one built site, one browser, and the moves of a hand. */
import { readFileSync } from 'node:fs'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { planArea } from '../../src/paper/drawing/plan-drawing.ts'
import { fitted, toSheet } from '../../src/paper/drawing/plan-window.ts'
import type { Plan } from '../../src/plan/plan.ts'
import { grid as gridPlan } from '../make/plans.ts'
import { startBrowser } from './chromium.ts'
import type { File } from './drawings.ts'
import { builtSite, type Site } from './site.ts'

export const stage = {} as { site: Site; browser: Browser; wrong: string[] }

export const slow = 60_000

export async function raiseStage(): Promise<void> {
  stage.wrong = []
  stage.site = await builtSite()
  stage.browser = await startBrowser()
}

export async function strikeStage(): Promise<void> {
  await stage.browser?.close()
  stage.site?.close()
}

/** A page of its own context; errors on its console and requests to other places are collected, and fail the last test. */
export async function opened(context?: BrowserContext, init?: () => void): Promise<Page> {
  const { browser, site, wrong } = stage
  const own = context ?? (await browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true }))
  const page = await own.newPage()
  page.setDefaultTimeout(slow)
  page.on('console', (message) => { if (message.type() === 'error') wrong.push(`console: ${message.text()}`) })
  page.on('pageerror', (error) => wrong.push(`page: ${error.message}`))
  page.on('request', (request) => { if (!request.url().startsWith(site.address) && !/^(?:blob|data):/.test(request.url())) wrong.push(`request: ${request.url()}`) })
  if (init !== undefined) await page.addInitScript(init)
  await page.goto(site.address)
  await page.waitForSelector('.sheet')
  return page
}

export async function read(page: Page, file: File): Promise<void> {
  await page.setInputFiles('#open-file', file)
  await page.waitForSelector('.report .solid:not([disabled])')
}

export async function accepted(page: Page, file: File): Promise<void> {
  await read(page, file)
  await page.click('.report .solid')
  await says(page, /^All \d+ panels can be flat/)
}

/** Waits until the answer in a sentence is like this. */
export async function says(page: Page, pattern: RegExp): Promise<string> {
  const handle = await page.waitForFunction((source) => {
    const text = document.querySelector('.verdict')?.textContent ?? ''
    return document.querySelector('.facts .note') !== null && new RegExp(source).test(text) ? text : null
  }, pattern.source).catch(async (error: unknown) => {
    throw new Error(`It does not say ${String(pattern)} but "${await page.locator('.verdict').textContent({ timeout: 1000 }).catch(() => 'nothing')}"; ${stage.wrong.join('; ')}`, { cause: error })
  })
  return String(await handle.jsonValue())
}

export const freeWords = (count: number): RegExp => new RegExp(`${count} independent adjustments? left`)

/** The text of a file taken away by the word for it. */
export async function downloaded(page: Page, word: string): Promise<string> {
  await page.keyboard.press('t')
  const [download] = await Promise.all([page.waitForEvent('download'), page.click(`dialog .word:text-is("${word}")`)])
  const text = readFileSync(await download.path(), 'utf8')
  await page.keyboard.press('Escape')
  await page.waitForSelector('dialog', { state: 'detached' })
  return text
}

/** Where a point of the skewed grid lies on the screen, by the drawing's own window; `skew` as `grid` of drawings.ts has it. */
export function onPlan(page: Page, m: number, n: number, x: number, y: number, skew = 0.2): Promise<[number, number]> {
  const made = gridPlan(m, n, { bay: 1.5 })
  for (let i = 0; i < made.nodeCount; i += 1) made.x[i] = made.x[i]! + skew * made.y[i]!
  return onPlanOf(page, made, x + skew * y, y)
}

/** The same for any plan. */
export async function onPlanOf(page: Page, plan: Plan, x: number, y: number): Promise<[number, number]> {
  const box = (await page.locator('.cell-plan canvas').boundingBox())!
  const [px, py] = toSheet(fitted(plan, planArea(box.width, box.height, true)), x, y)
  return [box.x + px, box.y + py]
}
