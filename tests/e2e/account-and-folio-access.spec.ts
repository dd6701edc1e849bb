import { AxeBuilder } from '@axe-core/playwright'
import { expect, test, type Page } from '@playwright/test'
import { signInDemo, visit } from '../support/e2e'

/**
 * WCAG 2.2 A and AA as far as axe-core can tell (https://github.com/dequelabs/axe-core/blob/develop/doc/rule-descriptions.md), on every page,
 * by day and by night, on a desk and on a phone; and nothing wider than its window (WCAG 2.2, 1.4.10 Reflow).
 */
const token = 'a'.repeat(32)
const open = ['/', '/sign-in', '/sign-in?done=reset', '/register', '/forgot', '/confirm', `/confirm#token=${token}`, `/reset#token=${token}`, '/help', '/outbox', '/no-such-page']
const closed = ['/folio', '/account']

const RULES = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice']

async function check(page: Page, where: string): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).withTags(RULES).analyze()
  expect(violations.map(({ id, nodes }) => `${where} ${id}: ${nodes.map(({ target }) => target.join(' ')).join(', ')}`)).toEqual([])
  expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth), `${where} is wider than its window`).toBeLessThanOrEqual(0)
}

for (const [device, viewport] of [['desk', { width: 1440, height: 900 }], ['phone', { width: 390, height: 844 }]] as const) {
  for (const colorScheme of ['light', 'dark'] as const) {
    test.describe(`${device}, ${colorScheme}`, () => {
      test.use({ viewport, colorScheme, contextOptions: { reducedMotion: 'reduce' } })

      for (const path of open) {
        test(`${path} for anyone`, async ({ page }) => {
          await visit(page, path)
          await check(page, path)
        })
      }
      for (const path of closed) {
        test(`${path} for people who are signed in`, async ({ page }) => {
          await signInDemo(page)
          await visit(page, path)
          await check(page, path)
        })
      }
      test('menus and dialogs', async ({ page }) => {
        await signInDemo(page)
        await visit(page, '/folio')
        await page.getByRole('button', { name: /^Actions for/ }).first().click()
        await check(page, 'the menu of a row')
        await page.keyboard.press('Escape')
        await page.getByRole('button', { name: 'New arrangement…' }).first().click()
        await page.getByRole('button', { name: 'Make the arrangement' }).click()
        await check(page, 'a new arrangement with an error')
      })
    })
  }
}

test('controls are large enough for a finger', async ({ page }) => {
  // WCAG 2.2, 2.5.8 Target Size: 24 CSS pixels; links inside a sentence are excepted. On a phone we hold 44 (2.5.5).
  await page.setViewportSize({ width: 390, height: 844 })
  await signInDemo(page)
  for (const path of ['/folio', '/account', '/help']) {
    await visit(page, path)
    const small = await page.locator('button, input:not([type=file]), select, summary, nav a, [role=rowheader] a').evaluateAll(all => all
      .filter(each => each.checkVisibility())
      .map(each => ({ name: each.textContent?.trim() || each.id, height: each.getBoundingClientRect().height, width: each.getBoundingClientRect().width }))
      .filter(({ height, width }) => height < 43.5 || width < 24))
    expect(small, path).toEqual([])
  }
})
