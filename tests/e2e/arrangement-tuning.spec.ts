import AxeBuilder from '@axe-core/playwright'
import { expect, test, type Page } from '@playwright/test'
import type { ArrangementDetail, ArrangementList } from '../../shared/schemas'
import { keepScore, openDesk, signInDemo } from '../support/e2e'
import { parseScore } from '../support/score'

/** As players say a tuning, string 6 first. */
const strung = (pitches: string) => pitches.split(' ').map(pitch => ({ pitch })).reverse()
const STANDARD = 'E2 A2 D3 G3 B3 E4'
/** Strings 6 and 1 two frets lower than standard (common practice: double drop D). */
const LOW = 'D2 A2 D3 G3 B3 D4'

async function openTuning(page: Page, text: string, tuning: string, title = 'Weir Lane'): Promise<string> {
  const id = await keepScore(page.request, parseScore(text, { title, strings: strung(tuning) }))
  await page.goto(`/arrangements/${id}/tuning`)
  await expect(page.getByRole('heading', { name: `Tuning of ${title}` })).toBeVisible()
  return id
}

/** What the server holds: the strings from 6 to 1, and the upper voice as string/fret. */
async function held(page: Page, id: string): Promise<string> {
  const { score } = await (await page.request.get(`/api/arrangements/${id}`)).json() as ArrangementDetail
  const notes = score.bars.map(bar => (bar.voices.upper?.events ?? []).map(event => event.notes.map(note => `${note.string}/${note.fret}`).join('+')).join(' '))
  return `${score.head.strings.map(open => open.pitch).reverse().join(' ')}: ${notes.join(' | ')}`
}
const isHeld = (page: Page, id: string, text: string) => expect.poll(() => held(page, id), { timeout: 20_000 }).toBe(text)

async function choose(page: Page, tuning: string) {
  await page.getByRole('button', { name: 'Change the tuning…' }).click()
  await page.getByLabel('Strings, the lowest first').fill(tuning)
}
const retune = (page: Page) => page.getByRole('button', { name: 'Retune the arrangement' }).click()

test('the chart is the arrangement’s: its tuning, capo and key', async ({ page }) => {
  await signInDemo(page)
  const score = parseScore('{4/4} {D} 6/0q', { title: 'Weir Lane', strings: strung(LOW), capos: [{ fret: 2 }] })
  const id = await keepScore(page.request, score)
  await openDesk(page, id)
  await page.getByRole('link', { name: 'Tuning', exact: true }).click()
  await expect(page.getByRole('heading', { name: 'D A D G B D', exact: true })).toBeVisible()
  // A capo at fret 2 raises D by a whole step to E.
  await expect(page.getByTestId('statement')).toContainText('Capo 2, sounds E')
  await expect(page.getByLabel('Key, as fingered')).toHaveValue('d')
  await expect(page.getByLabel('Capo', { exact: true })).toHaveValue('2')
  await expect(page.getByRole('link', { name: 'Tune up' })).toHaveAttribute('href', '/tunings/tune?to=d2-a2-d3-g3-b3-d4')
  await page.getByLabel('Capo', { exact: true }).selectOption('5')
  await page.getByRole('button', { name: 'Show the arrangement’s own' }).click()
  await expect(page.getByLabel('Capo', { exact: true })).toHaveValue('2')
  await expect(page.getByTestId('save-state')).toContainText('Saved')
  expect(await held(page, id), 'trying a capo on the chart changes nothing').toBe(`${LOW}: 6/0`)
})

test('keeping the frets changes what sounds, is saved and survives a reload', async ({ page }) => {
  await signInDemo(page)
  const id = await openTuning(page, '6/0q 6/2q 5/0q', LOW)
  await choose(page, STANDARD)
  // Only the notes of string 6 sound otherwise.
  await expect(page.getByTestId('plan-frets')).toContainText('2 of 3 notes would sound otherwise.')
  await page.getByRole('radio', { name: /^Keep the frets/ }).check()
  await retune(page)
  await expect(page.getByText('The tuning is changed.')).toBeVisible()
  await expect(page.getByRole('heading', { name: 'E A D G B E', exact: true })).toBeVisible()
  await isHeld(page, id, `${STANDARD}: 6/0 6/2 5/0`)
  await page.reload()
  await expect(page.getByTestId('statement')).toContainText('Standard tuning E2 A2 D3 G3 B3 E4')
  await isHeld(page, id, `${STANDARD}: 6/0 6/2 5/0`)
})

test('keeping the sound moves what can move, lists the rest, and one undo brings it back', async ({ page }) => {
  await signInDemo(page)
  const id = await openTuning(page, '6/0q 6/2q 5/0q 1/2q', LOW)
  await choose(page, STANDARD)
  await expect(page.getByTestId('plan-sound')).toContainText('3 of 4 notes keep their sound: 1 where they are and 2 at another fret. 1 note has no place and sounds otherwise.')
  await page.getByText('Which notes have no place').click()
  const sentence = 'String 6, fret 0: D2 is lower than any string now goes. Left there, it sounds E2.'
  await expect(page.getByTestId('left-notes')).toContainText(`Bar 1${sentence}`)
  await retune(page)
  await expect(page.getByTestId('left-notes')).toContainText(sentence)
  // The sixth and first string went up two frets: E2 is now open, E4 too.
  await isHeld(page, id, `${STANDARD}: 6/0 6/0 5/0 1/0`)
  await page.getByRole('button', { name: 'Take it back' }).click()
  await expect(page.getByRole('heading', { name: 'D A D G B D', exact: true })).toBeVisible()
  await isHeld(page, id, `${LOW}: 6/0 6/2 5/0 1/2`)
  await expect(page.getByText('The tuning is changed.')).toBeHidden()
  await page.keyboard.press('ControlOrMeta+Shift+z')
  await isHeld(page, id, `${STANDARD}: 6/0 6/0 5/0 1/0`)
  await page.keyboard.press('ControlOrMeta+z')
  await isHeld(page, id, `${LOW}: 6/0 6/2 5/0 1/2`)
})

