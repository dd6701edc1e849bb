import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { CEILING, createEnsemble, render, scheduleOf } from '../../../shared/sound'
import { createLimiter } from '../../../shared/sound/limiter'
import { allPass, lossFilter, poleDelay } from '../../../shared/sound/tuning'
import { parseScore } from '../../support/score'

const RATE = 44_100
const E2 = 440 * 2 ** ((40 - 69) / 12)

const power = (samples: Float32Array, from: number, to: number): number => {
  const part = samples.subarray(Math.round(from * RATE), Math.round(to * RATE))
  return part.reduce((sum, value) => sum + value ** 2, 0) / part.length
}
const decibels = (a: number, b: number): number => 10 * Math.log10(a / b)

/** Power at one frequency, by a windowed discrete Fourier transform. */
function powerAt(samples: Float32Array, hertz: number, from: number, seconds: number): number {
  const start = Math.round(from * RATE)
  const count = Math.round(seconds * RATE)
  let real = 0, imaginary = 0
  for (let i = 0; i < count; i++) {
    const value = samples[start + i]! * (0.5 - 0.5 * Math.cos(2 * Math.PI * i / count))
    real += value * Math.cos(2 * Math.PI * hertz * i / RATE)
    imaginary += value * Math.sin(2 * Math.PI * hertz * i / RATE)
  }
  return (real ** 2 + imaginary ** 2) / count ** 2
}

/** Times at which sound begins after silence. */
function onsets(samples: Float32Array, threshold = 0.002, silence = 0.02): number[] {
  const found: number[] = []
  let last = -Infinity
  samples.forEach((value, index) => {
    if (Math.abs(value) < threshold) return
    if (index - last > silence * RATE) found.push(index / RATE)
    last = index
  })
  return found
}

describe('filters', () => {
  // Against the transfer functions themselves, evaluated on the unit circle.
  const onePole = (gain: number, pole: number, omega: number) => {
    const [real, imaginary] = [1 - pole * Math.cos(omega), pole * Math.sin(omega)]
    return { size: gain * (1 - pole) / Math.hypot(real, imaginary), delay: Math.atan2(imaginary, real) / omega }
  }

  it('loses 60 dB in the wanted time at both frequencies', () => {
    for (const hertz of [65, 110, 330, 880]) {
      const [omega, high] = [hertz, 3520].map(each => 2 * Math.PI * each / RATE) as [number, number]
      const { gain, pole } = lossFilter(omega, hertz, 6, high, 1)
      expect(20 * Math.log10(onePole(gain, pole, omega).size) * hertz * 6).toBeCloseTo(-60, 6)
      expect(20 * Math.log10(onePole(gain, pole, high).size) * hertz * 1).toBeCloseTo(-60, 6)
      expect(poleDelay(pole, omega)).toBeCloseTo(onePole(gain, pole, omega).delay, 12)
    }
  })

  it('delays by the wanted fraction of a sample', () => {
    fc.assert(fc.property(fc.double({ min: 0.5, max: 1.5, noNaN: true }), fc.double({ min: 0.005, max: 0.5, noNaN: true }), (delay, omega) => {
      const c = allPass(delay, omega)
      // H = (c + z⁻¹) / (1 + c z⁻¹)
      const phase = Math.atan2(-Math.sin(omega), c + Math.cos(omega)) - Math.atan2(-c * Math.sin(omega), 1 + c * Math.cos(omega))
      expect(-phase / omega).toBeCloseTo(delay, 8)
      expect(Math.abs(c)).toBeLessThan(1)
    }))
  })
})

describe('limiter', () => {
  it('lets nothing past the ceiling, and leaves what is quiet alone', () => {
    fc.assert(fc.property(fc.array(fc.double({ min: -20, max: 20, noNaN: true }), { minLength: 1, maxLength: 200 }), (values) => {
      const samples = Float32Array.from(values)
      createLimiter(RATE)(samples)
      expect(Math.max(...samples.map(Math.abs))).toBeLessThanOrEqual(CEILING + 1e-6)
    }), { interruptAfterTimeLimit: 10_000, markInterruptAsFailure: true })
    const quiet = Float32Array.from([0.1, -0.5, 0.8, -0.85])
    const before = quiet.slice()
    createLimiter(RATE)(quiet)
    expect(quiet).toEqual(before)
  })
})

