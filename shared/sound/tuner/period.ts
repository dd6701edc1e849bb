import { transform } from './fourier'

/** A time after which a sound resembles itself. */
export interface Period {
  /** Samples. */
  readonly lag: number
  /** −1 to 1; 1 is a sound that repeats exactly. */
  readonly clarity: number
}

/** A peak nearly as high as the highest is the period, later ones its multiples (McLeod and Wyvill). Lower than their 0.9: noise and
 * stretched partials cost the first peak a little, and an octave too high is put right by the partials. */
const NEARLY = 0.85

/**
 * Likeness of the sound with itself, shifted: the normalised square difference of P. McLeod and G. Wyvill, A Smarter Way to Find
 * Pitch, Proc. ICMC 2005, by way of the power spectrum.
 * @param samples a power of two of them
 * @returns for each shift up to half the window, −1 to 1
 */
export function likeness(samples: Float32Array): Float64Array {
  const size = samples.length
  const re = new Float64Array(2 * size)
  const im = new Float64Array(2 * size)
  const mean = samples.reduce((sum, value) => sum + value, 0) / size
  for (let i = 0; i < size; i++) re[i] = samples[i]! - mean
  let energy = 2 * re.reduce((sum, value) => sum + value * value, 0)
  const x = re.slice(0, size)
  transform(re, im)
  for (let i = 0; i < re.length; i++) {
    re[i] = re[i]! ** 2 + im[i]! ** 2
    im[i] = 0
  }
  transform(re, im)
  const result = new Float64Array(size / 2)
  for (let lag = 0; lag < result.length; lag++) {
    result[lag] = energy > 1e-12 ? 2 * re[lag]! / (2 * size) / energy : 0
    energy -= x[lag]! ** 2 + x[size - 1 - lag]! ** 2
  }
  return result
}

/** The highest point of every stretch above zero after the first fall below it. */
function peaks(likenesses: Float64Array): number[] {
  const found: number[] = []
  let i = likenesses.findIndex(value => value < 0)
  if (i < 0) return found
  for (let best = 0; i < likenesses.length - 1; i++) {
    if (likenesses[i]! > 0 && (best === 0 || likenesses[i]! > likenesses[best]!)) best = i
    if (best && likenesses[i + 1]! <= 0) {
      found.push(best)
      best = 0
    }
  }
  return found
}

/** Top of the parabola through a point and its neighbours. */
function refine(values: Float64Array, index: number): Period {
  const [left, top, right] = [values[index - 1]!, values[index]!, values[index + 1]!]
  const curve = left - 2 * top + right
  const shift = curve < 0 ? (left - right) / (2 * curve) : 0
  return { lag: index + shift, clarity: top - (left - right) * shift / 4 }
}

/** The shortest time after which the sound is nearly as like itself as it ever is; null for silence and for sounds that never are. */
export function findPeriod(samples: Float32Array, shortest: number, longest: number): Period | null {
  const values = likeness(samples)
  const found = peaks(values).filter(lag => lag >= shortest && lag <= Math.min(longest, values.length - 2))
  if (!found.length) return null
  const highest = found.reduce((top, lag) => Math.max(top, values[lag]!), 0)
  return refine(values, found.find(lag => values[lag]! >= NEARLY * highest)!)
}
