import { readFile } from 'node:fs/promises'
import { expect, test, type Page } from '@playwright/test'
import { readMusicXml } from '../../shared/formats/musicxml'
import { soundingMidi } from '../../shared/score/sounding'
import { readAbc } from '../support/abc'
import { signInDemo } from '../support/e2e'
import { staffNotes } from '../support/staffNotes'

/**
 * The first strain of "Planxty Irwin", O'Neill's Music of Ireland (1903) no. 677, as printed there. Its pitches are staff
 * pitches; a guitar sounds an octave lower.
 */
const PRINTED = `M:6/8
L:1/8
K:D
A|d2c Bcd|A2G FED|G2E FGA|C2D E2c|d2c Bcd|A2G FED|G2E FGA|D2C D2:|`

/** The same melody on a guitar in D A D G B D: string/fret and a length letter, bar by bar. */
const MELODY = [
  '3/2e',
  '3/7q 3/6e 3/4e 3/6e 3/7e', '3/2q 3/0e 4/4e 4/2e 4/0e', '4/5q 4/2e 4/4e 4/5e 4/7e', '5/4q 4/0e 4/2q 3/6e',
  '3/7q 3/6e 3/4e 3/6e 3/7e', '3/2q 3/0e 4/4e 4/2e 4/0e', '4/5q 4/2e 4/4e 4/5e 4/7e', '4/0q 5/4e 4/0q',
]

/** Our own bass of open strings below it; the last bar is an eighth short, and the bass rests with the melody. */
const BASS = ['6/0q. 5/0q.', '6/0q. 5/0q.', '6/0q. 5/0q.', '6/0q. 6/0q.', '6/0q. 5/0q.', '6/0q. 5/0q.', '6/0q. 5/0q.', '6/0q. 6/0q']

/** Types at the score as a person does, and counts the keys: Shift is one of them. */
class Typist {
  keys = 0
  private string = 1
  private length = 'q'
  constructor(private readonly page: Page) {}

  async press(...keys: string[]): Promise<void> {
    for (const key of keys) {
      await this.page.keyboard.press(key)
      this.keys += key.split('+').length
    }
  }

  async toString(string: number): Promise<void> {
    for (; this.string < string; this.string++) await this.press('ArrowDown')
    for (; this.string > string; this.string--) await this.press('ArrowUp')
  }

  /** A dotted quarter is q and a dot; the dot is taken away by the next length. */
  private async toLength(length: string): Promise<void> {
    if (length === this.length) return
    await this.press(...length)
    this.length = length
  }

  /** Bars of notes, going on by Enter between them, not after the last. */
  async type(bars: readonly string[]): Promise<void> {
    const notes = bars.flatMap(bar => bar.split(' ')).map(note => /^(\d+)\/(\d+)(\w\.?)$/.exec(note)!)
    for (const [index, [, string, fret, length]] of notes.entries()) {
      if (index) await this.press('Enter')
      await this.toString(Number(string))
      await this.toLength(length!)
      await this.press(...fret!)
    }
  }
}

/** Finds a command by its title, all by keyboard. */
async function command(page: Page, title: string): Promise<void> {
  await page.keyboard.press('Control+k')
  await expect(page.getByRole('dialog')).toBeVisible()
  await page.keyboard.type(title)
  await page.keyboard.press('Enter')
  await expect(page.getByRole('dialog')).toBeHidden()
  await expect(page.getByTestId('score')).toBeFocused()
}

