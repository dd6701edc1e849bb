/** A plucked string by adding its partials: made apart from the project's own strings, to test what listens to them. */
export interface Pluck {
  /** Hertz of the first partial. */
  readonly first: number
  readonly rate: number
  readonly seconds: number
  /** B: partial n is n · f · √(1 + B n²) (N. Fletcher and T. Rossing, The Physics of Musical Instruments, 2nd ed. 1998, §2.18). */
  readonly stretch: number
  /** Where it is plucked, from the bridge, as a part of the string; partials with a node there are missing (§2.8 there). */
  readonly place?: number
  /** Signal to noise of the first half second, in decibels. */
  readonly snr?: number
  readonly seed?: number
  /** Silence before, in seconds. */
  readonly before?: number
  /** A small microphone hears little below this, hertz (second order). */
  readonly lowCut?: number
  /** Amplitude left of the odd partials, as when a finger brushes the string's middle. */
  readonly odd?: number
  /** Root mean square of the first half second. */
  readonly level?: number
}

/** Uniform numbers in 0 to 1 by M. O'Neill's and others' well known mulberry32 (public domain, T. Ettinger). */
export function random(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6D2B79F5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

/** White noise of root mean square 1 (G. Box and M. Muller, Annals of Mathematical Statistics 29, 1958). */
export const gaussian = (next: () => number): number => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next())

export const rms = (samples: Float32Array): number => Math.sqrt(samples.reduce((sum, value) => sum + value * value, 0) / samples.length)

/** Amplitude of partial n of an ideal string pulled aside at a point and let go: sin(nπp)/n² (Fletcher and Rossing §2.8), heard as
 * force at the bridge: times n. */
const amplitude = (n: number, place: number): number => Math.abs(Math.sin(n * Math.PI * place)) / n

export function pluck({ first, rate, seconds, stretch, place = 0.17, snr, seed = 1, before = 0, lowCut = 0, odd = 1, level = 0.1 }: Pluck): Float32Array {
  const next = random(seed)
  const length = Math.round((before + seconds) * rate)
  const start = Math.round(before * rate)
  const sound = new Float32Array(length)
  const base = first / Math.sqrt(1 + stretch)
  for (let n = 1; n <= 40; n++) {
    const hertz = n * base * Math.sqrt(1 + stretch * n * n)
    if (hertz > 0.45 * rate) break
    const cut = lowCut ? (hertz / lowCut) ** 2 / (1 + (hertz / lowCut) ** 2) : 1
    // Times to fall by 60 dB: shorter the higher (common practice; roughly those of a steel string).
    const decay = Math.log(1000) / (6 / (1 + hertz / 600))
    const phase = 2 * Math.PI * next()
    const loss = Math.exp(-decay / rate)
    const [turnRe, turnIm] = [loss * Math.cos(2 * Math.PI * hertz / rate), loss * Math.sin(2 * Math.PI * hertz / rate)]
    let [re, im] = [Math.cos(phase), Math.sin(phase)].map(value => value * cut * (n % 2 ? odd : 1) * amplitude(n, place)) as [number, number]
    for (let i = start; i < length; i++) {
      sound[i]! += im;
      [re, im] = [re * turnRe - im * turnIm, re * turnIm + im * turnRe]
    }
  }
  const scale = level / rms(sound.subarray(start, start + Math.min(length - start, rate / 2)))
  const noise = snr === undefined ? 0 : level * 10 ** (-snr / 20)
  return sound.map(value => value * scale + (noise && noise * gaussian(next)))
}
