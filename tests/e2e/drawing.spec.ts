import { expect, test, type Page } from '@playwright/test'
import { denseScore } from '../support/dense'
import { keepScore, openDesk, signInDemo } from '../support/e2e'
import { parseScore } from '../support/score'

const STRINGS = ['D4', 'B3', 'G3', 'D3', 'A2', 'D2'].map(pitch => ({ pitch }))
const RICH = `{D} {6/8} {len=1/8} 1/2e | 1/0q 2/3e 3/4e 2/1e 1/0e ; 6/0q. 5/0q. | 1/0=e 1/0e 1/3he 1/5pe 1/3e 2/1=e ; 6/0q. zq.
  | 2/1q. (1/12< 2/12<)q. | (1/2 2/3 3/2)q. 3/0xe 3/0xe 4/3le | [3 1/0e 1/1e 1/2e] 1/3s 1/2s 1/1s 1/0s zq | 1/0h. ; 6/0h.`

/** Remembers from now on which bars have any node, attribute or text of theirs changed. */
const watchBars = (page: Page) => page.evaluate(() => {
  const touched = new Set<string | null>()
  Object.assign(window, { touched })
  new MutationObserver((records) => {
    for (const { target } of records) {
      const bar = (target instanceof Element ? target : target.parentElement)?.closest('[data-bar]')
      if (bar) touched.add(bar.getAttribute('data-bar'))
    }
  }).observe(document.querySelector('.score-systems')!, { subtree: true, childList: true, attributes: true, characterData: true })
})

const touched = (page: Page) => page.evaluate(() => [...(window as unknown as { touched: Set<string> }).touched])

async function open(page: Page, score = parseScore(RICH, { title: 'Drawn in the browser', strings: STRINGS })): Promise<void> {
  await signInDemo(page)
  await openDesk(page, await keepScore(page.request, score))
  await expect(page.locator('[data-bar]').first()).toBeAttached()
}

test('moving touches no bar; typing touches the bar that changed and no other', async ({ page }) => {
  const score = denseScore(16)
  await open(page, score)
  await page.getByTestId('score').focus()
  await watchBars(page)
  await page.keyboard.press('ArrowRight')
  await page.keyboard.press('ArrowDown')
  expect(await touched(page)).toEqual([])
  await page.keyboard.press('6')
  await expect.poll(() => touched(page)).toEqual([score.bars[0]!.id])
  await page.waitForTimeout(1000)
  expect((await touched(page)).filter(id => !score.bars.slice(0, 4).some(bar => bar.id === id))).toEqual([])
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
