import { AxeBuilder } from '@axe-core/playwright'
import { expect, test, type Page } from '@playwright/test'
import { signInDemo, visit } from '../support/e2e'

const chart = '/tunings/c2-g2-d3-g3-c4-d4'
const names = (page: Page) => page.getByRole('table', { name: 'Tunings that players use' }).locator('tbody tr td:nth-child(2)')

test.describe('without script', () => {
  test.use({ javaScriptEnabled: false })
  test('a chart is all there', async ({ page }) => {
    // Common practice: D2 A2 D3 G3 A3 D4 sounds a D suspended fourth; a barre at 5 the one on G, at 7 on A, at 12 on D again; strings 1 and 6
    // carry the notes of string 4, string 2 those of string 5 an octave up; from standard, 6, 2 and 1 go down two frets and 5, 4, 3 stay.
    await page.goto('/tunings/d2-a2-d3-g3-a3-d4')
    await expect(page.getByRole('heading', { level: 1 })).toHaveText('D A D G A D')
    for (const [where, chord] of [['the open strings', 'D'], ['a barre at fret 5', 'G'], ['a barre at fret 7', 'A'], ['a barre at fret 12', 'D']]) {
      await expect(page.getByRole('button', { name: `Hear ${where}: ${chord} suspended fourth` })).toHaveCount(1)
    }
    const row = (string: number) => page.getByRole('table', { name: 'Strings', exact: true }).getByRole('row').nth(string)
    for (const string of [1, 2, 6]) await expect(row(string)).toContainText('−2 · two frets')
    for (const string of [3, 4, 5]) await expect(row(string)).toContainText('itself')
    await expect(row(1)).toContainText('string 4, an octave up')
    await expect(row(6)).toContainText('string 4, an octave down')
    await expect(row(2)).toContainText('string 5, an octave up')
    await expect(page).toHaveTitle(/D A D G A D/)
    await expect(page.locator('meta[name=description]')).toHaveAttribute('content', /D2 A2 D3 G3 A3 D4: three strings down two half steps/)
  })
})

test('other spellings of a sound lead to its one address, choices and all', async ({ request }) => {
  const answer = await request.get('/tunings/E2-B2-e3-ab3-B3-fb4?capo=2', { maxRedirects: 0 })
  expect(answer.status()).toBe(301)
  expect(answer.headers().location).toMatch(/\/tunings\/e2-b2-e3-gs3-b3-e4\?capo=2$/)
  expect((await request.get('/tunings/e2-b2-e3-gs3-b3-e4', { maxRedirects: 0 })).status()).toBe(200)
})

test('an impossible tuning is not found, and the page says why', async ({ page }) => {
  for (const [slug, reason] of [
    ['e2-a2-d3', 'An instrument here has 4 to 10 strings; the address names 3.'], ['e2-h2-d3-g3', 'String 3: “h2” is no pitch.'],
    ['c0-a2-d3-g3', 'String 4: C0 is too low to be heard as a pitch'], ['e2-a2-d3-d9', 'String 1: D9 is higher than any string bears'],
  ]) {
    const answer = await page.goto(`/tunings/${slug}`)
    expect(answer?.status()).toBe(404)
    await expect(page.getByRole('alert').first()).toContainText(reason!)
  }
  await visit(page, '/tunings/e2-h2-d3-g3')
  const typed = page.getByLabel('Any tuning, the lowest string first')
  await expect(typed).toHaveValue('e2 h2 d3 g3')
  await page.getByRole('button', { name: 'Show its chart' }).click()
  await expect(typed).toHaveAccessibleDescription(/String 3: “h2” is no pitch/)
  await typed.fill('G3 D4 A4 E5')
  await page.keyboard.press('Enter')
  await expect(page).toHaveURL(/\/tunings\/g3-d4-a4-e5$/)
  await expect(page.getByRole('heading', { level: 1 })).toHaveText('G D A E')
})

