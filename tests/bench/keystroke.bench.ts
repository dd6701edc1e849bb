import { test, type Browser, type Page } from '@playwright/test'
import { denseScore } from '../support/dense'
import { keepScore, openDesk, signInDemo } from '../support/e2e'
import { measureKeys, percentile, type KeyFigures } from '../support/trace'

/** What a person types when correcting a bar: frets, moves between strings and events, lengths; sixty keys. */
const KEYS = Array.from({ length: 10 }, () => ['2', 'ArrowRight', '4', 'ArrowDown', 'ArrowRight', 'ArrowUp']).flat()

const rows: string[] = []
const report = (name: string, { work, painted }: KeyFigures) => rows.push(
  [name.padEnd(24), ...[percentile(work, 0.5), percentile(work, 0.95), percentile(painted, 0.5), percentile(painted, 0.95)].map(each => each.toFixed(1).padStart(9))].join(''))

async function onDesk(browser: Browser, page: Page, bars: number): Promise<KeyFigures> {
  await signInDemo(page)
  await openDesk(page, await keepScore(page.request, denseScore(bars)))
  await page.getByTestId('score').focus()
  for (const key of ['Control+ArrowRight', 'Control+ArrowRight', ...KEYS.slice(0, 12)]) await page.keyboard.press(key, { delay: 20 })
  await page.waitForTimeout(1500)
  return measureKeys(browser, page, KEYS)
}

async function inTextarea(browser: Browser, page: Page): Promise<KeyFigures> {
  await page.goto('/help')
  await page.setContent('<textarea style="width:40em;height:20em"></textarea>')
  await page.locator('textarea').focus()
  return measureKeys(browser, page, KEYS)
}

test('keystrokes on the desk beside a bare textarea', async ({ browser, page }) => {
  report('textarea', await inTextarea(browser, page))
  for (const bars of [16, 200, 400]) report(`desk, ${bars} bars`, await onDesk(browser, page, bars))
  report('textarea again', await inTextarea(browser, page))
  console.log(`\nMilliseconds for each of ${KEYS.length} keys\n${''.padEnd(24)} work p50 work p95 shown p50 shown p95\n${rows.join('\n')}`)
})
