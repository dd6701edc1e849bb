import { excite } from './excite'
import { lossFilter, loopTuning } from './tuning'

/** One vibration of a string, from its touch until it has died away or been stopped. */
export interface Loop {
  /** Adds `output[from … to − 1]`. */
  readonly render: (output: Float32Array, from: number, to: number) => void
  /** Fades out: to a thousandth within `seconds`. */
  readonly fade: (seconds: number) => void
  readonly isSilent: () => boolean
}

export interface LoopWish {
  /** Hertz, below a quarter of the sample rate. */
  readonly frequency: number
  /** Until it has died away by 60 dB. */
  readonly seconds: number
  readonly place: number
  readonly brightness: number
  readonly level: number
  readonly seed: number
}

/** High partials, around 3 kHz, die in this part of the fundamental's time (ours; new steel strings ring brighter still). */
const HIGH_HERTZ = 3000
const HIGH_SHARE = 0.15
/** Rise of the first samples, so that the pulse does not begin with a step. */
const ATTACK_SECONDS = 0.0004
/** Then −72 dB are reached and the rest is let go. */
const LIFE = 1.2
const END_FADE_SECONDS = 0.02

export function createLoop(sampleRate: number, { frequency, seconds, place, brightness, level, seed }: LoopWish): Loop {
  const omega = 2 * Math.PI * frequency / sampleRate
  const high = 2 * Math.PI * Math.min(Math.max(HIGH_HERTZ, 4 * frequency), 0.45 * sampleRate) / sampleRate
  const { gain, pole } = lossFilter(omega, frequency, seconds, high, HIGH_SHARE * seconds)
  const { samples, coefficient } = loopTuning(omega, pole)
  const line = new Float64Array(samples)
  excite(line, { place, brightness, level, seed })
  const feed = gain * (1 - pole)
  const rise = 1 / Math.max(1, ATTACK_SECONDS * sampleRate)
  const life = Math.ceil(LIFE * seconds * sampleRate)
  let index = 0, lossOut = 0, passIn = 0, passOut = 0, age = 0
  let attack = rise, volume = 1, fading = 1

  function fade(time: number): void {
    fading = Math.min(fading, 10 ** (-3 / (time * sampleRate)))
  }

  function render(output: Float32Array, from: number, to: number): void {
    if (age > life) fade(END_FADE_SECONDS)
    for (let i = from; i < to; i++) {
      const value = line[index]!
      lossOut = feed * value + pole * lossOut
      passOut = coefficient * (lossOut - passOut) + passIn
      passIn = lossOut
      line[index] = passOut
      index = index + 1 === samples ? 0 : index + 1
      output[i]! += value * volume * attack
      volume *= fading
      if (attack < 1) attack = Math.min(1, attack + rise)
    }
    age += to - from
  }

  return { render, fade, isSilent: () => volume < 1e-4 }
}
