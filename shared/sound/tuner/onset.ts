/** Waiting for a string to be plucked, while another may still ring. */
export interface Quiet {
  /** The least loudness of late. */
  readonly floor: number
  readonly isPlucked: boolean
}

/** A pluck is this much louder than what rang before (ours, 3.5 dB); below `SILENT` nothing rings that could be mistaken. */
const LOUDER = 1.5
const SILENT = 0.001
/** The floor follows slowly upward, so that a slow swell of noise is no pluck. */
const FOLLOWS = 1.02

/** Root mean square of the newest samples. */
export function levelOf(samples: Float32Array, newest = 4096): number {
  const tail = samples.subarray(Math.max(0, samples.length - newest))
  return Math.sqrt(tail.reduce((sum, value) => sum + value * value, 0) / Math.max(1, tail.length))
}

/** Takes in the loudness of one look; `null` starts waiting. Once plucked it stays so. */
export function awaitPluck(before: Quiet | null, level: number): Quiet {
  if (!before) return { floor: level, isPlucked: level < SILENT }
  if (before.isPlucked) return before
  return { floor: Math.min(level, before.floor * FOLLOWS), isPlucked: level < SILENT || level > LOUDER * before.floor }
}
