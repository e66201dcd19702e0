/** The page in a real Chromium, driven as a hand would; what it exports is measured by readers of the tests' own. */
import { afterAll, beforeAll, expect, test } from 'vitest'
import { startBrowser } from './chromium.ts'
import { broken, faulty, fourthCorner_mm, gradient, grid, readObj, type File } from './drawings.ts'
import { curingTests } from './curing.ts'
import { drawnTests } from './drawn.ts'
import { keepingTests } from './keeping.ts'
import { reachTests } from './reach.ts'
import { shapingTests } from './shaping.ts'
import { accepted, downloaded, freeWords, onPlan, opened, raiseStage, read, says, slow, stage, strikeStage } from './stage.ts'
import { typingTests } from './typing.ts'

beforeAll(raiseStage, 240_000)
afterAll(strikeStage)

test('a drawing with faults: its repairs are reported, it is accepted, and the answer has the freedom of an 8 x 5 grid, 11', async () => {
  const page = await opened()
  await read(page, faulty())
  expect(await page.textContent('.opening header')).toContain('40 panels')
  const repairs = await page.locator('.repairs li').allTextContents()
  expect(repairs.join(' ')).toMatch(/joined|joins/)
  expect(repairs.join(' ')).toMatch(/lies wholly or partly on another|twice/)
  expect(repairs.join(' ')).toMatch(/loose/)
  await page.click('.report .solid')
  await says(page, freeWords(8 + 5 - 2))
  await page.context().close()
}, slow * 2)

test('a face clicked is a void, clicked again a panel', async () => {
  const page = await opened()
  await read(page, faulty())
  const box = (await page.locator('.opening canvas').boundingBox())!
  const [x, y] = [box.x + box.width / 2 + 12, box.y + box.height / 2 + 12]
  await page.mouse.click(x, y)
  await page.waitForFunction(() => document.querySelector('.opening header')?.textContent?.includes('39 panels, 1 void'))
  await page.mouse.click(x, y)
  await page.waitForFunction(() => document.querySelector('.opening header')?.textContent?.includes('40 panels, 0 void'))
  await page.context().close()
}, slow * 2)

test('a file that cannot be read: one sentence with the line, and nothing is replaced', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  await page.setInputFiles('#open-file', broken())
  const text = await says(page, /line 10/)
  expect(text).toContain('not a number')
  await page.keyboard.press('Escape')
  await says(page, freeWords(8))
  await page.context().close()
}, slow * 2)

test('a profile is held: the exported model has its arc, and every panel is flat as measured by another reader', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  await page.click('[role=tab]:text-is("Profile")')
  const side = page.locator('.desk .entry .word').first()
  const ends = (await side.textContent())!.match(/\d+/g)!.map((number) => Number(number) - 1)
  await side.click()
  await page.fill('.desk .fields input', '0,9 m')
  await page.keyboard.press('Enter')
  await says(page, /under the conditions/)
  const model = readObj(await downloaded(page, 'OBJ'))
  expect(model.faces.length).toBe(24)
  expect(fourthCorner_mm(model)).toBeLessThan(0.01)
  // An arc of rise h over a chord c lies on a circle of radius (c^2 / 4 + h^2) / (2 h): exact, from Pythagoras.
  const radius = (4.5 ** 2 + 0.9 ** 2) / 1.8
  const arc = (x: number): number => Math.sqrt(radius ** 2 - (x - 4.5) ** 2) - (radius - 0.9)
  const [from, to] = ends.map((node) => model.nodes[node]!)
  expect(from![1]).toBe(to![1])
  const row = model.nodes.filter(([, y]) => y === from![1])
  expect(row.length).toBe(7)
  for (const [x, , z] of row) expect(z).toBeCloseTo(arc(x - Math.min(from![0], to![0])), 5)
  await page.context().close()
}, slow * 2)

test('a node dragged: held where the hand left it, exactly, and the panels stay flat; undo goes back to the first document byte for byte', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  const first = await downloaded(page, 'panewise.json')
  const [x, y] = await onPlan(page, 6, 4, 4.5, 3)
  await page.mouse.click(x, y)
  const name = await page.textContent('.plate b')
  expect(name).toMatch(/^N\d+$/)
  const handle = (await page.locator('.cell-plan .handle').first().boundingBox())!
  await page.mouse.move(handle.x + 12, handle.y + 12)
  await page.mouse.down()
  for (let i = 1; i <= 6; i += 1) await page.mouse.move(handle.x + 12, handle.y + 12 - 5 * i)
  await page.mouse.up()
  await says(page, /under the conditions/)
  const asked = await page.locator('.conditions tbody tr').first().locator('td').nth(1).textContent()
  const mm = Number(asked!.replace(/[^0-9\u2212.]/g, '').replace('\u2212', '-'))
  const model = readObj(await downloaded(page, 'OBJ'))
  const node = model.nodes.find(([nx, ny]) => Math.abs(nx - 5.1) < 1e-9 && ny === 3)!
  expect(Math.abs(1000 * node[2] - mm)).toBeLessThan(0.6)
  expect(fourthCorner_mm(model)).toBeLessThan(0.01)
  while (await page.locator('.steps button:has-text("Undo"):not([disabled])').count() > 0) await page.keyboard.press('u')
  await says(page, freeWords(8))
  expect(await downloaded(page, 'panewise.json')).toBe(first)
  await page.context().close()
}, slow * 2)

