import { writeFileSync } from 'node:fs'
import AxeBuilder from '@axe-core/playwright'
import { chromium, expect, test, type Browser, type Page } from '@playwright/test'
import { PitchDetector } from 'pitchy'
import { Note } from 'tonal'
import { visit } from '../support/e2e'
import { pluck, type Pluck } from '../unit/tuner/pluck'

/** What the page is seen to do: nothing of it is in the product. */
interface Seen { streams: MediaStream[], cents: number[], onsets: number[], shownAt: number[], context?: BaseAudioContext, out?: AnalyserNode }
declare global { interface Window { tunerSeen: Seen } }

const RATE = 48_000
const BEFORE = 0.7

/** A WAVE file of 16-bit mono PCM (IBM and Microsoft, Multimedia Programming Interface and Data Specifications 1.0, 1991). */
function wave(name: string, samples: Float32Array): string {
  const file = Buffer.alloc(44 + 2 * samples.length)
  file.write('RIFF', 0)
  file.writeUInt32LE(36 + 2 * samples.length, 4)
  file.write('WAVEfmt ', 8)
  file.writeUInt32LE(16, 16)
  file.writeUInt16LE(1, 20)
  file.writeUInt16LE(1, 22)
  file.writeUInt32LE(RATE, 24)
  file.writeUInt32LE(2 * RATE, 28)
  file.writeUInt16LE(2, 32)
  file.writeUInt16LE(16, 34)
  file.write('data', 36)
  file.writeUInt32LE(2 * samples.length, 40)
  samples.forEach((value, index) => file.writeInt16LE(Math.round(32_767 * Math.max(-1, Math.min(1, value))), 44 + 2 * index))
  const path = test.info().outputPath(`${name}.wav`)
  writeFileSync(path, file)
  return path
}

/** A string plucked once every 2.1 s, so many cents from a pitch, with noise at 20 dB. The browser plays the file again and again. */
const plucked = (pitch: string, cents: number, more: Partial<Pluck> = {}): string =>
  wave(`${pitch}${cents}`, pluck({ first: Note.freq(pitch)! * 2 ** (cents / 1200), rate: RATE, seconds: 1.4, before: BEFORE, stretch: 0.0001, snr: 20, ...more }))

/** Notes when a string sounds at the microphone, when a reading is shown, and what streams were opened. */
function watchTuner(): void {
  const seen: Seen = window.tunerSeen = { streams: [], cents: [], onsets: [], shownAt: [] }
  const ask = MediaDevices.prototype.getUserMedia
  MediaDevices.prototype.getUserMedia = async function (what) {
    const stream = await ask.call(this, what)
    seen.streams.push(stream)
    return stream
  }
  const createSource = AudioContext.prototype.createMediaStreamSource
  AudioContext.prototype.createMediaStreamSource = function (stream) {
    const source = createSource.call(this, stream)
    const tap = new AnalyserNode(this, { fftSize: 512 })
    source.connect(tap)
    const block = new Float32Array(512)
    let loud = true
    setInterval(() => {
      tap.getFloatTimeDomainData(block)
      const peak = Math.max(...block.map(Math.abs))
      if (!loud && peak > 0.08) seen.onsets.push(performance.now())
      loud = peak > 0.05
    }, 4)
    return source
  }
  const connect = AudioNode.prototype.connect as (this: AudioNode, ...to: unknown[]) => AudioNode
  AudioNode.prototype.connect = function (this: AudioNode, ...to: unknown[]) {
    if (to[0] instanceof AudioDestinationNode) {
      seen.context = this.context
      seen.out = new AnalyserNode(this.context, { fftSize: 16_384 })
      connect.call(this, seen.out)
    }
    return connect.call(this, ...to)
  } as typeof AudioNode.prototype.connect
  new MutationObserver(() => {
    const text = document.querySelector('[data-testid=tuner-cents]')?.textContent ?? '–'
    if (text === '–') return
    seen.cents.push(Number(text.replace('−', '-').replace('±', '')))
    seen.shownAt.push(performance.now())
  }).observe(document, { subtree: true, characterData: true, childList: true })
}

const FAKE_DEVICE = ['--use-fake-device-for-media-stream']
const FAKE_CONSENT = ['--use-fake-ui-for-media-stream']

