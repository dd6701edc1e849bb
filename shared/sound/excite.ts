/** What a pluck puts into the loop, one turn long. */
export interface Excitation {
  /** Of the string's length, from the bridge, 0 to ½. */
  readonly place: number
  /** 0 to 1: how much of the high partials a nail or a hard stroke gives. */
  readonly brightness: number
  /** Root mean square of the turn. */
  readonly level: number
  /** Makes the noise of the touch; equal seeds sound equal. */
  readonly seed: number
}

/** Part of the excitation that is the noise of flesh on string (ours). */
const NOISE = 0.07

/** A 32-bit linear congruential generator (Knuth, The Art of Computer Programming 2, §3.3.4), −1 to 1. */
function noise(seed: number): () => number {
  let state = seed >>> 0
  return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 31 - 1
}

/**
 * The force of an ideally plucked string on its bridge is a pulse as wide as the plucking place (Fletcher and Rossing, The Physics of
 * Musical Instruments, §2.8); smoothed by the width of finger or nail, with a little noise, without a constant part.
 */
export function excite(line: Float64Array, { place, brightness, level, seed }: Excitation): void {
  const random = noise(seed)
  const { length } = line
  const width = Math.max(1, place * length)
  for (let i = 0; i < length; i++) line[i] = (i < width ? 1 : 0) + NOISE * random()
  smooth(line, 0.35 + 0.6 * brightness)
  const mean = line.reduce((sum, value) => sum + value, 0) / length
  const power = line.reduce((sum, value) => sum + (value - mean) ** 2, 0) / length
  const scale = power > 0 ? level / Math.sqrt(power) : 0
  for (let i = 0; i < length; i++) line[i] = (line[i]! - mean) * scale
}

/** A one-pole low-pass around the loop; the second turn begins where the first ended, so that the ends meet. */
function smooth(line: Float64Array, share: number): void {
  let value = line.at(-1)!
  for (const isKept of [false, true]) {
    for (let i = 0; i < line.length; i++) {
      value += share * (line[i]! - value)
      if (isKept) line[i] = value
    }
  }
}
