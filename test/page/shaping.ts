/** Shaping by hand, as tests that `page.test.ts` runs on its stage; what comes out is measured from the exported model. */
import type { Page } from 'playwright-core'
import { expect, test } from 'vitest'
import { plan } from '../make/plans.ts'
import { fourthCorner_mm, grid, project, readObj } from './drawings.ts'
import { accepted, downloaded, freeWords, onPlan, onPlanOf, opened, says, slow } from './stage.ts'

type Model = ReturnType<typeof readObj>

const model = async (page: Page): Promise<Model> => readObj(await downloaded(page, 'OBJ'))

/** A length in mm as it stands on the page. */
const mmIn = (text: string): number => Number(text.replace(/[\u202f ]/g, '').replace('\u2212', '-').replace(/mm$/, ''))

export function shapingTests(): void {
  test('a way left moved by 100 mm: its peak moves by that and no node by more, and the panels stay flat', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    const before = await model(page)
    await page.click('[role=tab]:text-is("Ways left")')
    await page.waitForSelector('.ways li')
    // Freedom 8 with the rim free: 8 ways, tilts not counted.
    expect(await page.locator('.ways li').count()).toBe(8)
    await page.fill('[aria-label="Way 2, mm"]', '100')
    await page.keyboard.press('Enter')
    await page.waitForFunction(() => [...document.querySelectorAll('.step-list b')].some((step) => /^Way 2 by/.test(step.textContent ?? '')))
    await says(page, freeWords(8))
    const after = await model(page)
    expect(fourthCorner_mm(after)).toBeLessThan(0.01)
    const moved = after.nodes.map(([, , z], i) => 1000 * (z - before.nodes[i]![2]))
    expect(Math.max(...moved.map(Math.abs))).toBeCloseTo(100, 2)
    await page.context().close()
  }, slow * 2)

  test('a surface to come near to: its distance on the page is the one measured; a roof of another project is met exactly', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    const saddle = (i: number, j: number): number => 0.02 * (i - 3) * (j - 2) + 0.5
    await page.setInputFiles('#near-file', grid(6, 4, 'saddle.obj', saddle))
    await page.waitForFunction(() => / at most/.test(document.querySelector('[data-distance]')?.textContent ?? ''))
    await says(page, freeWords(8))
    const near = await model(page)
    expect(fourthCorner_mm(near)).toBeLessThan(0.01)
    // i and j of a node from its place: x = 1.5 i + 0.3 j, y = 1.5 j.
    const off = near.nodes.map(([x, y, z]) => 1000 * Math.abs(z - saddle((x - 0.2 * y) / 1.5, y / 1.5)))
    const said = (await page.textContent('[data-distance]'))!
    expect(mmIn(/([\d.\u202f]+) mm at most/.exec(said)![1]!)).toBeCloseTo(Math.max(...off), 0)
    expect(said).toMatch(/^[\d.]+ mm off it on average/)
    // Another project of the same plan, with a barrel as its roof: that is a lift, so it is met.
    await page.click('.desk button:text-is("barrel")')
    await says(page, freeWords(8))
    const barrel = await model(page)
    const text = await downloaded(page, 'panewise.json')
    await page.click('.desk button:text-is("dome")')
    await page.waitForFunction(() => document.querySelector('.step-list .now b')?.textContent === 'Near to a dome')
    await page.setInputFiles('#near-file', project(text))
    await page.waitForFunction(() => /less than 0.01 mm off/.test(document.querySelector('[data-distance]')?.textContent ?? ''))
    const met = await model(page)
    met.nodes.forEach(([, , z], i) => expect(Math.abs(z - barrel.nodes[i]![2])).toBeLessThan(3e-6))
    await page.context().close()
  }, slow * 3)

  test('another project beside: both figures stand in two columns', async () => {
    const page = await opened()
    await accepted(page, grid(4, 3, 'small.obj'))
    const text = await downloaded(page, 'panewise.json')
    await accepted(page, grid(6, 4))
    await page.setInputFiles('#beside-file', project(text))
    await page.waitForSelector('.beside table')
    const row = (title: string) => page.locator(`.beside tr:has(td:text-is("${title}")) td`).allTextContents()
    // Freedom of m x n bays with the rim free: m + n - 2, and with the tilts and the level three more.
    expect(await row('freedom, left')).toEqual(['freedom, left', '8, 11', '5, 8'])
    expect(await row('panels, joints')).toEqual(['panels, joints', '24, 38', '12, 17'])
    await page.click('.beside .word:text-is("Put it away")')
    await page.waitForSelector('.beside', { state: 'detached' })
    await page.context().close()
  }, slow * 2)

  test('a frozen joint says why: the stem of a T-junction', async () => {
    const page = await opened()
    // A staggered bond of five panels: the stem at (2, 1) to (2, 2) stands over two joints in line.
    const points: [number, number][] = [[0, 0], [3, 0], [6, 0], [0, 1], [2, 1], [3, 1], [4, 1], [6, 1], [0, 2], [2, 2], [4, 2], [6, 2]]
    const faces = [[0, 1, 5, 4, 3], [1, 2, 7, 6, 5], [3, 4, 9, 8], [4, 5, 6, 10, 9], [6, 7, 11, 10]]
    const text = ['# unit: m', ...points.map(([x, y]) => `v ${x} ${y} 0`), ...faces.map((face) => `f ${face.map((i) => i + 1).join(' ')}`), ''].join('\n')
    await accepted(page, { name: 'bond.obj', mimeType: 'text/plain', buffer: Buffer.from(text) })
    await page.mouse.click(...(await onPlanOf(page, plan(points, faces), 2, 1.5)))
    await page.waitForFunction(() => /cannot fold: it is the stem of a T-junction at N\d+, over J\d+ and J\d+ in line/.test(document.querySelector('.plate')?.textContent ?? ''))
    await page.context().close()
  }, slow * 2)

  test('symmetry kept: a node dragged has its image dragged, and the model mirrors to a micrometre', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4, 'straight.obj', () => 0, 0))
    await page.click('[aria-label="Keep symmetry"] button:text-is("left and right")')
    await page.mouse.click(...(await onPlan(page, 6, 4, 3, 3, 0)))
    const handle = (await page.locator('.cell-plan .handle').first().boundingBox())!
    await page.mouse.move(handle.x + 12, handle.y + 12)
    await page.mouse.down()
    for (let i = 1; i <= 5; i += 1) await page.mouse.move(handle.x + 12, handle.y + 12 - 5 * i)
    await page.mouse.up()
    await says(page, /under the conditions/)
    expect(await page.locator('.conditions tbody tr').count()).toBe(2)
    const { nodes, ...rest } = await model(page)
    expect(fourthCorner_mm({ nodes, ...rest })).toBeLessThan(0.01)
    const heights = nodes.map(([, , z]) => z)
    expect(Math.max(...heights) - Math.min(...heights)).toBeGreaterThan(0.2)
    for (const [x, y, z] of nodes) {
      const image = nodes.find(([ix, iy]) => Math.abs(9 - x - ix) < 1e-9 && iy === y)!
      expect(Math.abs(z - image[2])).toBeLessThan(1.5e-6)
    }
    // Released, the image goes with it.
    await page.click('.conditions tbody tr .word:text-is("Release") >> nth=0')
    await says(page, freeWords(8))
    await page.context().close()
  }, slow * 2)

  test('several panels gathered by the keyboard alone lie in one plane, as measured', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    await page.keyboard.press('1')
    for (const key of ['ArrowRight', 'g', 'ArrowRight', 'g', 'ArrowUp', 'g']) await page.keyboard.press(key)
    const names = (await page.textContent('.plate b'))!.split(', ')
    expect(names.length).toBe(3)
    await page.click('.plate .word:text-is("In one plane")')
    await says(page, /under the conditions/)
    const { nodes, faces } = await model(page)
    const corners = [...new Set(names.flatMap((name) => faces[Number(name.slice(1)) - 1]!))].map((i) => nodes[i]!)
    // The plane through three corners of the first; the others lie in it.
    const [a, b, c] = faces[Number(names[0]!.slice(1)) - 1]!.map((i) => nodes[i]!) as unknown as [number[], number[], number[]]
    const [u, v] = [b, c].map((p) => p.map((value, k) => value - a[k]!)) as [number[], number[]]
    const normal = [u[1]! * v[2]! - u[2]! * v[1]!, u[2]! * v[0]! - u[0]! * v[2]!, u[0]! * v[1]! - u[1]! * v[0]!]
    for (const corner of corners) expect(Math.abs(normal.reduce((sum, value, k) => sum + value * (corner[k]! - a[k]!), 0)) / Math.hypot(...normal)).toBeLessThan(1e-5)
    expect(Math.abs(normal[0]!) + Math.abs(normal[1]!)).toBeGreaterThan(1e-3)
    await page.context().close()
  }, slow * 2)

  test('conditions that clash are named, and what letting go of each gives is said and done', async () => {
    const page = await opened()
    await accepted(page, grid(6, 4))
    await page.fill('[aria-label="rim"] input', '0')
    await page.keyboard.press('Enter')
    await says(page, /level rim/)
    await page.mouse.click(...(await onPlan(page, 6, 4, 0, 0)))
    await page.fill('.plate input', '0.3m')
    await page.keyboard.press('Enter')
    await page.waitForFunction(() => document.querySelectorAll('.releases li').length === 2)
    const releases = await page.locator('.releases li').allTextContents()
    expect(releases.length).toBe(2)
    // One corner node held leaves m + n - 2 folds, two tilts and nothing of the level: 10.
    expect(releases.join(' ')).toMatch(/Release rim: every joint folds, freedom left 10\./)
    await page.click('.releases .word:text-is("Release rim")')
    await says(page, /^All 24 panels can be flat/)
    await page.context().close()
  }, slow * 2)
}
