/** What the browser keeps: two tabs, full and damaged storage, a page that is killed; run by `page.test.ts` on its stage. */
import { expect, test } from 'vitest'
import { grid } from './drawings.ts'
import { accepted, downloaded, freeWords, opened, says, slow, stage } from './stage.ts'

const keptAt = (step: number) => [(count: number) => [...document.querySelectorAll('.facts dd')].some((dd) => new RegExp(`^${count}, kept`).test(dd.textContent ?? '')), step] as const

export function keepingTests(): void {
  test('two tabs on one project: the second is told, keeps a copy, and the first one\u2019s stays as it was', async () => {
    const context = await stage.browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true })
    const first = await opened(context)
    await accepted(first, grid(4, 3, 'tab.obj'))
    await first.waitForFunction(...keptAt(1))
    const text = await downloaded(first, 'panewise.json')
    const second = await opened(context)
    await second.click('.samples button:text-is("tab.obj")')
    await second.waitForSelector('.elsewhere:has-text("open in another tab")')
    await second.click('.desk button:text-is("level at the datum")')
    await says(second, /level rim/)
    await second.waitForFunction(...keptAt(2))
    await second.close()
    await first.close()
    const third = await opened(context)
    await third.waitForSelector('.samples button:text-is("tab.obj") >> nth=1')
    expect(await third.locator('.samples li:has(button:text-is("tab.obj")) .note').allTextContents()).toEqual([expect.stringMatching(/^step 2,/), expect.stringMatching(/^step 1,/)])
    await third.click('.samples button:text-is("tab.obj") >> nth=1')
    await says(third, freeWords(5))
    expect(await downloaded(third, 'panewise.json')).toBe(text)
    // Nobody else has it now: nothing is said.
    expect(await third.locator('.elsewhere').count()).toBe(0)
    await context.close()
  }, slow * 2)

  test('storage that is full is said, the work goes on, and once there is room it is kept again', async () => {
    const page = await opened(undefined, () => {
      const { put } = IDBObjectStore.prototype
      IDBObjectStore.prototype.put = function (...values: Parameters<typeof put>) {
        if (!document.documentElement.classList.contains('room')) throw new DOMException('full', 'QuotaExceededError')
        return put.apply(this, values)
      }
    })
    await accepted(page, grid(4, 3))
    await page.waitForFunction(() => document.querySelector('.facts')?.textContent?.includes('not kept: the storage is full'))
    await page.evaluate(() => document.documentElement.classList.add('room'))
    await page.click('.desk button:text-is("barrel")')
    await page.waitForFunction(...keptAt(2))
    await page.context().close()
  }, slow)

  test('killed in mid-edit: what was in hand is lost, every step before it is offered, and nobody is made to take it', async () => {
    const context = await stage.browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true })
    const page = await opened(context)
    await accepted(page, grid(4, 3, 'killed.obj'))
    await page.click('.desk button:text-is("hipped")')
    await page.waitForFunction(...keptAt(2))
    const text = await downloaded(page, 'panewise.json')
    await page.keyboard.press('3')
    await page.click('[role=tab]:text-is("Ways left")')
    const slider = (await page.locator('.ways input[type=range]').first().boundingBox())!
    await page.mouse.move(slider.x + slider.width / 2, slider.y + slider.height / 2)
    await page.mouse.down()
    await page.mouse.move(slider.x + slider.width / 2 + 15, slider.y + slider.height / 2, { steps: 3 })
    await page.waitForSelector('.step-list .hand')
    // The process of the page ends without a word to it.
    const session = await context.newCDPSession(page)
    const crashed = page.waitForEvent('crash')
    void session.send('Page.crash').catch(() => {})
    await crashed
    const again = await opened(context)
    await again.waitForSelector('.samples button:text-is("killed.obj")')
    expect(await again.locator('.sheet .verdict').textContent()).toContain('Drop a drawing anywhere')
    await again.click('.samples button:text-is("killed.obj")')
    await says(again, freeWords(5))
    expect(await downloaded(again, 'panewise.json')).toBe(text)
    await context.close()
  }, slow * 2)

  test('a damaged store: what is cut in half is refused with its line and left as it was, what is no project is not offered', async () => {
    const context = await stage.browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true })
    const page = await opened(context)
    await accepted(page, grid(4, 3, 'damaged.obj'))
    await page.waitForFunction(...keptAt(1))
    const change = (cut: boolean) => page.evaluate(async (half) => {
      const wait = <T>(request: IDBRequest<T>): Promise<T> => new Promise((resolve) => { request.onsuccess = () => resolve(request.result) })
      const db = await wait(indexedDB.open('panewise'))
      const store = db.transaction('projects', 'readwrite').objectStore('projects')
      const [kept] = (await wait(store.getAll())).filter(({ text }: { text?: string }) => text !== undefined) as { text: string }[]
      if (half) {
        await wait(store.put({ ...kept, text: kept!.text.slice(0, kept!.text.length / 2) }))
        await wait(store.put({ id: 'nothing of ours' }))
      }
      db.close()
      return kept!.text.length
    }, cut)
    const length = await change(true)
    await page.reload()
    await page.click('.samples button:text-is("damaged.obj")')
    await page.waitForFunction(() => /line \d+.*the project is damaged: it ends in the middle/.test(document.querySelector('.verdict')?.textContent ?? ''))
    expect(await change(false)).toBe(Math.floor(length / 2))
    expect(await page.locator('.samples li:has-text("step")').count()).toBe(1)
    await context.close()
  }, slow * 2)
}