test('a joint asked to be a valley is one in the roof that comes', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  const [x, y] = await onPlan(page, 6, 4, 4.5, 3.75)
  await page.mouse.click(x, y)
  expect(await page.textContent('.plate b')).toMatch(/^J\d+$/)
  expect(await page.textContent('.plate')).toContain('ridge')
  await page.click('.plate .word:text-is("valley")')
  await page.waitForFunction(() => /^J\d+ valley/.test(document.querySelector('.plate')?.textContent ?? ''))
  const model = readObj(await downloaded(page, 'OBJ'))
  expect(fourthCorner_mm(model)).toBeLessThan(0.01)
  await page.context().close()
}, slow * 2)

test('a point of the slope chart dragged: its panel has the slope asked, measured from the exported model', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  await page.locator('.rows').focus()
  await page.keyboard.press('End')
  const panel = Number((await page.textContent('.plate b'))!.slice(1)) - 1
  // The point selected is ringed; where it is follows from the list's slope and fall, so it is looked for by pressing nearby.
  const chart = (await page.locator('.chart canvas').boundingBox())!
  const model0 = readObj(await downloaded(page, 'OBJ'))
  const [gx, gy] = gradient(model0, panel)
  const outer = [1, 2, 5, 10, 15, 20, 25, 30, 45].find((ring) => ring >= 1.02 * (Math.atan(Math.max(...model0.faces.map((_, p) => Math.hypot(...gradient(model0, p))))) * 180) / Math.PI)!
  const scale = Math.min(chart.width - 74, chart.height - 84) / 2 / Math.tan((outer * Math.PI) / 180)
  const [px, py] = [chart.x + chart.width / 2 - scale * gx, chart.y + (chart.height - 16) / 2 + scale * gy]
  await page.mouse.move(px, py)
  await page.mouse.down()
  for (let i = 1; i <= 5; i += 1) await page.mouse.move(px - 3 * i * Math.sign(-gx), py - 3 * i * Math.sign(gy))
  await page.mouse.up()
  await says(page, /under the conditions/)
  const asked = await page.locator('.conditions tbody tr').first().locator('td').nth(1).textContent()
  const model = readObj(await downloaded(page, 'OBJ'))
  const slope = (Math.atan(Math.hypot(...gradient(model, panel))) * 180) / Math.PI
  expect(Math.abs(slope - Number.parseFloat(asked!))).toBeLessThan(0.06)
  await page.context().close()
}, slow * 2)

test('a level rim leaves a grid nothing: the reason is read, panel by panel, and undone', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  await page.click('.desk button:text-is("level at the datum")')
  const text = await says(page, /two edges on the level rim/)
  expect(text).toContain('24 panels')
  expect(await page.textContent('.facts')).toContain('Freedom left0')
  await page.keyboard.press('u')
  await says(page, freeWords(8))
  await page.context().close()
}, slow * 2)

test('closed in mid-work: the browser kept the last step, the list offers it, and it goes on with the same answer', async () => {
  const context = await stage.browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true })
  const page = await opened(context)
  await accepted(page, grid(6, 4, 'kept.obj'))
  await page.click('.desk button:text-is("level at the datum")')
  await says(page, /level rim/)
  await page.waitForFunction(() => /^2, kept/.test([...document.querySelectorAll('.facts dd')].pop()?.textContent ?? ''))
  const text = await downloaded(page, 'panewise.json')
  await page.close({ runBeforeUnload: false })
  const again = await opened(context)
  await again.click('.samples button:text-is("kept.obj")')
  await says(again, /level rim/)
  expect(await downloaded(again, 'panewise.json')).toBe(text)
  await context.close()
}, slow * 2)

test('storage that is closed is said, and the work goes on', async () => {
  const page = await opened(undefined, () => {
    Object.defineProperty(window, 'indexedDB', { value: { open: () => { throw new Error('closed') } } })
  })
  await accepted(page, grid(4, 3))
  await page.waitForFunction(() => document.querySelector('.facts')?.textContent?.includes('not kept'))
  await page.context().close()
}, slow)

curingTests()
shapingTests()
drawnTests()
keepingTests()
reachTests()
typingTests()

