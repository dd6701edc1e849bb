import type { Heard } from './detect'

/** What is shown: calm, so from several windows. */
export interface Pitch {
  readonly hertz: number
  /** Several windows agree: the needle stands. */
  readonly isSteady: boolean
  /** When it was last heard, seconds. */
  readonly time: number
}

interface Reading { readonly hertz: number, readonly time: number }

export interface Followed {
  readonly readings: readonly Reading[]
  /** Kept for a while after the string has died away, so that it can be read. */
  readonly pitch: Pitch | null
}

export const NOTHING_HEARD: Followed = { readings: [], pitch: null }

/** Readings that are weighed together, and how old they may be, seconds. */
const MOST_READINGS = 5
const OLDEST = 0.6
/** So many must agree for a pitch to be shown; a single wrong window never shows. */
const FEWEST = 3
/** Cents from the middle one within which readings are of the same note, and within which they stand. */
const SAME_NOTE = 60
const STANDING = 3
/** Seconds for which a pitch stays after its string was last heard. */
const KEPT = 3

export const centsBetween = (hertz: number, other: number): number => 1200 * Math.log2(hertz / other)

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Takes in what one window gave.
 * @param time seconds, on any clock that only goes forward */
export function follow(before: Followed, heard: Heard | null, time: number): Followed {
  const recent = before.readings.filter(reading => time - reading.time < OLDEST)
  const readings = heard ? [...recent, { hertz: heard.hertz, time }].slice(-MOST_READINGS) : recent
  const kept = before.pitch && time - before.pitch.time < KEPT ? before.pitch : null
  if (!heard || readings.length < FEWEST) return { readings, pitch: kept }
  const middle = median(readings.map(reading => reading.hertz))
  const same = readings.filter(({ hertz }) => Math.abs(centsBetween(hertz, middle)) < SAME_NOTE)
  if (same.length < FEWEST) return { readings, pitch: kept }
  const hertz = median(same.map(reading => reading.hertz))
  const isSteady = same.filter(reading => Math.abs(centsBetween(reading.hertz, hertz)) < STANDING).length >= FEWEST
  return { readings, pitch: { hertz, isSteady, time } }
}
