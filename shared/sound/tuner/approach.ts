import type { Verdict } from './verdict'

/** From where a string last came near its pitch. */
export type Approach = 'above' | 'below' | null

/** A hard pluck starts sharp and settles by a few cents; only farther off was the string itself too high. */
const CLEARLY_ABOVE = 15
const CLEARLY_BELOW = 4

/** Takes in a reading that stands. A string loosened onto its pitch slips on at the nut and goes flat: it should end from below. */
export function approachOf(before: Approach, verdict: Verdict): Approach {
  if (verdict.kind === 'high' && verdict.cents > CLEARLY_ABOVE) return 'above'
  return verdict.kind === 'low' && verdict.cents < -CLEARLY_BELOW ? 'below' : before
}

export const FROM_ABOVE = 'Loosened onto its pitch it may slip. Go a little below and come up, so that it stays.'