test('names with markup stay text', async () => {
  const page = await opened()
  await accepted(page, grid(4, 3, '<img src=x onerror=alert(1)>.obj'))
  expect(await page.textContent('.open-name')).toBe('<img src=x onerror=alert(1)>.obj')
  expect(await page.locator('.sheet img').count()).toBe(0)
  await page.context().close()
}, slow)

test('a project from elsewhere: a newer version is refused with a sentence, a damaged one with its line', async () => {
  const page = await opened()
  await accepted(page, grid(4, 3))
  const text = await downloaded(page, 'panewise.json')
  const file = (body: string): File => ({ name: 'a.panewise.json', mimeType: 'application/json', buffer: Buffer.from(body) })
  await page.setInputFiles('#open-file', file(text.replace('"version": 1', '"version": 9')))
  await says(page, /version 9 and this program reads version 1/)
  await page.keyboard.press('Escape')
  // Half of it: what a disk that fills up, or a mail that is cut, leaves.
  await page.setInputFiles('#open-file', file(text.slice(0, text.length / 2)))
  await says(page, /a\.panewise\.json, line \d+/)
  await page.keyboard.press('Escape')
  await page.setInputFiles('#open-file', file(text))
  await says(page, freeWords(5))
  await page.context().close()
}, slow * 2)

test('long work shows its stage and stops when told to', async () => {
  const page = await opened()
  await read(page, grid(200, 200))
  // The word is pressed the moment it stands there: how long the work would take does not matter.
  const pressed = page.evaluate(() => new Promise<void>((resolve) => {
    const look = (): void => {
      const stop = [...document.querySelectorAll<HTMLElement>('.verdict .word')].find((word) => word.textContent === 'Stop')
      if (stop === undefined) return
      observer.disconnect()
      stop.click()
      resolve()
    }
    const observer = new MutationObserver(look)
    observer.observe(document.body, { subtree: true, childList: true })
  }))
  await page.click('.report .solid')
  await pressed
  await page.waitForFunction(() => document.querySelector('.bar') === null)
  // The page is alive: another drawing opens and is answered.
  await accepted(page, grid(4, 3))
  await page.context().close()
}, slow * 3)

test('without WebGL the same scene is painted, and a line says so', async () => {
  const plain = await startBrowser(['--disable-3d-apis'])
  try {
    const page = await opened(await plain.newContext({ viewport: { width: 1024, height: 768 } }))
    await accepted(page, grid(6, 4))
    await page.waitForSelector('text=Drawn without WebGL')
    // 24 panels that face differently have more than a handful of tones.
    await page.waitForFunction(() => {
      const canvas = document.querySelector<HTMLCanvasElement>('.roof canvas')
      if (canvas === null || canvas.width === 0) return false
      const data = canvas.getContext('2d')!.getImageData(0, 0, canvas.width, canvas.height).data
      const seen = new Set<number>()
      for (let i = 0; i < data.length; i += 16) if (data[i + 3] === 255) seen.add((data[i]! << 16) | (data[i + 1]! << 8) | data[i + 2]!)
      return seen.size > 12
    })
  } finally {
    await plain.close()
  }
}, slow * 2)

test('a lost WebGL context comes back', async () => {
  const page = await opened()
  // Small roofs are painted without a WebGL that is software.
  await accepted(page, grid(51, 50))
  await page.waitForFunction(() => document.querySelector<HTMLCanvasElement>('.roof canvas')?.getContext('webgl2')?.isContextLost() === false)
  await page.evaluate(() => document.querySelector<HTMLCanvasElement>('.roof canvas')!.getContext('webgl2')!.getExtension('WEBGL_lose_context')!.loseContext())
  await page.waitForFunction(() => document.querySelector<HTMLCanvasElement>('.roof canvas')?.getContext('webgl2')?.isContextLost() === false)
  await page.context().close()
}, slow * 2)

test('every command has a key and the keyboard reaches every pane', async () => {
  const page = await opened()
  await accepted(page, grid(6, 4))
  for (const [key, pane] of [['1', 'plan'], ['2', 'chart'], ['4', 'list'], ['5', 'ways']] as const) {
    await page.keyboard.press(key)
    await page.waitForFunction((name) => document.activeElement?.closest(`[data-pane="${name}"]`) !== null, pane)
    await page.evaluate(() => (document.activeElement as HTMLElement).blur())
  }
  await page.keyboard.press('f')
  expect(await page.getAttribute('.plan [role=radio]:text-is("flatness")', 'aria-checked')).toBe('true')
  await page.keyboard.press('1')
  await page.keyboard.press('ArrowRight')
  await page.waitForSelector('.row.chosen')
  await page.context().close()
}, slow * 2)

test('no error on the console, no request to another place, in all of the above', () => {
  expect(stage.wrong).toEqual([])
})
