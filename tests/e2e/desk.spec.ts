import { readFile } from 'node:fs/promises'
import AxeBuilder from '@axe-core/playwright'
import { expect, test, type Page } from '@playwright/test'
import { createScore } from '../../shared/score/create'
import { readSaved } from '../../shared/formats/saved'
import type { ArrangementDetail } from '../../shared/schemas'
import { keepScore, openDesk, signInDemo } from '../support/e2e'

/** A tuning of our own: F C F A C F, a half step above open E. */
const TUNING = ['F4', 'C4', 'A3', 'F3', 'C3', 'F2'].map(pitch => ({ pitch }))

async function newDesk(page: Page, title: string): Promise<string> {
  const id = await keepScore(page.request, createScore({ title, strings: TUNING, arranger: 'Maren Holt' }, (() => {
    let count = 0
    return () => `b${count++}`
  })()))
  await openDesk(page, id)
  await expect(page.getByTestId('score')).toBeFocused()
  return id
}

const type = async (page: Page, keys: string) => {
  for (const key of keys.split(' ')) await page.keyboard.press(key)
}
const says = (page: Page, text: string | RegExp) => expect(page.getByTestId('save-state')).toContainText(text, { timeout: 15_000 })
const saved = (page: Page) => says(page, 'Saved')

/** What the server holds, the upper voice only: "1/3 1/0 | z". */
async function held(page: Page, id: string): Promise<string> {
  const { score } = await (await page.request.get(`/api/arrangements/${id}`)).json() as ArrangementDetail
  return score.bars.map(bar => (bar.voices.upper?.events ?? []).map(event => event.notes.map(note => `${note.string}/${note.fret}`).join('+') || 'z').join(' ')).join(' | ')
}

test.beforeEach(async ({ page }) => signInDemo(page))

test('the page shows the arrangement and where the cursor is', async ({ page }) => {
  await newDesk(page, 'Hay Fen in Winter')
  await expect(page.getByRole('heading', { name: 'Hay Fen in Winter' })).toBeVisible()
  await expect(page.getByText('arranged by Maren Holt')).toBeVisible()
  await type(page, 'ArrowDown ArrowDown 4 Enter')
  await type(page, 'ArrowLeft')
  // String 3 is tuned to A3; its fourth fret sounds C♯4.
  await expect(page.getByTestId('status')).toContainText('string 3 · fret 4 · C♯4')
  await expect(page.getByRole('img', { name: /^Neck/ })).toHaveAccessibleName('Neck. String 3, fret 4, C♯4')
  await expect(page.getByTestId('spoken')).toContainText('String 3, fret 4, C♯4, quarter. Bar 1, beat 1, upper voice.')
})

test('typing is saved and survives a reload in the same breath', async ({ page }) => {
  const id = await newDesk(page, 'Reloaded')
  await type(page, '1 2 Enter 3 Enter 0')
  await saved(page)
  expect(await held(page, id)).toBe('1/12 1/3 1/0')
  await type(page, 'Enter 7')
  await page.reload()
  await saved(page)
  expect(await held(page, id)).toBe('1/12 1/3 1/0 1/7')
  await expect(page.getByTestId('score')).toBeFocused()
})

test('undo and redo go to the server as well', async ({ page }) => {
  const id = await newDesk(page, 'Undone')
  await type(page, '5 Enter 7 Control+z')
  await saved(page)
  expect(await held(page, id)).toBe('1/5')
  await type(page, 'Control+Shift+z')
  await expect.poll(() => held(page, id)).toBe('1/5 1/7')
})

test('offline work is kept, counted, and sent when the network is back', async ({ page, context }) => {
  const id = await newDesk(page, 'On the train')
  await context.setOffline(true)
  await type(page, '2 Enter 4 Enter 5')
  await says(page, /Offline, \d edits kept on this device/)
  await context.setOffline(false)
  await saved(page)
  expect(await held(page, id)).toBe('1/2 1/4 1/5')
})