test('the catalogue is filtered, and two charts are set side by side', async ({ page }) => {
  await visit(page, '/tunings')
  await expect(page.getByText(/^38 of 38 tunings/)).toBeVisible()
  await page.getByLabel('Search').fill('wahine')
  await expect(names(page)).toHaveText(['G wahine', 'C wahine'])
  await page.getByLabel('Search').fill('')
  await page.getByLabel('Open chord').selectOption('Csus2')
  await expect(names(page)).toHaveText(['Orkney', 'Csus2'])
  await page.getByLabel('Direction').selectOption('Only down')
  await page.getByRole('button', { name: 'Show all 38' }).click()
  await page.getByLabel('Neighbours a').selectOption('unison')
  await expect(names(page)).toHaveText(['D A D D A D'])
  await page.getByLabel('Neighbours a').selectOption('Any')
  await page.getByLabel('Load').selectOption('Too tight')
  // Open E and A are the rows that the handbook puts above 110 percent; C G D A E G needs gauges of its own.
  await expect(names(page)).toHaveText(['Open E', 'Open A', 'C G D A E G'])
  await page.getByLabel('Load').selectOption('Any')

  await page.getByLabel('Compare Standard').check()
  await expect(page.getByText('Choose one more to compare')).toBeVisible()
  await page.getByLabel('Compare Orkney').check()
  await page.getByRole('link', { name: 'Compare the two' }).click()
  await expect(page.getByRole('heading', { level: 2 })).toHaveText(['E A D G B E', 'C G D G C D'])
  await expect(page.getByRole('region', { name: 'From the first to the second' })).toContainText('three strings down, one up a half step, two as they were')
  const sides = page.getByRole('region', { name: /^(First|Second) tuning$/ })
  const [left, right] = [await sides.nth(0).boundingBox(), await sides.nth(1).boundingBox()]
  expect(left!.x + left!.width).toBeLessThanOrEqual(right!.x)
  await page.setViewportSize({ width: 390, height: 844 })
  const [above, below] = [await sides.nth(0).boundingBox(), await sides.nth(1).boundingBox()]
  expect(above!.y + above!.height).toBeLessThanOrEqual(below!.y)
  await sides.nth(1).getByLabel('Second tuning').selectOption('Open G, taro patch')
  await expect(page).toHaveURL(/b=d2-g2-d3-g3-b3-d4/)
})

test('choices stand in the address and change the chart', async ({ page }) => {
  await visit(page, chart)
  await page.getByLabel('Key, as fingered').selectOption('G major')
  await page.getByLabel('Capo', { exact: true }).selectOption('Fret 2')
  await expect(page).toHaveURL(/\?key=g&capo=2$/)
  await expect(page.getByText('Sounds A.')).toBeVisible()
  await expect(page.getByRole('heading', { name: 'Scale of A major across the neck' })).toBeVisible()
  await page.getByLabel('Coming from').selectOption('Drop D')
  // D2 A2 D3 G3 B3 E4 to C2 G2 D3 G3 C4 D4.
  await expect(page.getByRole('table', { name: 'Strings', exact: true }).getByRole('row').nth(6)).toContainText('−2 · two frets')
  await page.getByLabel('Gauge of string 6').selectOption('.056 bronze')
  await expect(page.getByRole('table', { name: 'Strings and load' }).getByRole('row').nth(6)).toContainText('70 %')
  await page.reload()
  await expect(page.getByLabel('Coming from').locator('option:checked')).toHaveText('Drop D')
  await expect(page.getByLabel('Gauge of string 6').locator('option:checked')).toHaveText('.056 bronze')
})

