/** What is typed and what is taken away: lengths in every spelling, sections, shapes, figures of two steps, files. Run by page.test.ts on one page. */
import { readFileSync } from 'node:fs'
import type { Page } from 'playwright-core'
import { afterAll, expect, test } from 'vitest'
import { fourthCorner_mm, grid, readObj } from './drawings.ts'
import { accepted, downloaded, onPlan, opened, slow } from './stage.ts'

type Model = ReturnType<typeof readObj>

const model = async (page: Page): Promise<Model> => readObj(await downloaded(page, 'OBJ'))

/** Waits until the step in force is called so (thin spaces left out) and its answer is drawn. */
async function stepIs(page: Page, words: string): Promise<void> {
  await page.waitForFunction((wanted) => {
    const now = document.querySelector('.step-list .now b')?.textContent?.replace(/\u202f/g, '') ?? ''
    return now.endsWith(wanted) && document.querySelector('.drawing.faded') === null && document.querySelector('.facts .note') !== null
  }, words).catch(async (cause: unknown) => {
    throw new Error(`The step is not "${words}" but "${await page.textContent('.step-list .now b', { timeout: 1000 }).catch(() => 'none')}"`, { cause })
  })
}

/** Spellings of lengths, with their figure in whole mm as steps are called; the last is the one measured: 4 ft 6 in = 1.3716 m exactly. */
const spellings = [['1.2m', '1200'], ['1250', '1250'], ['0,9 m', '900'], ['4\' 6"', '1372']] as const
const typed_m = 1.3716

async function typedInto(page: Page, field: string, words: (mm: string) => string): Promise<Model> {
  for (const [text, mm] of spellings) {
    await page.fill(field, text)
    await page.keyboard.press('Enter')
    await stepIs(page, words(mm))
  }
  return model(page)
}

const zs = ({ nodes }: Model): number[] => nodes.map(([, , z]) => z)

/** Highest less lowest node of the rim of the skewed grid of 6 x 4 bays. */
function rimVariation_mm({ nodes }: Model): number {
  const rim = nodes.filter(([x, y]) => y === 0 || y === 6 || Math.abs(x - 0.2 * y) < 1e-6 || Math.abs(x - 0.2 * y - 9) < 1e-6).map(([, , z]) => z)
  expect(rim.length).toBe(20)
  return 1000 * (Math.max(...rim) - Math.min(...rim))
}

/** A node of a run of the profile: how far along it stands, and its height, in m. */
type Along = readonly [along: number, z: number]

/** Picks the first side that the profile offers, one of 9 m; what comes back reads its nodes from a model, along the run. */
async function pickedSide(page: Page): Promise<(model: Model) => Along[]> {
  await page.click('[role=tab]:text-is("Profile")')
  const word = page.locator('.desk .entry .word').first()
  const [from, to] = (await word.textContent())!.match(/\d+/g)!.map((number) => Number(number) - 1) as [number, number]
  await word.click()
  return ({ nodes }) => {
    const [first, last] = [nodes[from]!, nodes[to]!]
    expect(first[1]).toBe(last[1])
    const row = nodes.filter(([, y]) => y === first[1]).map(([x, , z]): Along => [Math.abs(x - first[0]), z]).sort((a, b) => a[0] - b[0])
    expect(row.length).toBe(7)
    return row
  }
}