describe('strings', () => {
  it('begin within a millisecond of their time, at every rate', () => {
    const schedule = scheduleOf(parseScore('{q=97} 6/0s zs ze 3/2s zs ze [3 1/5s zs ze] zq | 5/3s zs ze zh.'))
    const wanted = schedule.events.flatMap(event => (event.kind === 'sound' ? event.at : []))
    expect(wanted).toHaveLength(4)
    for (const rate of [0.25, 0.8, 1, 1.5]) {
      const found = onsets(render(schedule, RATE, { rate }))
      expect(found).toHaveLength(wanted.length)
      found.forEach((time, index) => expect(Math.abs(time - wanted[index]! / rate)).toBeLessThan(0.001))
    }
  })

  it('carry one note at a time', () => {
    // E2, then fret 7 of the same string (B2): the lower note's frequency is none of the other's partials.
    const same = render(scheduleOf(parseScore('{q=60} 6/0q 6/7h.', { ring: 'let-ring' })), RATE)
    const other = render(scheduleOf(parseScore('{q=60} 6/0q 5/2h.', { ring: 'let-ring' })), RATE)
    const [before, after] = [powerAt(same, E2, 0.5, 0.4), powerAt(same, E2, 1.1, 0.4)]
    expect(decibels(before, after)).toBeGreaterThan(40)
    expect(decibels(powerAt(other, E2, 0.5, 0.4), powerAt(other, E2, 1.1, 0.4))).toBeLessThan(6)
  })

  it('are stopped within a tenth of a second where the note ends as written, and heard on where it rings', () => {
    const written = render(scheduleOf(parseScore('{q=60} 6/0q zh.')), RATE)
    const ringing = render(scheduleOf(parseScore('{q=60} 6/0q zh.', { ring: 'let-ring' })), RATE)
    expect(decibels(power(ringing, 1.1, 1.3), power(written, 1.1, 1.3))).toBeGreaterThan(60)
    expect(decibels(power(ringing, 0.5, 0.9), power(ringing, 2.5, 2.9))).toBeLessThan(15)
    expect(decibels(power(written, 0.5, 0.9), power(ringing, 0.5, 0.9))).toBeCloseTo(0, 3)
  })

  it('die away by 60 dB in their time', () => {
    // Open E4: 6 s. Its fundamental between 0.5 s and 3.5 s falls by half of the 60 dB.
    const samples = render(scheduleOf(parseScore('{q=60} 1/0w', { ring: 'let-ring' })), RATE, { tail: 1 })
    const fundamental = 4 * E2
    expect(decibels(powerAt(samples, fundamental, 0.4, 0.2), powerAt(samples, fundamental, 3.4, 0.2))).toBeCloseTo(30, 0)
  })

  it('are softer when hammered or pulled than plucked, and a dead note is a short thud', () => {
    const samples = render(scheduleOf(parseScore('{q=60} 3/0hq 3/2pq 3/0q 6/0xq')), RATE)
    const loud = [0, 1, 2].map(beat => power(samples, beat, beat + 0.3)) as [number, number, number]
    expect(loud[1]).toBeLessThan(loud[0])
    expect(loud[2]).toBeLessThan(loud[0])
    expect(power(samples, 3.3, 3.9)).toBeLessThan(power(samples, 3, 3.1) / 1e4)
  })

  it('keep below the ceiling, all struck at once, and are loud enough to hear', () => {
    const loud = render(scheduleOf(parseScore('{q=300} ' + '(1/0 2/0 3/0 4/0 5/0 6/0)e '.repeat(8), { ring: 'let-ring' })), RATE, { click: true })
    const peak = loud.reduce((top, value) => Math.max(top, Math.abs(value)), 0)
    expect(peak).toBeLessThanOrEqual(CEILING + 1e-6)
    expect(peak).toBeGreaterThan(0.3)
    expect(loud.every(Number.isFinite)).toBe(true)
  })

  it('sound much alike in loudness from the lowest string to the twelfth fret of the highest', () => {
    const levels = ['6/0', '5/0', '4/0', '3/0', '2/0', '1/0', '1/12'].map(note => power(render(scheduleOf(parseScore(`{q=60} ${note}w`)), RATE, { tail: 0 }), 0, 0.3))
    expect(decibels(Math.max(...levels), Math.min(...levels))).toBeLessThan(6)
  })
})