test('the neck is read by arrow keys, and turns round for the left-handed', async ({ page }) => {
  await visit(page, `${chart}?key=g`)
  const neck = page.getByRole('application', { name: /^Scale of G major/ })
  const said = neck.locator('xpath=following-sibling::p')
  await neck.focus()
  await expect(said).toHaveText('String 1, open: D4, degree 5.')
  for (const key of ['ArrowRight', 'ArrowRight', 'ArrowRight', 'ArrowRight', 'ArrowRight']) await page.keyboard.press(key)
  await expect(said).toHaveText('String 1, fret 5: G4, degree 1.')
  await page.keyboard.press('ArrowDown')
  await expect(said).toHaveText('String 2, fret 5: F4, not in the scale.')
  await page.keyboard.press('Home')
  const place = () => neck.locator('circle.at').evaluate(circle => (circle as SVGCircleElement).getBoundingClientRect().x)
  const right = await place()
  await page.getByLabel('Left-handed').check()
  await neck.focus()
  expect(await place()).toBeGreaterThan(right)
})

test('sound is loaded when it is first asked for, and notation never', async ({ page }) => {
  const scripts: string[] = []
  page.on('response', async (response) => {
    if (response.request().resourceType() === 'script') scripts.push(await response.text().catch(() => ''))
  })
  await visit(page, chart)
  await page.waitForLoadState('networkidle')
  const before = scripts.length
  expect(scripts.some(text => text.includes('AudioWorkletNode('))).toBe(false)
  await page.getByRole('button', { name: 'Hear string 6 as it was, E2, then as it becomes, C2' }).click()
  await expect.poll(() => scripts.slice(before).some(text => text.includes('AudioWorkletNode('))).toBe(true)
  expect(scripts.some(text => text.includes('StaveNote'))).toBe(false)
})

test('a chart is printed on one page, without what is only for the screen', async ({ page }) => {
  for (const path of [`${chart}?key=g`, '/tunings/e2-b2-e3-gs3-b3-e4', '/tunings/c2-g2-d3-a3-e4-g4', '/tunings/eb2-ab2-db3-gb3-bb3-eb4']) {
    await visit(page, path)
    await page.emulateMedia({ media: 'print' })
    await expect(page.getByRole('banner')).toBeHidden()
    await expect(page.getByLabel('Coming from')).toBeHidden()
    await expect(page.getByRole('button', { name: /^Hear string/ }).first()).toBeHidden()
    await expect(page.getByRole('heading', { name: 'Chords of the key' })).toBeVisible()
    const pdf = (await page.pdf({ format: 'A4', printBackground: true })).toString('latin1')
    expect(pdf.match(/\/Type\s*\/Page\b(?!s)/g), path).toHaveLength(1)
    await page.emulateMedia({ media: 'screen' })
  }
})

test('tunings are ranked for a tune; it can be cancelled, and mistakes are named', async ({ page }) => {
  await visit(page, '/tunings/for-a-tune')
  const melody = page.getByLabel('Melody, as it sounds')
  await melody.fill('D4 F#4 H4')
  await page.getByRole('button', { name: 'Rank the tunings' }).click()
  await expect(melody).toHaveAccessibleDescription(/Note 3: “H4” is no pitch/)
  await expect(melody).toBeFocused()

  // Many different lengths of a melody as long as it can get, so that there is time to cancel.
  const letters = ['C', 'D', 'E', 'F', 'G', 'A', 'B']
  await melody.fill(Array.from({ length: 30_000 }, (_, index) => `${letters[index % 7]}${2 + index % 4}`).join(' '))
  await page.getByRole('button', { name: 'Rank the tunings' }).click()
  await expect(page.getByRole('progressbar', { name: /Trying tunings/ })).toBeVisible()
  await page.getByRole('button', { name: 'Cancel' }).click()
  await expect(page.getByText('Cancelled. Nothing was ranked; your melody is still there.')).toBeVisible()
  await expect(page.getByRole('progressbar')).toHaveCount(0)

  // The open strings of open G, in G: nothing can lie better.
  await melody.fill('G3 B3 D4:2 B3 G3 D4 B3 G3:2')
  await page.getByLabel('Key of the melody').selectOption('G major')
  await page.getByText('Its own', { exact: true }).click()
  await page.getByLabel('Capo').selectOption('No capo')
  await page.getByRole('button', { name: 'Rank the tunings' }).click()
  await expect(page.getByText(/The best \d+, found in/)).toBeVisible()
  const best = page.getByRole('listitem').filter({ hasText: '100 percent of the melody lies on open strings: G3, B3 and D4' })
  await expect(best.first()).toContainText('G major, at its pitch')
  await best.first().getByRole('link').click()
  await expect(page).toHaveURL(/\/tunings\/[cd]2-g2-d3-g3-b3-d4/)
})