/** A browser of its own, since the microphone's sound is given when it starts. */
async function inBrowser(flags: readonly string[], run: (page: Page, browser: Browser) => Promise<void>): Promise<void> {
  const { launchOptions, baseURL } = test.info().project.use
  const browser = await chromium.launch({ ...launchOptions, args: [...launchOptions?.args ?? [], ...flags] })
  try {
    const page = await browser.newPage({ baseURL: baseURL!, viewport: { width: 1280, height: 900 } })
    await page.addInitScript(watchTuner)
    await run(page, browser)
  }
  finally {
    await browser.close()
  }
}
const withSound = (path: string, run: (page: Page) => Promise<void>) => inBrowser([...FAKE_CONSENT, ...FAKE_DEVICE, `--use-file-for-fake-audio-capture=${path}`], run)

const listen = (page: Page) => page.getByRole('button', { name: 'Listen', exact: true })
const headline = (page: Page) => page.getByTestId('tuner-headline')
const STANDARD = 'e2-a2-d3-g3-b3-e4'

for (const { pitch, cents, to, string, words } of [
  { pitch: 'C2', cents: -23, to: 'c2-g2-d3-g3-c4-d4', string: 6, words: /^Up 2[1-5] cents$/ },
  { pitch: 'G3', cents: 11, to: 'c2-g2-d3-g3-c4-d4', string: 3, words: /^Down (9|1[0-3]) cents$/ },
  { pitch: 'E5', cents: -8, to: 'g3-d4-a4-e5', string: 1, words: /^Up ([6-9]|10) cents$/ },
]) {
  test(`${pitch} ${cents} cents off is read within 2 cents, without a network`, async () => {
    await withSound(plucked(pitch, cents), async (page) => {
      await visit(page, `/tunings/tune?to=${to}`)
      await page.getByRole('button', { name: `String ${string}: ` }).click()
      await page.context().setOffline(true)
      await listen(page).click()
      await expect(headline(page)).toHaveText(words, { timeout: 15_000 })
      await page.waitForTimeout(6500)
      const { cents: read, onsets, shownAt } = await page.evaluate(() => window.tunerSeen)
      const latencies = onsets.flatMap((onset) => {
        const first = shownAt.find(time => time > onset)
        return first !== undefined && first - onset < 1500 ? [first - onset] : []
      })
      console.info(`tuner: ${pitch} ${cents} cents read as ${Math.min(...read)} to ${Math.max(...read)} (${read.length} readings); pluck to reading ${latencies.map(each => each.toFixed(0)).join(', ')} ms`)
      expect(read.length).toBeGreaterThan(2)
      expect(Math.max(...read.map(each => Math.abs(each - cents)))).toBeLessThanOrEqual(2)
      expect(latencies.length).toBeGreaterThan(1)
      expect(Math.min(...latencies)).toBeLessThan(700)
    })
  })
}

test('a string in tune is ticked off, and the plan goes on to the next', async () => {
  await withSound(plucked('D2', 0), async (page) => {
    await visit(page, `/tunings/tune?to=d2-a2-d3-g3-b3-d4&from=${STANDARD}`)
    await page.getByRole('button', { name: 'String 6: E2 to D2' }).click()
    expect(await page.evaluate(() => window.tunerSeen.streams.length)).toBe(0)
    await listen(page).focus()
    await page.keyboard.press('Enter')
    await expect(headline(page)).toHaveText('In tune', { timeout: 15_000 })
    await expect(page.getByRole('button', { name: 'String 6: E2 to D2 done' })).toBeVisible({ timeout: 15_000 })
    await expect(page.getByTestId('tuner-said')).toContainText('String 6 is done.')
    await expect(page.getByRole('button', { name: 'String 1: E4 to D4' })).toHaveAttribute('aria-current', 'step')
    // The low string goes on sounding: the high one must not be turned for it.
    await expect(headline(page)).toHaveText('This is D2', { timeout: 15_000 })
    await expect(page.getByText('Turn nothing for this note.')).toBeVisible()
  })
})

test('the microphone is let go when the page is left', async () => {
  await withSound(plucked('A2', 4), async (page) => {
    await visit(page, `/tunings/tune?to=${STANDARD}`)
    await listen(page).click()
    await expect(page.getByRole('button', { name: 'Stop listening' })).toBeVisible()
    const tracks = () => page.evaluate(() => window.tunerSeen.streams.flatMap(stream => stream.getTracks()).map(track => track.readyState))
    expect(await tracks()).toEqual(['live'])
    await page.getByRole('link', { name: 'Help' }).click()
    await expect(page.getByRole('heading', { name: 'Help', level: 1 })).toBeVisible()
    expect(await tracks()).toEqual(['ended'])
  })
})