test('a closed tab leaves its unsent work to the next one', async ({ page, context }) => {
  const id = await newDesk(page, 'Closed')
  await page.goto('/folio')
  const other = await context.newPage()
  await openDesk(other, id)
  await context.setOffline(true)
  await type(other, '9')
  await says(other, 'Offline, 1 edit kept on this device')
  await other.close()
  await context.setOffline(false)
  expect(await held(page, id)).toBe('')
  await openDesk(page, id)
  await expect(page.getByTestId('status')).toContainText('string 1 · fret 9')
  await saved(page)
  await expect.poll(() => held(page, id)).toBe('1/9')
})

test('two tabs on different voices both come through', async ({ page, context }) => {
  const id = await newDesk(page, 'Two voices')
  const other = await context.newPage()
  await openDesk(other, id)
  await page.route('**/edits*', route => route.abort())
  await type(page, '5')
  await type(other, 'v ArrowDown 7')
  await saved(other)
  await page.unroute('**/edits*')
  await saved(page)
  const { score } = await (await page.request.get(`/api/arrangements/${id}`)).json() as ArrangementDetail
  expect(score.bars[0]?.voices.upper?.events[0]?.notes[0]?.fret).toBe(5)
  expect(score.bars[0]?.voices.lower?.events[0]?.notes[0]?.fret).toBe(7)
  await expect(page.getByText('two readings')).toBeHidden()
})

test('two tabs on one voice: both readings are kept, and a person chooses', async ({ page, context }) => {
  const id = await newDesk(page, 'Torn')
  const other = await context.newPage()
  await openDesk(other, id)
  await page.route('**/edits*', route => route.abort())
  await type(page, '5')
  await says(page, 'Offline')
  await type(other, '7')
  await saved(other)
  await page.unroute('**/edits*')
  await expect(page.getByText('One place has two readings')).toBeVisible({ timeout: 15_000 })
  // Deciding later loses nothing, not even over a reload.
  await page.reload()
  const dialog = page.getByRole('dialog', { name: 'Two readings of one place' })
  await expect(dialog).toContainText('The upper voice of bar 1')
  await expect(dialog.getByLabel('Yours, as tab')).toContainText('-5-')
  await expect(dialog.getByLabel('In the score now, as tab')).toContainText('-7-')
  await page.keyboard.press('Escape')
  await expect(dialog).toBeHidden()
  await page.getByRole('button', { name: 'Compare and choose' }).click()
  await dialog.getByRole('button', { name: 'Put mine in' }).click()
  await expect.poll(() => held(page, id)).toBe('1/5')
  await expect(page.getByText('two readings')).toBeHidden()
  // The other tab learns of it by itself.
  await expect(other.getByTestId('save-state')).toContainText('Saved')
  await expect(other.getByTestId('score')).toContainText('5')
})

test('signing in again on the page goes on saving', async ({ page }) => {
  const id = await newDesk(page, 'Signed out')
  await page.request.post('/api/auth/sign-out')
  await type(page, '3')
  await says(page, 'Signed out, 1 edit kept on this device')
  await page.getByLabel('Password').fill('saltmarsh-road')
  await page.getByRole('button', { name: 'Sign in' }).click()
  await saved(page)
  expect(await held(page, id)).toBe('1/3')
})

test('work that the server refuses can be kept as a file, and the page goes back to what is saved', async ({ page }) => {
  const id = await newDesk(page, 'Refused')
  await page.route('**/edits*', route => route.fulfill({
    status: 422, contentType: 'application/json', body: JSON.stringify({ statusCode: 422, data: { code: 'refused', message: 'Bar 1 can not hold this.' } }),
  }))
  await type(page, '3')
  await expect(page.getByText('The server would not save 1 edit.')).toBeVisible()
  await expect(page.getByText('Bar 1 can not hold this.')).toBeVisible()
  const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: 'Keep a copy' }).click()])
  expect(download.suggestedFilename()).toBe('Refused (copy).json')
  const read = readSaved(await readFile(await download.path(), 'utf8'))
  expect('score' in read && read.score.bars[0]?.voices.upper?.events[0]?.notes[0]?.fret).toBe(3)
  await page.unroute('**/edits*')
  await page.getByRole('button', { name: 'Go back to what is saved' }).click()
  await expect(page.getByText(/1 edit from .* could not be saved: Bar 1 can not hold this/)).toBeVisible()
  await page.getByRole('button', { name: 'Discard them' }).click()
  await saved(page)
  expect(await held(page, id)).toBe('')
})

