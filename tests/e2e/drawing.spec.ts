import { expect, test, type Page } from '@playwright/test'
import { denseScore } from '../support/dense'
import { keepScore, openDesk, signInDemo } from '../support/e2e'
import { parseScore } from '../support/score'

const STRINGS = ['D4', 'B3', 'G3', 'D3', 'A2', 'D2'].map(pitch => ({ pitch }))
const RICH = `{D} {6/8} {len=1/8} 1/2e | 1/0q 2/3e 3/4e 2/1e 1/0e ; 6/0q. 5/0q. | 1/0=e 1/0e 1/3he 1/5pe 1/3e 2/1=e ; 6/0q. zq.
  | 2/1q. (1/12< 2/12<)q. | (1/2 2/3 3/2)q. 3/0xe 3/0xe 4/3le | [3 1/0e 1/1e 1/2e] 1/3s 1/2s 1/1s 1/0s zq | 1/0h. ; 6/0h.`

/** Remembers the nodes of every drawn bar in the page. */
const remember = (page: Page) => page.evaluate(() => {
  Object.assign(window, { remembered: new Map([...document.querySelectorAll('[data-bar]')].map(node => [node.getAttribute('data-bar'), node])) })
})

/** Ids of the bars whose nodes are others than those remembered. */
const renewed = (page: Page) => page.evaluate(() => {
  const before = (window as unknown as { remembered: Map<string, Element> }).remembered
  return [...document.querySelectorAll('[data-bar]')].filter(node => before.get(node.getAttribute('data-bar')!) !== node).map(node => node.getAttribute('data-bar'))
})

async function open(page: Page, score = parseScore(RICH, { title: 'Drawn in the browser', strings: STRINGS })): Promise<void> {
  await signInDemo(page)
  await openDesk(page, await keepScore(page.request, score))
  await expect(page.locator('[data-bar]').first()).toBeAttached()
}

test('typing draws the bar that changed and keeps the nodes of the others', async ({ page }) => {
  const score = denseScore(16)
  await open(page, score)
  await page.getByTestId('score').focus()
  await remember(page)
  await page.keyboard.press('ArrowRight')
  await page.keyboard.press('ArrowDown')
  expect(await renewed(page)).toEqual([])
  await page.keyboard.press('6')
  await expect.poll(() => renewed(page)).toEqual([score.bars[0]!.id])
  await page.waitForTimeout(1000)
  expect((await renewed(page)).filter(id => !score.bars.slice(0, 4).some(bar => bar.id === id))).toEqual([])
})

test('the drawing is the same with the library\'s deep clones and with ours', async ({ page, browser }) => {
  const drawn = async (of: Page): Promise<string> => {
    await of.waitForTimeout(500)
    return of.evaluate(() => [...document.querySelectorAll('[data-bar]')].map(node => node.outerHTML).join('\n'))
  }
  await open(page)
  const ours = await drawn(page)
  const other = await browser.newPage()
  // Ours is put in place for the time of a drawing; here it can't be.
  await other.addInitScript(() => {
    const own = globalThis.structuredClone
    Object.defineProperty(globalThis, 'structuredClone', { get: () => own, set: () => {} })
  })
  await signInDemo(other)
  await other.goto(page.url())
  await expect(other.locator('[data-bar]').first()).toBeAttached()
  expect(await drawn(other)).toBe(ours)
  expect(ours).toContain('&lt;12&gt;')
  await other.close()
})

test('a click on a number puts the cursor there, in the voice that plays it', async ({ page }) => {
  await open(page)
  // The open sixth string of bar 1 is the lower voice's.
  const number = page.locator('[data-bar="b2"] text', { hasText: /^0$/ }).last()
  const box = (await number.boundingBox())!
  await page.mouse.click(box.x + box.width / 2, box.y + box.height / 2)
  const cell = (await page.locator('.cursor-cell').boundingBox())!
  expect(cell.x).toBeLessThan(box.x)
  expect(cell.x + cell.width).toBeGreaterThan(box.x + box.width)
  expect(Math.abs(cell.y + cell.height / 2 - (box.y + box.height / 2))).toBeLessThan(6)
})

test('on a phone no system is wider than the page', async ({ page }) => {
  await page.setViewportSize({ width: 390, height: 844 })
  await open(page)
  const widths = await page.evaluate(() => ({
    page: document.documentElement.scrollWidth - window.innerWidth,
    room: document.querySelector('.score-systems')!.clientWidth,
    systems: [...document.querySelectorAll('.system svg')].map(system => system.getBoundingClientRect().width),
  }))
  expect(widths.page).toBeLessThanOrEqual(0)
  expect(widths.systems.length).toBeGreaterThan(1)
  for (const width of widths.systems) expect(width).toBeLessThanOrEqual(widths.room + 1)
})

test('a long piece is drawn where it is looked at, and whole for print', async ({ page }) => {
  const score = denseScore(80)
  await open(page, score)
  const early = await page.locator('[data-bar]').count()
  expect(early).toBeLessThan(80)
  await page.pdf({ format: 'A4' })
  expect(await page.locator('[data-bar]').count()).toBe(80)
})
