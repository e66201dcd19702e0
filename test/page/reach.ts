/** Reaching the page: by touch, from a file address. Run by page.test.ts on its stage. */
import { pathToFileURL } from 'node:url'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { grid } from './drawings.ts'
import { accepted, opened, slow, stage } from './stage.ts'

export function reachTests(): void {
  test('opened from a file address the page says how to serve it', async () => {
    // Not on the stage's list of errors: that the browser refuses the scripts is what is looked at.
    const page = await stage.browser.newPage()
    await page.goto(pathToFileURL(join(stage.site.folder, 'index.html')).href)
    expect(await page.textContent('body')).toMatch(/file address.*Serve the folder/s)
    await page.close()
  }, slow)

  test('on a phone a finger turns the roof', async () => {
    const context = await stage.browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true })
    const page = await opened(context)
    await accepted(page, grid(4, 3))
    await page.waitForSelector('.diamond')
    const box = (await page.locator('.roof canvas').boundingBox())!
    const session = await context.newCDPSession(page)
    const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', x?: number): Promise<unknown> =>
      session.send('Input.dispatchTouchEvent', { type, touchPoints: x === undefined ? [] : [{ x, y: box.y + box.height - 60, id: 1 }] })
    const middle = box.x + box.width / 2
    await touch('touchStart', middle)
    for (let i = 1; i <= 6; i += 1) await touch('touchMove', middle + 12 * i)
    await touch('touchEnd')
    await page.waitForFunction(() => !/Seen from the south/.test(document.querySelector('.roof .foot')?.textContent ?? ''))
    expect(await page.textContent('.roof .foot')).toMatch(/Seen /)
    await context.close()
  }, slow)
}