test('a tuning is kept under a name of one’s own, changed, deleted and brought back', async ({ page }) => {
  await visit(page, '/tunings/b1-fs2-cs3-fs3-b3-cs4')
  await expect(page.getByRole('link', { name: 'Sign in to keep it' })).toHaveAttribute('href', /\/sign-in\?to=\/tunings\/b1/)
  await signInDemo(page, 'teo.lindqvist')
  await visit(page, '/tunings/b1-fs2-cs3-fs3-b3-cs4')
  const name = `Skerry ${Date.now().toString(36)}`
  await page.getByRole('button', { name: 'Keep it…' }).click()
  await page.getByLabel('Name', { exact: true }).fill(name)
  await page.getByLabel('Notes').fill('For the slow air')
  await page.getByRole('dialog').getByRole('button', { name: 'Keep it' }).click()
  await expect(page.getByRole('dialog')).toHaveCount(0)

  await visit(page, '/tunings')
  const row = page.getByRole('region', { name: 'My tunings' }).getByRole('listitem').filter({ hasText: name })
  await expect(row).toContainText('For the slow air')
  await row.getByRole('button', { name: /Change/ }).click()
  await page.getByLabel('Name', { exact: true }).fill(`${name} two`)
  await page.getByRole('dialog').getByRole('button', { name: 'Keep it' }).click()
  await expect(row).toContainText(`${name} two`)
  await row.getByRole('button', { name: /Delete/ }).click()
  await expect(row).toHaveCount(0)
  await page.getByRole('button', { name: 'Undo' }).click()
  await expect(row).toBeVisible()
  await row.getByRole('link').click()
  await expect(page).toHaveURL(/b1-fs2-cs3-fs3-b3-cs4$/)
})

test('a chart leads to a new arrangement in its tuning', async ({ page }) => {
  await signInDemo(page)
  await visit(page, chart)
  await page.getByRole('link', { name: 'Use it in a new arrangement' }).click()
  await expect(page.getByLabel('Strings, the lowest first')).toHaveValue('C2 G2 D3 G3 C4 D4')
})

/** WCAG 2.2 A and AA (https://github.com/dequelabs/axe-core/blob/develop/doc/rule-descriptions.md), and 1.4.10 Reflow. */
const everywhere = [`${chart}?capo=2&partial=4on3-4-5`]
const twice = ['/tunings', '/tunings/fs1-b1-e2-a2-d3-g3-b3-e4', '/tunings/for-a-tune', '/tunings/compare?a=e2-b2-e3-gs3-b3-e4&b=g4-d3-g3-b3-d4', '/tunings/e2-a2-d3']
const [desk, phone] = [{ width: 1440, height: 900 }, { width: 390, height: 844 }]
for (const { viewport, colorScheme, paths } of [
  { viewport: desk, colorScheme: 'light', paths: [...everywhere, ...twice] }, { viewport: desk, colorScheme: 'dark', paths: everywhere },
  { viewport: phone, colorScheme: 'light', paths: everywhere }, { viewport: phone, colorScheme: 'dark', paths: [...everywhere, ...twice] },
] as const) {
  test.describe(`${viewport.width} pixels wide, ${colorScheme}`, () => {
    test.use({ viewport, colorScheme, contextOptions: { reducedMotion: 'reduce' } })
    for (const path of paths) {
      test(`${path} is fit for all`, async ({ page }) => {
        await visit(page, path)
        const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice']).analyze()
        expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(' ')).join(', ')}`)).toEqual([])
        expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth), 'wider than its window').toBeLessThanOrEqual(0)
      })
    }
  })
}
