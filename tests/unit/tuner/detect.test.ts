import { PitchDetector } from 'pitchy'
import { Note } from 'tonal'
import { describe, expect, it, vi } from 'vitest'
import { centsBetween, detectPitch, follow, NOTHING_HEARD, windowFor, type Followed } from '../../../shared/sound/tuner'
import { gaussian, pluck, random, type Pluck } from './pluck'

// Each listens to many seconds of sound.
vi.setConfig({ testTimeout: 30_000 })

const RATE = 48_000
/** Seconds between two looks. */
const EVERY = 0.05
const BEFORE = 0.3

/** C2 to E5 by half steps; frequencies by tonal, A4 = 440 Hz (ISO 16:1975). */
const notes = Array.from({ length: Note.midi('E5')! - Note.midi('C2')! + 1 }, (_, index) => Note.fromMidi(Note.midi('C2')! + index))
/** Thin plain strings to thick slack ones: B of guitar strings (orders of magnitude from N. Fletcher and T. Rossing, The Physics of
 * Musical Instruments, §2.18 and §9; wide on purpose). */
const STRETCHES = [0.00002, 0.0003]

interface Look { readonly time: number, readonly followed: Followed }

/** Looks at a sound as the tuner does, window by window. */
function watch(samples: Float32Array, sought: number): Look[] {
  const size = windowFor(sought * 0.7, RATE)
  const padded = new Float32Array(size + samples.length)
  padded.set(samples, size)
  let followed = NOTHING_HEARD
  const looks: Look[] = []
  for (let time = EVERY; time <= samples.length / RATE; time += EVERY) {
    const end = size + Math.round(time * RATE)
    followed = follow(followed, detectPitch(padded.subarray(end - size, end), RATE, sought), time)
    looks.push({ time, followed })
  }
  return looks
}

/** What is shown as standing, in cents from the truth, and how long after the pluck it first was. */
function steady(options: Omit<Pluck, 'rate' | 'seconds' | 'before'>, sought = options.first) {
  const looks = watch(pluck({ ...options, rate: RATE, seconds: 1.2, before: BEFORE }), sought)
  const shownAt = looks.filter(({ time, followed }) => followed.pitch?.isSteady && followed.pitch.time === time)
  return { cents: shownAt.map(({ followed }) => centsBetween(followed.pitch!.hertz, options.first)), latency: (shownAt[0]?.time ?? Infinity) - BEFORE }
}
const worst = (cents: readonly number[]): number => Math.max(...cents.map(Math.abs))

describe('plucked strings with stretched partials, dying away in noise at 20 dB', () => {
  const latencies: number[] = []
  const errors: number[] = []
  it.each(notes)('%s within 2 cents of its first partial', (name) => {
    const first = Note.freq(name)!
    for (const stretch of STRETCHES) {
      // A pluck at the middle leaves the even partials out; a small microphone hears little of the low ones.
      for (const more of [{ place: 0.17 }, { place: 0.5 }, { place: 0.1, lowCut: 250 }]) {
        const { cents, latency } = steady({ first, stretch, snr: 20, seed: Note.midi(name)!, ...more })
        expect(cents.length).toBeGreaterThan(8)
        expect(worst(cents)).toBeLessThan(2)
        latencies.push(latency)
        errors.push(worst(cents))
      }
    }
  })

  it('stands soon after the pluck', () => {
    const sorted = [...latencies].sort((a, b) => a - b)
    console.info(`tuner: worst of ${errors.length} tones ${Math.max(...errors).toFixed(2)} cents; pluck to standing median ${(sorted[sorted.length >> 1]! * 1000).toFixed(0)} ms, most ${(sorted.at(-1)! * 1000).toFixed(0)} ms`)
    expect(latencies).toHaveLength(notes.length * 6)
    expect(sorted.at(-1)).toBeLessThan(0.6)
  })
})