describe('playing', () => {
  const block = (ensemble: ReturnType<typeof createEnsemble>, seconds: number): Float32Array => {
    const samples = new Float32Array(Math.round(seconds * RATE))
    for (let from = 0; from < samples.length; from += 128) ensemble.process(samples.subarray(from, from + 128))
    return samples
  }

  it('goes on at a new rate from where it is', () => {
    const ensemble = createEnsemble(RATE)
    ensemble.play(scheduleOf(parseScore('{q=60} zq 6/0h. | zw')), 1, false)
    block(ensemble, 0.5)
    expect(ensemble.position()).toBeCloseTo(0.5, 2)
    ensemble.setRate(0.25)
    // Half a second of music is left before the note: two seconds at a quarter of the tempo.
    expect(onsets(block(ensemble, 3))[0]).toBeCloseTo(2, 2)
    ensemble.setRate(9)
    const before = ensemble.position()!
    block(ensemble, 1)
    expect(ensemble.position()! - before).toBeCloseTo(1.5, 2)
  })

  it('ends by itself, and falls silent when stopped', () => {
    const ensemble = createEnsemble(RATE)
    ensemble.play(scheduleOf(parseScore('{q=240} 6/0w')), 1, false)
    block(ensemble, 1.2)
    expect(ensemble.position()).toBeNull()
    ensemble.play(scheduleOf(parseScore('{q=60} 6/0w 6/0w')), 1, false)
    block(ensemble, 0.5)
    ensemble.stop()
    expect(ensemble.position()).toBeNull()
    const rest = block(ensemble, 1)
    expect(power(rest, 0.2, 1)).toBeLessThan(1e-9)
  })

  it('clicks on the beats when asked to, also while playing', () => {
    const schedule = scheduleOf(parseScore('{q=120} zw'))
    expect(onsets(render(schedule, RATE, { click: true })).map(time => Math.round(time * 100) / 100)).toEqual([0, 0.5, 1, 1.5])
    expect(render(schedule, RATE).every(value => value === 0)).toBe(true)
    const ensemble = createEnsemble(RATE)
    ensemble.play(schedule, 1, false)
    block(ensemble, 0.75)
    ensemble.setClick(true)
    expect(onsets(block(ensemble, 1))).toHaveLength(2)
  })

  it('sounds notes at once, beside nothing', () => {
    const ensemble = createEnsemble(RATE)
    block(ensemble, 0.1)
    ensemble.sound([{ noteId: 'n', string: 3, midi: 55, touch: 'pluck', velocity: 0.9, seconds: 2.5 }])
    expect(onsets(block(ensemble, 0.2))[0]).toBeLessThan(0.001)
  })

  it('renders the same samples from the same schedule', () => {
    const schedule = scheduleOf(parseScore('{q=90} 6/0q 3/2hq 3/4h'))
    const again = render(schedule, RATE)
    expect(render(schedule, RATE).every((value, index) => value === again[index])).toBe(true)
  })

  it('renders many times faster than it plays', () => {
    const text = Array.from({ length: 16 }, () => '(6/0 1/3)e 3/0e 2/1e 1/0e (5/3 1/3)e 4/2e 3/0e 2/1e').join(' | ')
    const schedule = scheduleOf(parseScore(text, { ring: 'let-ring' }))
    // Processor time, not the clock's: what else the machine does is not ours.
    const begin = process.cpuUsage()
    const seconds = render(schedule, RATE).length / RATE
    const { user, system } = process.cpuUsage(begin)
    const times = seconds / ((user + system) / 1e6)
    console.info(`sound: six ringing strings rendered at ${times.toFixed(0)} × real time`)
    expect(times).toBeGreaterThan(20)
  })
})
