/** What it takes, one-way folds and balancing on the page, as tests that `page.test.ts` runs on its stage; all share one page. */
import type { Page } from 'playwright-core'
import { afterAll, expect, test } from 'vitest'
import { grid, readObj, type File } from './drawings.ts'
import { downloaded, freeWords, onPlanOf, opened, read, says, slow } from './stage.ts'
import { plan } from '../make/plans.ts'

type Points = readonly (readonly [number, number])[]

/** A plan in metres as OBJ. */
const drawing = (name: string, points: Points, faces: readonly (readonly number[])[]): File => ({
  name, mimeType: 'text/plain',
  buffer: Buffer.from(['# unit: m', ...points.map(([x, y]) => `v ${x} ${y} 0`), ...faces.map((face) => `f ${face.map((i) => i + 1).join(' ')}`), ''].join('\n')),
})

/** A frustum over a triangle whose spokes do not meet in one point: it does not lift (Maxwell 1864). */
const frustum: Points = [[0, 0], [12, 0], [0, 12], [2, 2], [10, 1], [2.5, 8]]
const frustumFaces = [[0, 1, 4, 3], [1, 2, 5, 4], [2, 0, 3, 5], [3, 4, 5]]
/** The least total shift of its three inner nodes that makes the spokes meet: exact, worked out from the definition two ways. */
const leastShift = 0.1858733893

/** The triangulation that is not regular: De Loera, Rambau, Santos, Triangulations (2010). Its folds on 1-3, 2-4 and 0-5 cancel in every roof. */
const twisted: Points = [[4, 0], [0, 4], [0, 0], [2, 1], [1, 2], [1, 1]]
const twistedFaces = [[3, 4, 5], [0, 3, 1], [1, 3, 4], [1, 2, 4], [2, 4, 5], [0, 2, 5], [0, 3, 5]]

/** Largest distance in mm of any corner from the plane of the first three of its face. */
function offPlane_mm({ nodes, faces }: ReturnType<typeof readObj>): number {
  let most = 0
  for (const face of faces) {
    const [a, b, c] = face.map((i) => nodes[i]!) as unknown as [number[], number[], number[]]
    const [u, v] = [b, c].map((p) => p.map((value, k) => value - a[k]!)) as [number[], number[]]
    const normal = [u[1]! * v[2]! - u[2]! * v[1]!, u[2]! * v[0]! - u[0]! * v[2]!, u[0]! * v[1]! - u[1]! * v[0]!]
    for (const i of face) most = Math.max(most, Math.abs(normal.reduce((sum, value, k) => sum + value * (nodes[i]![k]! - a[k]!), 0)) / Math.hypot(...normal))
  }
  return 1000 * most
}

const rise = ({ nodes }: ReturnType<typeof readObj>): number => Math.max(...nodes.map(([, , z]) => z)) - Math.min(...nodes.map(([, , z]) => z))