describe('octaves', () => {
  it.each(notes.filter((_, index) => index % 3 === 0))('%s is not taken for its neighbour when another octave is sought', (name) => {
    for (const times of [0.5, 1 / 3, 2]) {
      const first = Note.freq(name)!
      const { cents } = steady({ first, stretch: 0.0001, snr: 20 }, first * times)
      expect(cents.length).toBeGreaterThan(4)
      expect(worst(cents)).toBeLessThan(2)
    }
  })

  it.each(['C2', 'A2', 'F3', 'E4'])('%s is told though its octave, second partial, is ten times as strong as itself', (name) => {
    const first = Note.freq(name)!
    for (const sought of [first, 1.5 * first]) {
      const { cents } = steady({ first, stretch: 0.0001, snr: 30, odd: 0.1 }, sought)
      expect(cents.length).toBeGreaterThan(8)
      expect(worst(cents)).toBeLessThan(2)
    }
  })

  it('hears a low string by its upper partials, where a microphone leaves almost nothing of the first', () => {
    const first = Note.freq('C2')!
    const { cents } = steady({ first, stretch: 0.0001, snr: 20, lowCut: 600 })
    expect(cents.length).toBeGreaterThan(8)
    expect(worst(cents)).toBeLessThan(2)
  })
})

describe('out of tune', () => {
  it.each([-180, -47, -12, -4, 3, 9, 31, 150])('%d cents off are told as such', (off) => {
    const wanted = Note.freq('D2')!
    const { cents } = steady({ first: wanted * 2 ** (off / 1200), stretch: 0.0001, snr: 20 }, wanted)
    expect(cents.length).toBeGreaterThan(8)
    expect(worst(cents)).toBeLessThan(2)
  })

  it('agrees with another program where that one can be right: partials that do not stretch', () => {
    const sound = pluck({ first: 146.5, rate: RATE, seconds: 0.6, stretch: 0 }).subarray(4800, 4800 + 8192)
    const [other] = PitchDetector.forFloat32Array(8192).findPitch(sound, RATE)
    expect(Math.abs(centsBetween(detectPitch(sound, RATE, 146.8)!.hertz, other))).toBeLessThan(1)
  })
})

describe('other strings ringing along', () => {
  it.each([['C2', ['G2', 'C4']], ['D3', ['D2', 'A3']], ['D4', ['G2', 'D3']]] as const)('do not draw %s away', (name, others) => {
    const first = Note.freq(name)!
    const all = { rate: RATE, seconds: 1.2, before: BEFORE, stretch: 0.0001 }
    const sound = pluck({ ...all, first, snr: 20 })
    // 24 dB softer, and some cents out of tune themselves.
    for (const [index, other] of others.entries()) {
      pluck({ ...all, first: Note.freq(other)! * 2 ** ((index ? 12 : -9) / 1200), level: 0.1 * 10 ** (-24 / 20), seed: 9 }).forEach((value, at) => {
        sound[at]! += value
      })
    }
    const shown = watch(sound, first).filter(({ followed }) => followed.pitch?.isSteady).map(({ followed }) => centsBetween(followed.pitch!.hertz, first))
    expect(shown.length).toBeGreaterThan(8)
    expect(worst(shown)).toBeLessThan(2)
  })
})

describe('no string', () => {
  const noise = (level: number) => {
    const next = random(7)
    return Float32Array.from({ length: RATE * 2 }, () => level * gaussian(next))
  }
  it('shows nothing in silence or noise', () => {
    for (const level of [0, 0.0001, 0.01, 0.3]) expect(watch(noise(level), 110).some(({ followed }) => followed.pitch)).toBe(false)
  })

  it('shows nothing while samples are missing or stand still', () => {
    expect(detectPitch(new Float32Array(4096), RATE)).toBeNull()
    expect(detectPitch(new Float32Array(4096).fill(0.5), RATE)).toBeNull()
  })
})
