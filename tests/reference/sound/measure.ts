import { PitchDetector } from 'pitchy'

export const SAMPLE_RATE = 44_100

export const centsBetween = (hertz: number, wanted: number): number => 1200 * Math.log2(hertz / wanted)

/** By pitchy (the McLeod pitch method), on a window behind the attack. */
export function byPitchy(samples: Float32Array, from = 0.15, size = 8192): number {
  const start = Math.round(from * SAMPLE_RATE)
  return PitchDetector.forFloat32Array(size).findPitch(samples.subarray(start, start + size), SAMPLE_RATE)[0]
}

/**
 * By autocorrelation at a lag of many periods near the wanted one, refined by a parabola: another method than pitchy's, which has
 * been seen to return nonsense on plucked sounds.
 */
export function byAutocorrelation(samples: Float32Array, wanted: number, from = 0.15): number {
  const period = SAMPLE_RATE / wanted
  const periods = Math.max(1, Math.floor(0.08 * wanted))
  const x = samples.subarray(Math.round(from * SAMPLE_RATE))
  const likeness = (lag: number): number => {
    let both = 0, here = 0, there = 0
    for (let i = 0; i < 12_000; i++) {
      both += x[i]! * x[i + lag]!
      here += x[i]! ** 2
      there += x[i + lag]! ** 2
    }
    return both / Math.sqrt(here * there)
  }
  const near = Math.round(period * periods)
  const reach = Math.ceil(period * 0.3)
  const lags = Array.from({ length: 2 * reach + 1 }, (_, step) => near - reach + step)
  const best = lags.reduce((a, b) => (likeness(b) > likeness(a) ? b : a))
  const [left, top, right] = [likeness(best - 1), likeness(best), likeness(best + 1)]
  const peak = best + (left - right) / (2 * (left - 2 * top + right))
  return SAMPLE_RATE * periods / peak
}