test.describe('without a microphone', () => {
  const says = async (page: Page, title: string) => {
    await visit(page, `/tunings/tune?to=${STANDARD}`)
    await listen(page).click()
    await expect(page.getByRole('status').filter({ hasText: title })).toBeVisible()
    await expect(listen(page)).toBeEnabled()
  }

  test('says that it was refused', () => inBrowser(FAKE_DEVICE, page => says(page, 'The browser may not use the microphone')))

  test('says that there is none', () => inBrowser(FAKE_CONSENT, page => says(page, 'No microphone was found')))

  test('says that it is in use', () => inBrowser([], async (page) => {
    await page.addInitScript(() => {
      MediaDevices.prototype.getUserMedia = () => Promise.reject(new DOMException('in use', 'NotReadableError'))
    })
    await says(page, 'The microphone is in use')
  }))
})

/** Cents between what the loudspeaker gives and a frequency; NaN while that is no clear tone. */
async function offAtLoudspeaker(page: Page, hertz: number): Promise<number> {
  const { samples, rate } = await page.evaluate(() => {
    const { out, context } = window.tunerSeen
    const data = new Float32Array(out!.fftSize)
    out!.getFloatTimeDomainData(data)
    return { samples: [...data], rate: context!.sampleRate }
  })
  const [heard, clarity] = PitchDetector.forFloat32Array(samples.length).findPitch(Float32Array.from(samples), rate)
  return clarity > 0.99 ? 1200 * Math.log2(heard / hertz) : Number.NaN
}

test('a change is heard as it was, then as it becomes', async ({ page }) => {
  await page.addInitScript(watchTuner)
  await visit(page, `/tunings/tune?to=d2-a2-d3-g3-b3-d4&from=${STANDARD}`)
  await page.getByRole('button', { name: 'String 6: E2 to D2' }).click()
  await page.getByRole('button', { name: 'Hear E2, then D2' }).click()
  await expect(headline(page)).toHaveText('First E2, then D2')
  for (const pitch of ['E2', 'D2']) {
    await expect.poll(async () => Math.abs(await offAtLoudspeaker(page, Note.freq(pitch)!)), { intervals: [50], timeout: 4000 }).toBeLessThan(1)
  }
  await expect(headline(page)).toHaveText('Not listening')
})

test('the reference tone is in tune with the A that is set, and is not taken for the string', async () => {
  await withSound(plucked('E2', -60), async (page) => {
    await visit(page, `/tunings/tune?to=${STANDARD}`)
    await page.getByLabel('A4, in hertz').fill('460')
    await expect(page.getByText('A4 can be 430 to 450 Hz; 440 Hz is kept.')).toBeVisible()
    await page.getByLabel('A4, in hertz').fill('432')
    await listen(page).click()
    await expect(headline(page)).toHaveText(/^Up|^Down/, { timeout: 15_000 })
    for (const [string, pitch] of [[6, 'E2'], [1, 'E4']] as const) {
      await page.getByRole('button', { name: `String ${string}: ` }).click()
      await page.getByRole('button', { name: `Hear ${pitch}` }).click()
      await expect(headline(page)).toHaveText(`The tone is ${pitch}`)
      await page.waitForTimeout(1200)
      // A4 = 432 Hz lowers every pitch alike.
      expect(Math.abs(await offAtLoudspeaker(page, Note.freq(pitch)! * 432 / 440))).toBeLessThan(1)
      await expect(headline(page)).toHaveText(`The tone is ${pitch}`)
      await page.getByRole('button', { name: 'Stop the tone' }).click()
    }
  })
})

test('the tuner has no accessibility violation, and says why a tuning can’t be', async ({ page }) => {
  for (const colorScheme of ['light', 'dark'] as const) {
    await page.emulateMedia({ colorScheme })
    await visit(page, `/tunings/tune?to=c2-g2-d3-g3-c4-d4&from=${STANDARD}`)
    await expect(page.getByRole('heading', { name: 'Tune to C G D G C D' })).toBeVisible()
    const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze()
    expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)).toEqual([])
  }
  await visit(page, '/tunings/tune?to=c2-h2-d3-g3')
  await expect(page.getByRole('alert')).toContainText('“h2” is no pitch')
  await visit(page, `/tunings/tune?to=g3-d4-a4-e5&from=${STANDARD}`)
  await expect(page.getByRole('alert')).toContainText('From 6 strings to 4')
})