test('every command is found by name, and the keys are listed, without a mouse', async ({ page }) => {
  await newDesk(page, 'By keyboard')
  await type(page, '?')
  await expect(page.getByRole('dialog', { name: 'All keys' })).toContainText('Hammer-on')
  await type(page, 'Escape Control+k')
  const palette = page.getByRole('dialog', { name: 'Find a command' })
  await expect(palette.getByRole('combobox')).toBeFocused()
  await page.keyboard.type('zebra')
  await expect(palette).toContainText('No command is called that')
  await palette.getByRole('combobox').fill('set the meter')
  await type(page, 'Enter')
  const bar = page.getByRole('dialog', { name: 'Bar 1' })
  await expect(bar.getByLabel('Meter')).toBeFocused()
  await bar.getByLabel('Meter').selectOption('6/8')
  await bar.getByLabel('Played in all, up to here').fill('0')
  await type(page, 'Enter')
  await expect(bar).toContainText('A passage is played 1 to 16 times.')
  await bar.getByLabel('Played in all, up to here').fill('2')
  await type(page, 'Enter')
  await expect(bar).toBeHidden()
  await expect(page.getByTestId('score')).toBeFocused()
  await type(page, '0')
  await expect(page.getByTestId('status')).toContainText('This bar is')
  await type(page, 'Tab')
  await expect(page.getByTestId('score')).not.toBeFocused()
})

test('details, tuning and capo are set in their dialogs, and what can not be is said there', async ({ page }) => {
  await newDesk(page, 'Dialogs')
  await type(page, '1 8')
  const ask = async (title: string) => {
    await page.getByTestId('score').focus()
    await page.keyboard.press('Control+k')
    await page.keyboard.type(title)
    await page.keyboard.press('Enter')
  }
  await ask('Set capos')
  const capos = page.getByRole('dialog', { name: 'Capos' })
  await capos.getByRole('button', { name: 'Put a capo on' }).click()
  await capos.getByLabel('At fret').fill('5')
  await capos.getByRole('button', { name: 'Set', exact: true }).click()
  await expect(capos).toContainText('string 1 has no fret 18 on this neck')
  await capos.getByLabel('At fret').fill('2')
  await capos.getByRole('button', { name: 'Set', exact: true }).click()
  await expect(page.getByText('Capo 2, sounds D')).toBeVisible()
  await ask('Change the tuning')
  await page.getByLabel('Strings, the lowest first').fill('C2 G2 C3 G3 C4 D4')
  await page.getByRole('button', { name: 'Retune' }).click()
  // Fret 18 above capo 2 on a string tuned to D4 sounds B♭5 as a key of D spells it: A♯5.
  await expect(page.getByTestId('status')).toContainText('fret 18 · A♯5')
  await ask('Title, people')
  const details = page.getByRole('dialog', { name: 'About this arrangement' })
  await details.getByLabel('Title').fill('')
  await details.getByRole('button', { name: 'Keep' }).click()
  await expect(details).toContainText('An arrangement needs a title.')
  await details.getByLabel('Title').fill('Low Tide')
  await details.getByLabel('Rights').fill('Arrangement © Maren Holt')
  await details.getByRole('button', { name: 'Keep' }).click()
  await expect(page.getByRole('heading', { name: 'Low Tide' })).toBeVisible()
  await expect(page.getByText('Arrangement © Maren Holt')).toBeVisible()
})

