/**
 * The filters that give a vibrating loop its decay and its exact pitch. A loop of N samples, a loss filter and a first-order
 * all-pass is an extended Karplus–Strong string (D. Jaffe and J. Smith, Extensions of the Karplus-Strong Plucked-String
 * Algorithm, Computer Music Journal 7:2, 1983); the loss filter is the one-pole of V. Välimäki, J. Huopaniemi, M. Karjalainen
 * and Z. Jánosy, Physical Modeling of Plucked String Instruments with Application to Real-Time Sound Synthesis, JAES 44:5, 1996.
 */

/** y[n] = gain · (1 − pole) · x[n] + pole · y[n − 1] */
export interface LossFilter { readonly gain: number, readonly pole: number }

/** A pole beyond this muffles the loop altogether. */
const HIGHEST_POLE = 0.9
/** Below one, so that rounding can't make the loop grow. */
const HIGHEST_GAIN = 0.99999

/** Gain of one turn of the loop which loses 60 dB in the given time. */
const turnGain = (frequency: number, seconds: number): number => 10 ** (-3 / (frequency * seconds))

/**
 * @param omega the fundamental, in radians a sample
 * @param frequency the fundamental in hertz
 * @param seconds until the fundamental has lost 60 dB
 * @param high a higher frequency, in radians a sample, which loses as much in `highSeconds`
 */
export function lossFilter(omega: number, frequency: number, seconds: number, high: number, highSeconds: number): LossFilter {
  // |H(high)| / |H(omega)| = ratio, solved for the pole: (1 − r²)p² − 2(cos ω − r² cos ω_h)p + (1 − r²) = 0.
  const ratio = turnGain(frequency, highSeconds) / turnGain(frequency, seconds)
  const a = 1 - ratio ** 2
  const b = Math.cos(omega) - ratio ** 2 * Math.cos(high)
  const pole = a < 1e-9 ? 0 : Math.min(HIGHEST_POLE, (b - Math.sqrt(Math.max(0, b ** 2 - a ** 2))) / a)
  const loss = (1 - pole) / Math.sqrt(1 - 2 * pole * Math.cos(omega) + pole ** 2)
  return { gain: Math.min(HIGHEST_GAIN, turnGain(frequency, seconds) / loss), pole }
}

/** Samples by which the one-pole delays a sine. */
export const poleDelay = (pole: number, omega: number): number => Math.atan2(pole * Math.sin(omega), 1 - pole * Math.cos(omega)) / omega

/** y[n] = coefficient · (x[n] − y[n − 1]) + x[n − 1], delaying a sine of `omega` by exactly `delay` samples (0.5 to 1.5). */
export const allPass = (delay: number, omega: number): number =>
  Math.sin((1 - delay) * omega / 2) / Math.sin((1 + delay) * omega / 2)

export interface LoopTuning { readonly samples: number, readonly coefficient: number }

/** Whole samples and all-pass for a loop whose fundamental is exactly `omega`, the delay of the loss filter made good. */
export function loopTuning(omega: number, pole: number): LoopTuning {
  const wanted = 2 * Math.PI / omega - poleDelay(pole, omega)
  const samples = Math.max(1, Math.floor(wanted - 0.5))
  return { samples, coefficient: allPass(wanted - samples, omega) }
}
