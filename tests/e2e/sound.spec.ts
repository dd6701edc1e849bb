import { expect, test, type Page } from '@playwright/test'
import { Note } from 'tonal'
import type { OpenString, RingRule } from '../../shared/score/types'
import { scheduleOf, type Schedule } from '../../shared/sound'
import { byAutocorrelation, byPitchy, centsBetween, SAMPLE_RATE } from '../reference/sound/measure'
import { keepScore, openDesk, signInDemo } from '../support/e2e'
import { parseScore } from '../support/score'

/** What the page's own audio graph is seen to do: nothing of it is in the product. */
interface Seen { worklets: string[], context?: AudioContext, analyser?: AnalyserNode, keyAt: number }
declare global { interface Window { seen: Seen } }

/** Listens at the loudspeaker, and notes at which audio time each key was pressed. */
function watchAudio(): void {
  const seen: Seen = window.seen = { worklets: [], keyAt: 0 }
  const { addModule } = AudioWorklet.prototype
  AudioWorklet.prototype.addModule = function (url, options) {
    seen.worklets.push(new URL(url, location.href).href)
    return addModule.call(this, url, options)
  }
  const connect = AudioNode.prototype.connect as (this: AudioNode, ...to: unknown[]) => AudioNode
  AudioNode.prototype.connect = function (this: AudioNode, ...to: unknown[]) {
    if (to[0] instanceof AudioDestinationNode && this.context instanceof AudioContext && !seen.analyser) {
      seen.context = this.context
      seen.analyser = new AnalyserNode(this.context, { fftSize: 32_768 })
      connect.call(this, seen.analyser)
    }
    return connect.call(this, ...to)
  } as typeof AudioNode.prototype.connect
  window.addEventListener('keydown', (event) => {
    if (seen.context) seen.keyAt = seen.context.currentTime - (performance.now() - event.timeStamp) / 1000
  }, { capture: true })
}

const stringsOf = (lowToHigh: string): readonly OpenString[] => lowToHigh.split(' ').reverse().map(pitch => ({ pitch }))
const TUNINGS = ['E2 A2 D3 G3 B3 E4', 'C2 G2 D3 G3 C4 D4', 'B1 F#2 B2 E3 B3 D#4'].map(stringsOf)

async function desk(page: Page, text: string, ring: RingRule = 'let-ring'): Promise<string[]> {
  const problems: string[] = []
  page.on('console', message => void (message.type() === 'error' && problems.push(message.text())))
  page.on('pageerror', error => void problems.push(String(error)))
  await page.addInitScript(watchAudio)
  await signInDemo(page)
  await openDesk(page, await keepScore(page.request, parseScore(text, { title: 'Reed and Weir', strings: TUNINGS[1]!, ring })))
  await page.getByTestId('score').focus()
  return problems
}

/** The last 0.7 s of sound, and when they ended. */
async function lately(page: Page): Promise<{ samples: Float32Array, until: number, rate: number }> {
  await page.waitForFunction(() => window.seen.analyser)
  const { samples, ...rest } = await page.evaluate(() => {
    const { analyser, context } = window.seen
    const data = new Float32Array(analyser!.fftSize)
    analyser!.getFloatTimeDomainData(data)
    return { samples: [...data], until: context!.currentTime, rate: context!.sampleRate }
  })
  return { samples: Float32Array.from(samples), ...rest }
}
const peak = (samples: Float32Array): number => samples.reduce((top, value) => Math.max(top, Math.abs(value)), 0)

/** Seconds of silence before the strings are told to play, as a message needs a turn of the audio thread's own loop. */
const START = 0.1

/** Plays a schedule on the page's own strings as fast as the browser can. */
async function renderOffline(page: Page, schedule: Schedule): Promise<Float32Array> {
  const bytes = await page.evaluate(async ({ schedule, rate, start }) => {
    const context = new OfflineAudioContext(1, Math.ceil((start + schedule.length + 0.1) * rate), rate)
    await context.audioWorklet.addModule(window.seen.worklets[0]!)
    const node = new AudioWorkletNode(context, 'copperwound-strings', { numberOfInputs: 0, outputChannelCount: [1] })
    node.connect(context.destination)
    void context.suspend(start).then(async () => {
      node.port.postMessage({ kind: 'play', schedule, rate: 1, click: false })
      await new Promise(resolve => setTimeout(resolve, 200))
      await context.resume()
    })
    const { buffer } = (await context.startRendering()).getChannelData(0)
    const blob = new Blob([buffer])
    return new Promise<string>((resolve) => {
      const reader = new FileReader()
      reader.onload = () => resolve(String(reader.result).split(',')[1]!)
      reader.readAsDataURL(blob)
    })
  }, { schedule, rate: SAMPLE_RATE, start: START })
  const { buffer, byteOffset, byteLength } = Buffer.from(bytes, 'base64')
  return new Float32Array(buffer.slice(byteOffset, byteOffset + byteLength))
}