async function makeArrangement(page: Page): Promise<void> {
  await page.goto('/folio')
  await page.getByRole('button', { name: 'New arrangement' }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Title').fill('Planxty Irwin')
  await dialog.getByLabel('Strings, the lowest first').fill('D A D G B D')
  await dialog.getByLabel('Meter').selectOption('6/8')
  await dialog.getByLabel('Key').selectOption('2 major')
  await dialog.getByLabel('Tempo').fill('60')
  await dialog.getByLabel('Pickup').selectOption('1/8')
  await dialog.getByRole('button', { name: 'Make the arrangement' }).click()
  await expect(page.getByTestId('score').locator('svg').first()).toBeVisible()
  await page.getByTestId('score').focus()
}

const saved = (page: Page) => expect(page.getByTestId('save-state')).toContainText('Saved', { timeout: 10_000 })

/** Which drawn bar the playing mark stands in, counted from 0; −1 while there is none. */
const playingBar = (page: Page) => page.evaluate(() => {
  const mark = document.querySelector('.playing')?.getBoundingClientRect()
  if (!mark) return -1
  const middle = { x: mark.x + mark.width / 2, y: mark.y + mark.height / 2 }
  return [...document.querySelectorAll('[data-bar]')].map(bar => bar.getBoundingClientRect())
    .findIndex(box => middle.x >= box.left && middle.x <= box.right && middle.y >= box.top - 40 && middle.y <= box.bottom + 40)
})

async function exportMusicXml(page: Page): Promise<{ name: string, text: string }> {
  await page.getByRole('button', { name: 'Export' }).click()
  const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('menuitem', { name: /MusicXML/ }).click()])
  return { name: download.suggestedFilename(), text: await readFile(await download.path(), 'utf8') }
}

test('a printed tune typed at the keyboard comes out as printed', async ({ page }) => {
  test.setTimeout(180_000)
  await signInDemo(page)
  await makeArrangement(page)

  const typist = new Typist(page)
  await typist.type(MELODY)
  const printed = readAbc(PRINTED).bars.flatMap(bar => bar.notes).map(({ midi, length }) => ({ midi: midi!, length }))
  const perNote = typist.keys / printed.length
  console.log(`keys for the melody alone: ${typist.keys} for ${printed.length} notes, ${perNote.toFixed(2)} a note`)
  expect(perNote).toBeLessThanOrEqual(2.8)

  await command(page, 'Repeat to here')
  await page.keyboard.press('Control+Home')
  await page.keyboard.press('Control+ArrowRight')
  await command(page, 'Repeat from here')
  await page.keyboard.press('v')
  await typist.toString(6)
  await typist.type(BASS)
  await command(page, 'This bar is meant to hold what it holds')
  await saved(page)

  await page.reload()
  await expect(page.getByTestId('score').locator('svg').first()).toBeVisible()
  await page.getByTestId('score').focus()
  await page.keyboard.press('Control+Home')
  await page.keyboard.press('Space')
  await expect(page.getByRole('button', { name: 'Stop' })).toBeVisible()
  await expect.poll(() => playingBar(page), { timeout: 15_000 }).toBe(1)
  await page.keyboard.press('Space')
  await expect(page.getByRole('button', { name: 'Play' })).toBeVisible()

  const file = await exportMusicXml(page)
  expect(file.name).toBe('Planxty Irwin.musicxml')
  expect(file.text).toContain('D2 A2 D3 G3 B3 D4')
  expect(staffNotes(file.text, { staff: 1, voice: 1 })).toEqual(printed)

  const back = readMusicXml(file.text)
  if (!('score' in back)) throw new Error(back.problem)
  const sounding = back.score.bars.flatMap(bar => bar.voices.upper?.events ?? []).flatMap(event => event.notes).map(note => soundingMidi(back.score.head, note))
  expect(sounding).toEqual(printed.map(({ midi }) => midi - 12))
  const bass = back.score.bars.flatMap(bar => bar.voices.lower?.events ?? []).flatMap(event => event.notes)
  expect(bass.map(({ string, fret }) => `${string}/${fret}`)).toEqual(BASS.flatMap(bar => bar.split(' ')).map(note => /^\d+\/\d+/.exec(note)![0]))
  expect(back.score.bars.map(bar => bar.length ?? null)).toEqual([{ n: 1, d: 8 }, ...Array(7).fill(null), { n: 5, d: 8 }])
  expect([back.score.bars[1]!.repeatStart, back.score.bars[8]!.repeatEnd]).toEqual([true, 2])
})
