/** What is taken where it is drawn: axes, rise, tilt, proposals, paper, small screens. Run by page.test.ts on its stage. */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { axisBubbles } from '../../src/paper/drawing/axis-drawing.ts'
import { planArea } from '../../src/paper/drawing/plan-drawing.ts'
import { fitted } from '../../src/paper/drawing/plan-window.ts'
import { axesOfPlan } from '../../src/plan/axes.ts'
import { grid as gridPlan } from '../make/plans.ts'
import { gradient, grid, readObj, type File } from './drawings.ts'
import { accepted, downloaded, freeWords, opened, says, slow, stage } from './stage.ts'

const office = (name: string): File => ({ name, mimeType: 'application/dxf', buffer: readFileSync(join(import.meta.dirname, '..', 'corpus', 'office', name)) })

export function drawnTests(): void {
  test('an axis clicked on the plan is the run of the profile, from rim to rim', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    const box = (await page.locator('.cell-plan canvas').boundingBox())!
    const plan = gridPlan(6, 4, { bay: 1.5 })
    for (let i = 0; i < plan.nodeCount; i += 1) plan.x[i] = plan.x[i]! + 0.2 * plan.y[i]!
    const spot = axisBubbles(axesOfPlan(plan), fitted(plan, planArea(box.width, box.height, true)), { width: box.width, height: box.height - 64 }).find(({ axis }) => axis.name === 'A')!
    await page.mouse.click(box.x + spot.x, box.y + spot.y)
    await page.waitForSelector('.section')
    // Six bays of 1.5 m along the letter axis: a chord of 9 m.
    expect((await page.textContent('.section'))!.replace(/\s/g, '')).toContain('9000mm')
    await page.context().close()
  }, slow)

  test('the rise by its diamond and its keys, and a tilt by the centre of the chart: the exported model has them', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    await page.waitForSelector('.diamond')
    const before = Number(await page.getAttribute('.diamond', 'aria-valuenow'))
    await page.locator('.diamond').focus()
    await page.keyboard.press('PageUp')
    await page.waitForFunction((value) => document.querySelector('.diamond')?.getAttribute('aria-valuenow') === String(value), before + 100)
    const level = readObj(await downloaded(page, 'OBJ'))
    expect(1000 * (Math.max(...level.nodes.map(([, , z]) => z)) - Math.min(...level.nodes.map(([, , z]) => z)))).toBeCloseTo(before + 100, 0)
    const chart = (await page.locator('.chart canvas').boundingBox())!
    const [x, y] = [chart.x + chart.width / 2, chart.y + (chart.height - 16) / 2]
    await page.mouse.move(x, y)
    await page.mouse.down()
    for (let i = 1; i <= 5; i += 1) await page.mouse.move(x + 6 * i, y)
    await page.mouse.up()
    await page.waitForFunction(() => /^3Tilted [\d.]+° E/.test(document.querySelector('.step-list')?.textContent ?? ''))
    await page.waitForFunction(() => document.querySelector('.drawing.faded') === null)
    const tilted = readObj(await downloaded(page, 'OBJ'))
    // Every panel's gradient moves by the same vector, to the east: a tilt and nothing else.
    const moves = tilted.faces.map((_, p) => gradient(tilted, p).map((value, k) => value - gradient(level, p)[k]!))
    for (const [gx, gy] of moves) {
      expect(gx).toBeCloseTo(moves[0]![0]!, 5)
      expect(gy).toBeCloseTo(0, 5)
    }
    expect(moves[0]![0]!).toBeLessThan(-0.01)
    await page.context().close()
  }, slow)

  test('a question of the reader is answered by a click, and a proposal is left', async () => {
    const page = await opened()
    await page.setInputFiles('#open-file', office('bars-through.dxf'))
    await page.click('.question .word:text-is("Take it")')
    await page.waitForFunction(() => document.querySelector('.opening header')?.textContent?.includes('24 panels'))
    await page.keyboard.press('Escape')
    await page.setInputFiles('#open-file', office('crooked.dxf'))
    const first = page.locator('.proposals li').first()
    await first.locator('.word:text-is("Leave")').click()
    await page.waitForSelector('.proposals .answers:has-text("eft as drawn")')
    await page.context().close()
  }, slow)

  test('a window is dragged and an outline picked on the drawing, a colour switched off', async () => {
    const page = await opened()
    await page.setInputFiles('#open-file', office('storeys-beside.dxf'))
    await page.waitForSelector('.question')
    await page.click('.opening .word:text-is("Within a window")')
    const canvas = page.locator('.opening canvas')
    const picture = (): Promise<string> => canvas.evaluate((element) => (element as HTMLCanvasElement).toDataURL())
    // All lines as drawn come behind the plan once they are read.
    await page.waitForTimeout(600)
    const before = await picture()
    const box = (await canvas.boundingBox())!
    await page.mouse.move(box.x + 4, box.y + 4)
    await page.mouse.down()
    await page.mouse.move(box.x + box.width / 2, box.y + box.height - 44, { steps: 4 })
    await page.waitForFunction((old) => document.querySelector<HTMLCanvasElement>('.opening canvas')!.toDataURL() !== old, before)
    await page.mouse.up()
    await page.waitForSelector('.report dd:has-text("within the window")')
    await page.waitForFunction(() => document.querySelector('.question') === null && document.querySelector('.opening header')?.textContent?.includes('32 panels'))
    await page.keyboard.press('Escape')

    await page.setInputFiles('#open-file', office('one-layer.dxf'))
    await page.waitForSelector('.report .solid:not([disabled])')
    await page.click('.opening .word:text-is("Inside an outline")')
    await page.waitForTimeout(600)
    // Half a metre into the plan of 12.4 by 6.4 m, from its lower left corner.
    const scale = Math.min((box.width - 96) / 12.4, (box.height - 106) / 6.4)
    const middle = [(40 + box.width - 56) / 2, (40 + box.height - 66) / 2] as const
    await page.mouse.click(box.x + middle[0] - 5.5 * scale, box.y + middle[1] + 2.5 * scale)
    await page.waitForSelector('.report dd:has-text("inside the outline")')
    await page.click('.report .word:text-is("Colours and line types")')
    await page.click('.report label.layer:has-text("colour 3")')
    await page.waitForFunction(() => document.querySelector('.opening header')?.textContent?.includes('32 panels'))
    expect(await page.locator('.report label.layer:has-text("colour 3") input').isChecked()).toBe(false)
    await page.context().close()
  }, slow)

  test('printed sheets: the plan has the scale that its block states, and the list all panels', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    await page.emulateMedia({ media: 'print' })
    await page.evaluate(() => window.dispatchEvent(new Event('beforeprint')))
    const [, scale] = /1:(\d+) on A[34]/.exec((await page.textContent('.true-scale'))!)!
    // The bottom side of P1 is 1.5 m long: in CSS pixels of 25.4 / 96 mm.
    const px = await page.evaluate(() => {
      const path = document.querySelector<SVGPathElement>('.printed #P1')!
      const box = path.getBoundingClientRect()
      return { width: box.width, height: box.height }
    })
    // A skewed bay of 1.5 m is 1.5 m high and 1.8 m wide.
    expect((px.height * 25.4) / 96).toBeCloseTo(1500 / Number(scale), 1)
    expect((px.width * 25.4) / 96).toBeCloseTo(1800 / Number(scale), 1)
    expect(await page.locator('.leaf-tables tbody tr').count()).toBe(24)
    await page.context().close()
  }, slow)

  test('at 200 % zoom and on a phone nothing scrolls sideways; two fingers zoom the plan and one pans it', async () => {
    for (const [width, height] of [[720, 450], [390, 844], [1024, 768]] as const) {
      const context = await stage.browser.newContext({ viewport: { width, height }, hasTouch: width < 1000 })
      const page = await opened(context)
      await accepted(page, grid(6, 4))
      expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true)
      if (width === 390) {
        await page.click('.tabs-phone button:text-is("Plan")')
        const box = (await page.locator('.cell-plan canvas').boundingBox())!
        const [x, y] = [box.x + box.width / 2, box.y + box.height / 2]
        const picture = (): Promise<string> => page.evaluate(() => document.querySelector<HTMLCanvasElement>('.cell-plan canvas')!.toDataURL())
        const cdp = await context.newCDPSession(page)
        const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', touchPoints: { x: number; y: number; id: number }[]): Promise<unknown> => cdp.send('Input.dispatchTouchEvent', { type, touchPoints })
        let seen = await picture()
        for (const fingers of [2, 1]) {
          const at = (d: number): { x: number; y: number; id: number }[] => [{ x: x + 20 + d, y, id: 1 }, { x: x - 20 - d, y, id: 2 }].slice(0, fingers)
          await touch('touchStart', at(0))
          for (let i = 1; i <= 5; i += 1) await touch('touchMove', at(8 * i))
          await touch('touchEnd', [])
          await page.waitForFunction((old) => document.querySelector<HTMLCanvasElement>('.cell-plan canvas')!.toDataURL() !== old, seen)
          seen = await picture()
        }
      }
      await says(page, freeWords(8))
      await context.close()
    }
  }, slow)
}