test('the built strings, rendered offline by the browser, are in tune', async ({ page }) => {
  await desk(page, '{q=60} 1/0q 1/2q 1/3q 1/5q')
  await page.keyboard.press('ArrowRight')
  await expect.poll(() => page.evaluate(() => window.seen.worklets.length)).toBeGreaterThan(0)
  const errors: number[] = []
  for (const strings of TUNINGS) {
    const places = strings.flatMap((open, index) => [0, 12].map(fret => ({ string: index + 1, fret, open: open.pitch })))
    // One note a second, each stopped before the next.
    const text = places.map(({ string, fret }) => `{q=60} {1/4} ${string}/${fret}e. zs`).join(' | ')
    const samples = await renderOffline(page, scheduleOf(parseScore(text, { strings })))
    for (const [index, { fret, open }] of places.entries()) {
      const note = samples.subarray((START + index) * SAMPLE_RATE, (START + index + 1) * SAMPLE_RATE)
      expect(peak(note)).toBeGreaterThan(0.05)
      // A4 = 440 Hz (ISO 16:1975), by tonal.
      const wanted = Note.freq(Note.fromMidi(Note.midi(open)! + fret))!
      errors.push(...[byPitchy(note), byAutocorrelation(note, wanted)].map(hertz => Math.abs(centsBetween(hertz, wanted))))
    }
  }
  console.info(`sound: worst of ${errors.length} measurements in the browser ${Math.max(...errors).toFixed(3)} cents`)
  expect(errors).toHaveLength(3 * 6 * 2 * 2)
  expect(Math.max(...errors)).toBeLessThan(3)
})

test('a note is heard within 50 ms of its key', async ({ page }) => {
  const problems = await desk(page, '{q=60} 1/0q 1/2q 1/3q 1/5q | 1/7q 1/0q 1/3q 1/2q')
  await page.keyboard.press('ArrowRight')
  await expect.poll(() => page.evaluate(() => window.seen.context?.state)).toBe('running')
  const delays: number[] = []
  for (const key of ['ArrowRight', 'ArrowRight', '9', 'ArrowRight', 'ArrowRight', '8']) {
    // A note entered dies away within 2.5 s.
    await page.waitForTimeout(2900)
    expect(peak((await lately(page)).samples)).toBeLessThan(0.001)
    await page.keyboard.press(key)
    await page.waitForTimeout(250)
    const { samples, until, rate } = await lately(page)
    const onset = samples.findIndex(value => Math.abs(value) > 0.002)
    expect(onset).toBeGreaterThan(0)
    const keyAt = await page.evaluate(() => window.seen.keyAt)
    delays.push((until - (samples.length - onset) / rate - keyAt) * 1000)
  }
  console.info(`sound: key to onset ${delays.map(delay => delay.toFixed(1)).join(', ')} ms`)
  expect(Math.max(...delays)).toBeLessThan(50)
  expect(problems).toEqual([])
})

test('Space plays from the cursor, in tune, with the cursor following, and stops', async ({ page }) => {
  const problems = await desk(page, '{q=20} 4/0q 3/0q 2/0h | 1/0w', 'written')
  const status = page.getByTestId('status')
  /** Cents between what is heard now and a pitch. */
  const error = async (pitch: string): Promise<number> => {
    await page.waitForTimeout(300)
    const { samples, rate } = await lately(page)
    return Math.abs(centsBetween(byPitchy(samples.subarray(-8192), 0) * rate / SAMPLE_RATE, Note.freq(pitch)!))
  }
  await page.keyboard.press('ArrowRight')
  await page.keyboard.press('Space')
  await expect.poll(async () => peak((await lately(page)).samples), { timeout: 5000 }).toBeGreaterThan(0.02)
  await expect(status).toContainText('Bar 1 · beat 2')
  // In C G D G C D the second note is G3, the third C4.
  expect(await error('G3')).toBeLessThan(3)
  await expect(status).toContainText('Bar 1 · beat 3', { timeout: 5000 })
  expect(await error('C4')).toBeLessThan(3)
  await page.keyboard.press('Space')
  await page.waitForTimeout(1000)
  expect(peak((await lately(page)).samples)).toBeLessThan(0.001)
  expect(problems).toEqual([])
})

test('a browser without audio says so, and goes on', async ({ page }) => {
  await page.addInitScript(() => Reflect.deleteProperty(window, 'AudioWorkletNode'))
  const problems = await desk(page, '{q=60} 4/0q 3/0q 2/0h')
  await page.keyboard.press('Space')
  await expect(page.getByText('This browser can’t play sound here.')).toBeVisible()
  await page.keyboard.press('ArrowRight')
  expect(problems).toEqual([])
})
