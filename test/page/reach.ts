/** Reaching everything: keyboard, touch, other displays, the clipboard, a file address. Run by page.test.ts on its stage. */
import { readFileSync } from 'node:fs'
import { pathToFileURL } from 'node:url'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { faulty, fourthCorner_mm, grid, readObj } from './drawings.ts'
import { accepted, downloaded, freeWords, opened, read, says, slow, stage } from './stage.ts'

export function reachTests(): void {
  test('opened from a file address the page says how to serve it', async () => {
    // Not on the stage's list of errors: that the browser refuses the scripts is what is looked at.
    const page = await stage.browser.newPage()
    await page.goto(pathToFileURL(join(stage.site.folder, 'index.html')).href)
    expect(await page.textContent('body')).toMatch(/file address.*Serve the folder/s)
    await page.close()
  }, slow)

  test('pasted, tabbed through, selected by the keyboard, hung, with a line of symmetry, in forced colours and without motion', async () => {
    const page = await opened()
    await page.evaluate((text) => {
      const data = new DataTransfer()
      data.setData('text/plain', text)
      window.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data }))
    }, grid(6, 4, 'x.obj', () => 0, 0).buffer.toString())
    await page.click('.report .solid:not([disabled])')
    await says(page, freeWords(8))

    // Tab goes through the sheet in the order of reading, every stop is seen, and it comes out at the end.
    await page.waitForSelector('.diamond')
    await page.locator('.head button').first().focus()
    const seen = ['head']
    for (let i = 0; i < 120; i += 1) {
      await page.keyboard.press('Tab')
      const at = await page.evaluate(() => {
        const here = document.activeElement
        if (here === null || here === document.body) return null
        const { outlineStyle, outlineWidth } = getComputedStyle(here)
        const place = here.closest('.head') !== null ? 'head' : here.closest('.block') !== null ? 'block' : (here.closest<HTMLElement>('[data-pane]')?.dataset['pane'] ?? '?')
        return { place, isSeen: outlineStyle !== 'none' && parseFloat(outlineWidth) >= 1, what: here.outerHTML.slice(0, 80) }
      })
      if (at === null) break
      expect(at.isSeen, at.what).toBe(true)
      if (seen.at(-1) !== at.place) seen.push(at.place)
    }
    expect(seen).toEqual(['head', 'steps', 'plan', 'chart', 'roof', 'ways', 'list', 'block'])

    // What the list selects is selected everywhere.
    await page.keyboard.press('4')
    await page.waitForFunction(() => document.activeElement?.closest('[data-pane="list"]') !== null)
    await page.locator('.rows').focus()
    await page.keyboard.press('Home')
    await page.keyboard.press('ArrowDown')
    const name = (await page.textContent('.plate b'))!
    expect(name).toMatch(/^P\d+$/)
    expect(await page.textContent('.row.chosen .cell')).toBe(name)
    expect(await page.textContent('.unseen[aria-live]')).toContain(`Panel ${name} selected`)

    // The line that edits are mirrored about is drawn, and named.
    await page.click('[aria-label="Keep symmetry"] button:text-is("left and right")')
    await page.waitForSelector('.mirror line', { state: 'attached' })
    expect(await page.textContent('.mirror')).toContain('mirrored about this')
    const [x1, x2] = await page.evaluate(() => ['x1', 'x2'].map((end) => Number(document.querySelector('.mirror line')!.getAttribute(end))))
    expect(x1!).toBeCloseTo(x2!, 6)

    // Hanging: the middle is the lowest, the rim the highest, and panels stay flat.
    await page.click('.desk button:text-is("hanging")')
    await page.waitForFunction(() => document.querySelector('.step-list .now b')?.textContent === 'Hangs' && document.querySelector('.drawing.faded') === null)
    const hung = readObj(await downloaded(page, 'OBJ'))
    const height = (x: number, y: number): number => hung.nodes.find((node) => Math.abs(node[0] - x) < 1e-9 && Math.abs(node[1] - y) < 1e-9)![2]
    expect(height(4.5, 3)).toBeLessThan(Math.min(height(0, 0), height(9, 0), height(0, 6), height(9, 6)) - 0.1)
    expect(fourthCorner_mm(hung)).toBeLessThan(0.01)

    // Forced colours: what is chosen is told by a line, not by a tone; reduced motion: another view stands at once.
    await page.emulateMedia({ forcedColors: 'active', reducedMotion: 'reduce' })
    expect(await page.evaluate(() => getComputedStyle(document.querySelector('.plan .switch .chosen')!).textDecorationLine)).toBe('underline')
    expect(await page.evaluate(() => getComputedStyle(document.querySelector('.row.chosen')!).outlineStyle)).toBe('solid')
    await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur())
    await page.keyboard.press('v')
    await page.waitForFunction(() => /Seen from the east/.test(document.querySelector('.roof .foot')?.textContent ?? ''))
    await page.context().close()
  }, slow * 2)

  test('a proposal that was left is taken after all, and a repair is zoomed to', async () => {
    const page = await opened()
    const bytes = readFileSync(join(import.meta.dirname, '..', 'corpus', 'office', 'crooked.dxf'))
    await page.setInputFiles('#open-file', { name: 'crooked.dxf', mimeType: 'application/dxf', buffer: bytes })
    const first = page.locator('.proposals li').first()
    await first.locator('.word:text-is("Leave")').click()
    await first.locator('.answers:has-text("Left as drawn.") .word:text-is("Take it after all")').click()
    await page.waitForSelector('.proposals li:first-child .answers:has-text("Taken.")')
    expect(await first.textContent()).toContain('straightened')
    await page.keyboard.press('Escape')

    await read(page, faulty())
    await page.locator('ol.repairs li > button').first().click()
    await page.waitForSelector('.word:text-is("Zoom to it")')
    const picture = (): Promise<string> => page.evaluate(() => document.querySelector<HTMLCanvasElement>('.opening canvas')!.toDataURL())
    // The lines as drawn come behind the plan once a repair is chosen.
    let before = ''
    for (let next = await picture(); next !== before; next = await picture()) {
      before = next
      await page.waitForTimeout(600)
    }
    await page.click('.word:text-is("Zoom to it")')
    await page.waitForFunction((old) => document.querySelector<HTMLCanvasElement>('.opening canvas')!.toDataURL() !== old, before)
    await page.locator('.opening canvas').focus()
    await page.keyboard.press('0')
    await page.waitForFunction((old) => document.querySelector<HTMLCanvasElement>('.opening canvas')!.toDataURL() === old, before)
    await page.context().close()
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