export function typingTests(): void {
  let page: Page
  const anew = async (): Promise<void> => {
    page ??= await opened()
    await accepted(page, grid(6, 4))
  }
  afterAll(async () => page?.context().close())

  test('lengths as people type them: rise, springing, a node\u2019s height and a level have them in the exported model to a micrometre', async () => {
    await anew()
    const risen = zs(await typedInto(page, '[aria-label="Rise over springing"]', (mm) => `Rise ${mm} mm`))
    expect(Math.abs(Math.max(...risen) - Math.min(...risen) - typed_m)).toBeLessThan(1.5e-6)
    // The springing is the lowest node of the rim, and a dome has its lowest nodes there.
    const sprung = zs(await typedInto(page, '[aria-label^="Springing"]', (mm) => `Springing at ${mm} mm`))
    expect(Math.abs(Math.min(...sprung) - typed_m)).toBeLessThan(1.5e-6)

    // Each with nothing else held: the figures are those of the roof as it came.
    await anew()
    await page.mouse.click(...(await onPlan(page, 6, 4, 4.5, 3)))
    const lifted = await typedInto(page, '.plate input', (mm) => ` +${mm} mm`)
    const middle = lifted.nodes.find(([x, y]) => Math.abs(x - 5.1) < 1e-9 && y === 3)!
    expect(Math.abs(middle[2] - typed_m)).toBeLessThan(1.5e-6)

    await anew()
    const side = await pickedSide(page)
    await page.click('[aria-label="Section"] button:text-is("level")')
    const levelled = await typedInto(page, '.desk .fields input', (mm) => `level at +${mm} mm`)
    for (const [, z] of side(levelled)) expect(Math.abs(z - typed_m)).toBeLessThan(1.5e-6)
    expect(fourthCorner_mm(levelled)).toBeLessThan(0.01)
  }, slow * 2)

  test('sections by hand: a pitch typed, a level a node typed, one of them dragged; shapes keep the rise asked; two steps side by side', async () => {
    await anew()
    const side = await pickedSide(page)
    const kind = (name: string): Promise<void> => page.click(`[aria-label="Section"] button:text-is("${name}")`)
    const type = async (label: string, text: string): Promise<void> => {
      await page.fill(`.desk .field:has-text("${label}") input`, text)
      await page.keyboard.press('Enter')
    }
    await kind('pitch')
    await type('pitch', '12,5')
    await stepIs(page, ': pitch 12.5\u00b0')
    await type('ends at', '25cm')
    await stepIs(page, 'ends at +250 mm')
    const pitched = await model(page)
    // Two slopes of one pitch that meet over the middle of a chord of 9 m: exact, from the definition of a slope.
    for (const [x, z] of side(pitched)) expect(Math.abs(z - (0.25 + (4.5 - Math.abs(x - 4.5)) * Math.tan((12.5 * Math.PI) / 180)))).toBeLessThan(1.5e-6)
    expect(fourthCorner_mm(pitched)).toBeLessThan(0.01)

    await kind('levels')
    await type('levels', '0; 300; 0,5m; 700; 1\' 6"; 25cm; \u221240')
    await stepIs(page, ': 7 levels')
    const typed = [0, 0.3, 0.5, 0.7, 0.4572, 0.25, -0.04]
    side(await model(page)).forEach(([, z], k) => expect(Math.abs(z - typed[k]!)).toBeLessThan(1.5e-6))

    const knob = (await page.locator('.section .knob').nth(3).boundingBox())!
    const [x, y] = [knob.x + knob.width / 2, knob.y + knob.height / 2]
    await page.mouse.move(x, y)
    await page.mouse.down()
    for (let i = 1; i <= 3; i += 1) await page.mouse.move(x, y - 4 * i)
    await page.mouse.up()
    await page.waitForFunction(() => document.querySelectorAll('.step-list li').length === 5 && document.querySelector('.drawing.faded') === null)
    const dragged = await model(page)
    const brief = JSON.parse(await downloaded(page, 'panewise.json')) as { brief: { conditions: { section: { points: [number, number][] } }[] } }
    const points = brief.brief.conditions[0]!.section.points
    expect(points[3]![1]).toBeGreaterThan(0.75)
    side(dragged).forEach(([, z], k) => {
      expect(Math.abs(z - points[k]![1])).toBeLessThan(1.5e-6)
      if (k !== 3) expect(points[k]![1]).toBeCloseTo(typed[k]!, 9)
    })

    await page.click('.desk .word:text-is("Release")')
    await page.fill('[aria-label="Rise over springing"]', '1.1m')
    await page.keyboard.press('Enter')
    await stepIs(page, 'Rise 1100 mm')
    await page.click('[role=tab]:text-is("Conditions")')
    for (const shape of ['pitched', 'hipped']) {
      await page.click(`.desk button:text-is("${shape}")`)
      await stepIs(page, `Near to a ${shape} roof`)
      const shaped = await model(page)
      expect(Math.abs(Math.max(...zs(shaped)) - Math.min(...zs(shaped)) - 1.1)).toBeLessThan(1.5e-6)
      expect(fourthCorner_mm(shaped)).toBeLessThan(0.01)
      expect(await page.inputValue('[aria-label="Rise over springing"]')).toBe('1100')
      expect(await page.getAttribute('.diamond', 'aria-valuenow')).toBe('1100')
    }

    // The step before beside the one in force: the figures of both are those measured.
    const before = await model(page)
    await page.fill('[aria-label="Rise over springing"]', '1.5m')
    await page.keyboard.press('Enter')
    await stepIs(page, 'Rise 1500 mm')
    const after = await model(page)
    const most = Math.max(...after.nodes.map(([, , z], i) => Math.abs(z - before.nodes[i]![2])))
    await page.click('.steps button:has-text("Compare with a step")')
    const said = (await page.textContent('[data-pane="chart"] .foot'))!.replace(/\u202f/g, '')
    expect(said).toContain('rise 1500 mm, was 1100 mm')
    const [, now, then] = /the rim varies by (\d+) mm, was (\d+) mm/.exec(said)!.map(Number)
    expect(Math.abs(now! - rimVariation_mm(after))).toBeLessThan(0.51)
    expect(Math.abs(then! - rimVariation_mm(before))).toBeLessThan(0.51)
    expect(then!).toBeGreaterThan(100)
    expect(Math.abs(Number(/more than ([\d.]+) mm/.exec(said)![1]) - 1000 * most)).toBeLessThan(0.51)
  }, slow * 2)

  test('lists and drawings are taken away: their names, the columns of the lists, the first bytes of the pictures', async () => {
    await anew()
    await page.waitForSelector('.diamond')
    await page.keyboard.press('t')
    const taken = async (row: string, word: string): Promise<{ name: string; bytes: Buffer }> => {
      const [download] = await Promise.all([page.waitForEvent('download'), page.click(`dialog tr:has(th:text-is("${row}")) .word:text-is("${word}")`)])
      return { name: download.suggestedFilename(), bytes: readFileSync(await download.path()) }
    }
    // 24 panels, 38 joints (6 x 3 + 4 x 5), 35 nodes.
    for (const [word, rows, columns] of [
      ['panels', 24, 'panel,corners,plan_area_m2,area_m2,perimeter_m,slope_deg,fall_deg,corner_mm,flatness_mm'],
      ['joints', 38, 'joint,from,to,length_m,fold,fold_deg,dihedral_deg,form_density_no_load,form_force_no_load'],
      ['nodes', 35, 'node,x,y,z,valence,rim'],
    ] as const) {
      const { name, bytes } = await taken('Lists', word)
      expect(name).toBe(`${word}.csv`)
      // RFC 4180: every line ends with CR LF.
      const lines = bytes.toString('utf8').split('\r\n')
      expect(lines[0]).toBe(columns)
      expect(lines.length).toBe(rows + 2)
    }
    for (const [row, word, width] of [['Plan', 'plan', 1200], ['Slope chart', 'chart', 900], ['Roof, as it is seen', 'roof', 1200]] as const) {
      const svg = await taken(row, 'SVG')
      expect(svg.name).toBe(`${word}.svg`)
      expect(svg.bytes.toString('utf8')).toMatch(new RegExp(`^(<\\?xml[^>]*>\\s*)?<svg [^>]*width="${width}`))
      expect(svg.bytes.toString('utf8').trim()).toMatch(/<\/svg>$/)
      const png = await taken(row, 'PNG')
      expect(png.name).toBe(`${word}.png`)
      // Signature and the width and height of IHDR, big-endian (PNG, third edition, 5.2 and 11.2.1): twice the drawing's pixels.
      expect(png.bytes.subarray(0, 8).toString('hex')).toBe('89504e470d0a1a0a')
      expect([png.bytes.readUInt32BE(16), png.bytes.readUInt32BE(20)]).toEqual([2 * width, 1800])
    }
  }, slow)
}