export function curingTests(): void {
  let page: Page
  const open = async (file: File, pattern: RegExp): Promise<void> => {
    page ??= await opened()
    await read(page, file)
    await page.click('.report .solid')
    await says(page, pattern)
  }
  afterAll(async () => page?.context().close())
  const desk = (title: string): Promise<void> => page.click(`.desk [role=tab]:text-is("${title}")`)
  const stepNow = (what: RegExp) => page.waitForFunction((source) => new RegExp(source).test(document.querySelector('.step-list .now b')?.textContent ?? ''), what.source)

  test('nodes moved by one click: as far as promised, to the freedom promised, flat as measured; kept in the project; undone', async () => {
    await open(drawing('frustum.obj', frustum, frustumFaces), /^The roof cannot be raised/)
    await desk('What it takes')
    const card = page.locator('.cures li', { hasText: 'Move nodes' })
    const words = (await card.textContent())!
    const promised = /at most ([\d.]+) mm .*, (\d+) adjustments? to choose/.exec(words)!
    await card.locator('.word:text-is("on the plan")').click()
    expect(await card.locator('small').textContent()).toMatch(/Moves drawn \d+ times as long as they are|as long as they are/)
    await card.locator('.word:text-is("Apply")').click()
    // Adjustments promised count the tilts and the level, the sentence does not: three less.
    await says(page, freeWords(Number(promised[2]) - 3))
    await stepNow(/^Nodes moved by at most/)
    const model = readObj(await downloaded(page, 'OBJ'))
    expect(offPlane_mm(model)).toBeLessThan(0.01)
    expect(rise(model)).toBeGreaterThan(0.1)
    // Each drawn node to the nearest of the model: the reader gives nodes an order of its own.
    const shifts = frustum.map(([x, y]) => Math.min(...model.nodes.map((node) => Math.hypot(node[0] - x, node[1] - y))))
    expect(Math.max(...shifts) * 1000 / Number(promised[1])).toBeCloseTo(1, 1)
    expect(shifts.slice(0, 3)).toEqual([0, 0, 0])
    expect(Math.hypot(...shifts)).toBeGreaterThan(leastShift - 1e-5)
    // The project holds the plan as it is now.
    const kept = JSON.parse(await downloaded(page, 'panewise.json')) as { nodes: [number, number][]; reading: { notices: string[] } }
    kept.nodes.forEach(([x, y], i) => expect(Math.hypot(x - model.nodes[i]![0], y - model.nodes[i]![1])).toBeLessThan(1e-5))
    expect(kept.reading.notices.join(' ')).toContain('Move nodes by at most')
    await page.keyboard.press('u')
    await says(page, /^The roof cannot be raised/)
  }, slow * 2)

  test('diagonals by one click: as many panels more, and the joints promised fold', async () => {
    await open(grid(4, 3, 'bays.obj', () => 0, 0), /^All 12 panels can be flat/)
    await desk('Conditions')
    await page.click('[aria-label="rim"] button:text-is("level at the datum")')
    await says(page, /^The roof cannot be raised/)
    await desk('What it takes')
    const card = page.locator('.cures li', { hasText: 'Divide' })
    const count = Number(/by (\d+) diagonal/.exec((await card.textContent())!)![1])
    await card.locator('.word:text-is("Apply")').click()
    await stepNow(/diagonal/)
    await says(page, new RegExp(`All ${12 + count} panels`))
    const model = readObj(await downloaded(page, 'OBJ'))
    expect(model.faces.length).toBe(12 + count)
    expect(offPlane_mm(model)).toBeLessThan(0.01)
    expect(rise(model)).toBeGreaterThan(0.05)
    // The rim, as the definition of the condition has it, is level.
    for (const [x, y, z] of model.nodes) if (x === 0 || x === 6 || y === 0 || y === 4.5) expect(Math.abs(z)).toBeLessThan(1e-5)
    await page.keyboard.press('u')
    await says(page, /^The roof cannot be raised/)
  }, slow * 2)

  test('joints that cannot all fold one way are named and picked on the plan; those of a grid can', async () => {
    await open(drawing('twisted.obj', twisted, twistedFaces), /^All 7 panels can be flat/)
    await desk('Conditions')
    await page.click('.word:text-is("Could all joints fold one way?")')
    await page.waitForFunction(() => /cannot all be ridges/.test(document.querySelector('[data-one-way]')?.textContent ?? ''))
    expect(await page.textContent('[data-one-way]')).toMatch(/J\d+, J\d+(,| and) J\d+ cannot all be ridges/)
    expect(await page.locator('.gathered line').count()).toBe(3)
    // The three by their middles on the plan, from the published coordinates.
    const whole = plan(twisted as [number, number][], twistedFaces)
    const box = (await page.locator('.cell-plan canvas').boundingBox())!
    const drawn = await page.locator('.gathered line').evaluateAll((lines) => lines.map((line) => ['x1', 'x2', 'y1', 'y2'].map((name) => Number(line.getAttribute(name)))))
    for (const [a, b] of [[1, 3], [2, 4], [0, 5]] as const) {
      const [x, y] = await onPlanOf(page, whole, (twisted[a]![0] + twisted[b]![0]) / 2, (twisted[a]![1] + twisted[b]![1]) / 2)
      const near = drawn.map(([x1, x2, y1, y2]) => Math.hypot(box.x + (x1! + x2!) / 2 - x, box.y + (y1! + y2!) / 2 - y))
      expect(Math.min(...near)).toBeLessThan(2)
    }
    await open(grid(3, 2, 'few.obj'), /^All 6 panels can be flat/)
    await page.click('.word:text-is("Could all joints fold one way?")')
    await page.waitForFunction(() => /can be ridges at once/.test(document.querySelector('[data-one-way]')?.textContent ?? ''))
    await page.click('.word:text-is("Take that roof")')
    await stepNow(/Folded one way/)
    // No joint of it is a valley: the key of the plan counts none, in the model every joint sheds.
    const model = readObj(await downloaded(page, 'OBJ'))
    expect(offPlane_mm(model)).toBeLessThan(0.01)
    // i and j of a node from its place: x = 1.5 i + 0.3 j, y = 1.5 j.
    const at = (i: number, j: number): number => model.nodes.find(([x, y]) => Math.hypot(x - 1.5 * i - 0.3 * j, y - 1.5 * j) < 1e-6)![2]
    for (let j = 0; j <= 2; j += 1) for (let i = 1; i < 3; i += 1) expect(at(i - 1, j) + at(i + 1, j) - 2 * at(i, j)).toBeLessThan(-1e-3)
    for (let i = 0; i <= 3; i += 1) expect(at(i, 0) + at(i, 2) - 2 * at(i, 1)).toBeLessThan(-1e-3)
  }, slow * 2)

  test('the plan balanced: every node where its joints say, a density typed, kept as a step, the model flat as measured', async () => {
    await open(drawing('frustum.obj', frustum, frustumFaces), /^The roof cannot be raised/)
    await desk('Balance')
    await page.click('[aria-label="Densities"] button:text-is("uniform")')
    await says(page, freeWords(1))
    await page.mouse.click(...(await onPlanOf(page, plan(frustum as [number, number][], frustumFaces), 1.5, 1.5)))
    await page.waitForSelector('.density input[type=range]')
    const joint = (await page.textContent('.density span'))!
    expect(joint).toMatch(/^J\d+$/)
    await page.fill('.density .field input', '3')
    await page.keyboard.press('Enter')
    await page.waitForFunction(() => /1 density typed/.test(document.querySelector('[data-balanced]')?.textContent ?? ''))
    await page.click('.word:text-is("Keep this plan")')
    await stepNow(/^Balanced with uniform densities, 1 typed$/)
    await says(page, freeWords(1))
    const model = readObj(await downloaded(page, 'OBJ'))
    expect(offPlane_mm(model)).toBeLessThan(0.01)
    expect(rise(model)).toBeGreaterThan(0.1)
    // sum_j s_ij (p_j - p_i) = 0 at each inner node (Tutte 1963), s = 3 on the joint 0-3 that was picked.
    const corners = [[0, 0], [12, 0], [0, 12]].map(([x, y]) => model.nodes.findIndex((node) => node[0] === x && node[1] === y))
    expect(corners).not.toContain(-1)
    const inner = [...model.nodes.keys()].filter((node) => !corners.includes(node))
    expect(inner.length).toBe(3)
    for (const node of inner) {
      const ends = new Set(model.faces.flatMap((face) => face.flatMap((corner, k) => (corner === node ? [face.at(k - 1)!, face[(k + 1) % face.length]!] : []))))
      for (const axis of [0, 1]) {
        const pull = [...ends].reduce((sum, end) => sum + (end === corners[0] ? 3 : 1) * (model.nodes[end]![axis]! - model.nodes[node]![axis]!), 0)
        expect(Math.abs(pull)).toBeLessThan(1e-5)
      }
    }
    await page.keyboard.press('u')
    await says(page, /^The roof cannot be raised/)
  }, slow * 2)
}