test('the mouse places the cursor', async ({ page }) => {
  await newDesk(page, 'By mouse')
  await type(page, '1 Enter 2 Enter 3')
  await type(page, 'Home')
  const cell = (await page.locator('.cursor-cell').boundingBox())!
  await type(page, 'End ArrowDown Tab')
  await page.mouse.click(cell.x + cell.width / 2, cell.y + cell.height / 2)
  await expect(page.getByTestId('status')).toContainText('Bar 1 · beat 1string 1 · fret 1')
  await expect(page.getByTestId('score')).toBeFocused()
})

test('our own file comes out complete', async ({ page }) => {
  const id = await newDesk(page, 'Ebb: a tune?')
  await type(page, '3 Enter 5')
  await saved(page)
  await page.getByRole('button', { name: 'Export or print' }).click()
  const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('menuitem', { name: 'Copperwound file' }).click()])
  expect(download.suggestedFilename()).toBe('Ebb- a tune.json')
  const read = readSaved(await readFile(await download.path(), 'utf8'))
  const { score } = await (await page.request.get(`/api/arrangements/${id}`)).json() as ArrangementDetail
  expect('score' in read && read.score).toEqual(score)
})

test('the score can be read as text', async ({ page }) => {
  await newDesk(page, 'Read aloud')
  await type(page, '3')
  await page.getByText('Read as text').click()
  await expect(page.getByTestId('reading')).toContainText('Tuning F2 C3 F3 A3 C4 F4')
  await expect(page.getByTestId('reading')).toContainText('string 1 fret 3, G♯4')
})

test('an arrangement that is not there says so', async ({ page }) => {
  await page.goto('/arrangements/00000000-0000-4000-8000-000000000000')
  await expect(page.getByRole('heading', { name: 'There is no such arrangement' })).toBeVisible()
  await page.getByRole('link', { name: 'Back to the folio' }).click()
  await expect(page).toHaveURL(/folio/)
})

test('print shows the sheet alone, black on white in the night palette too', async ({ page }) => {
  await page.emulateMedia({ colorScheme: 'dark' })
  await newDesk(page, 'On paper')
  await type(page, '3')
  await page.emulateMedia({ media: 'print', colorScheme: 'dark' })
  await expect(page.getByRole('heading', { name: 'On paper' })).toBeVisible()
  await expect(page.getByRole('banner')).toBeHidden()
  await expect(page.getByRole('button', { name: /Play/ })).toBeHidden()
  await expect(page.getByTestId('status')).toBeHidden()
  await expect(page.getByRole('img', { name: /^Neck/ })).toBeHidden()
  expect(await page.locator('article').evaluate((sheet) => {
    const { color, backgroundColor } = getComputedStyle(sheet)
    return [color, backgroundColor]
  })).toEqual(['rgb(0, 0, 0)', 'rgb(255, 255, 255)'])
})

for (const [scheme, width, height] of [['light', 1440, 900], ['dark', 1440, 900], ['light', 390, 844]] as const) {
  test(`the desk has no accessibility fault and nothing sticks out: ${scheme}, ${width} px`, async ({ page }) => {
    await page.setViewportSize({ width, height })
    await page.emulateMedia({ colorScheme: scheme })
    await newDesk(page, 'For everyone')
    await type(page, '3 Enter 0')
    await saved(page)
    const faults = async () => (await new AxeBuilder({ page }).analyze()).violations.map(({ id, nodes }) => `${id}: ${nodes.map(node => node.html).join(' ')}`)
    expect(await faults()).toEqual([])
    for (const dialog of ['?', 'Control+k']) {
      await page.getByTestId('score').focus()
      await page.keyboard.press(dialog)
      await expect(page.getByRole('dialog')).toBeVisible()
      expect(await faults()).toEqual([])
      await page.keyboard.press('Escape')
    }
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(width)
  })
}
