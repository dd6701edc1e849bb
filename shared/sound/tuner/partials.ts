/** One partial of a sound. */
export interface Partial {
  readonly number: number
  readonly hertz: number
  /** Square of its amplitude. */
  readonly power: number
}

/** A spectrum at any frequency, from two windows a little apart in time: how far the phase turns between them tells the frequency. */
export interface Ear {
  /** Amplitude squared at a frequency. */
  readonly power: (hertz: number) => number
  /** The sine nearest to a frequency; true to a small part of a cent, where no other is near.
   * By phase difference: J. Flanagan and R. Golden, Phase Vocoder, Bell System Technical Journal 45, 1966. */
  readonly sine: (hertz: number) => { readonly hertz: number, readonly power: number }
  /** The farthest from a frequency that `sine` can tell. */
  readonly reach: number
}

const windows = new Map<number, Float64Array>()
/** Hann's, scaled to sum one, so that a sine of amplitude 1 measures 1/4. */
function hann(size: number): Float64Array {
  const known = windows.get(size)
  if (known) return known
  const made = Float64Array.from({ length: size }, (_, i) => (1 - Math.cos(2 * Math.PI * (i + 0.5) / size)) / size)
  windows.set(size, made)
  return made
}

export function listenTo(samples: Float32Array, rate: number): Ear {
  const hop = samples.length / 4
  const window = hann(samples.length - hop)

  function spectrum(hertz: number, from: number): readonly [re: number, im: number] {
    const omega = 2 * Math.PI * hertz / rate
    const [turnRe, turnIm] = [Math.cos(omega), Math.sin(omega)]
    let [re, im, cos, sin] = [0, 0, 1, 0]
    for (let i = 0; i < window.length; i++) {
      const value = window[i]! * samples[from + i]!
      re += value * cos
      im -= value * sin
      const next = cos * turnRe - sin * turnIm
      sin = cos * turnIm + sin * turnRe
      cos = next
    }
    return [re, im]
  }

  function sine(hertz: number) {
    const [a, b] = spectrum(hertz, 0)
    const [c, d] = spectrum(hertz, hop)
    const turned = Math.atan2(d * a - c * b, c * a + d * b) - 2 * Math.PI * hertz * hop / rate
    const off = turned - 2 * Math.PI * Math.round(turned / (2 * Math.PI))
    return { hertz: hertz + off * rate / (2 * Math.PI * hop), power: Math.hypot(a, b) * Math.hypot(c, d) }
  }

  const power = (hertz: number): number => {
    const [re, im] = spectrum(hertz, hop)
    return re * re + im * im
  }
  return { power, sine, reach: rate / (2 * hop) }
}