test('a change of tuning is undone on the desk as well', async ({ page }) => {
  await signInDemo(page)
  const id = await openTuning(page, '1/0q 2/0q', STANDARD)
  await choose(page, 'E2 A2 D3 G3 C4 F4')
  // E4 and B3 lie at the fourth fret of strings a fourth lower.
  await expect(page.getByTestId('plan-sound')).toContainText('All 2 notes keep their sound: 2 on another string.')
  await retune(page)
  await isHeld(page, id, 'E2 A2 D3 G3 C4 F4: 2/4 3/4')
  await page.getByRole('link', { name: 'Desk', exact: true }).click()
  await expect(page.getByTestId('score').locator('svg').first()).toBeVisible()
  await page.getByTestId('score').focus()
  await page.keyboard.press('ControlOrMeta+z')
  await isHeld(page, id, `${STANDARD}: 1/0 2/0`)
})

test('tunings are ranked for the arrangement’s own notes, and nothing is changed by asking', async ({ page }) => {
  await signInDemo(page)
  const id = await openTuning(page, '{4/4} {D} 1/0q 2/0q 3/0q 4/0q ; 6/0w', LOW)
  await page.getByRole('button', { name: 'Which tuning for this tune?' }).click()
  await page.getByRole('button', { name: 'Rank the tunings' }).click()
  await expect(page.getByRole('status').filter({ hasText: /The best \d+, found in/ })).toBeVisible({ timeout: 30_000 })
  // Every note is an open string as it is tuned: nothing can lie better (common practice).
  await expect(page.getByRole('listitem').filter({ hasText: 'at its pitch' }).first().getByRole('link')).toHaveText('D A D G B D')
  expect(await held(page, id)).toBe(`${LOW}: 1/0 2/0 3/0 4/0`)
})

test('an arrangement without notes has nothing to rank, and says so', async ({ page }) => {
  await signInDemo(page)
  await openTuning(page, '{4/4} ^', LOW)
  await page.getByRole('button', { name: 'Which tuning for this tune?' }).click()
  await page.getByRole('button', { name: 'Rank the tunings' }).click()
  await expect(page.getByRole('alert')).toContainText('has no notes yet')
})

test('what can’t be read or done is said, with the place', async ({ page }) => {
  await signInDemo(page)
  const id = await openTuning(page, '7/0q', 'B1 E2 A2 D3 G3 B3 E4')
  await choose(page, 'E2 A2 H3 G3 B3 E4')
  await retune(page)
  await expect(page.getByText('String 4: “H3” is no pitch.').first()).toBeVisible()
  await page.getByLabel('Strings, the lowest first').fill(STANDARD)
  await expect(page.getByTestId('plan-sound')).toContainText('This way it can’t be done. Bar 1: there is no string 7.')
  await retune(page)
  expect(await held(page, id)).toBe('B1 E2 A2 D3 G3 B3 E4: 7/0')
})

test('who may not edit reads the chart and the arranger’s name for it, and learns why', async ({ page }) => {
  await signInDemo(page)
  const { items } = await (await page.request.get('/api/arrangements')).json() as ArrangementList
  const road = items.find(each => each.title === 'The Saltmarsh Road')!
  await page.goto(`/arrangements/${road.id}/tuning`)
  await page.getByRole('button', { name: 'Keep it…' }).click()
  await page.getByRole('textbox', { name: 'Name' }).fill('Saltmarsh')
  await page.getByRole('textbox', { name: 'Notes' }).fill('Let the sixth string settle for a minute.')
  await page.getByRole('dialog').getByRole('button', { name: 'Keep it' }).click()
  await expect(page.getByTestId('tuning-names')).toContainText('Saltmarsh is what Maren Holt calls it.')
  await signInDemo(page, 'teo.lindqvist')
  await page.goto(`/arrangements/${road.id}/tuning`)
  await expect(page.getByText('your part here is performer')).toBeVisible()
  await expect(page.getByTestId('tuning-names')).toContainText('Let the sixth string settle for a minute.')
  await expect(page.getByRole('button', { name: 'Change the tuning…' })).toHaveCount(0)
  await expect(page.getByRole('button', { name: 'Undo' })).toHaveCount(0)
})

test('has no barrier that axe finds, with the panel open as well', async ({ page }) => {
  await signInDemo(page)
  await openTuning(page, '6/0q 6/2q', LOW)
  await choose(page, STANDARD)
  await page.getByText('Which notes have no place').click()
  // WCAG 2.2 AA, https://www.w3.org/TR/WCAG22/, as far as axe-core's rules go.
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa', 'best-practice']).analyze()
  expect(violations.map(each => `${each.id}: ${each.nodes.map(node => node.html).join(' ').slice(0, 300)}`)).toEqual([])
})
