import { add, compare, equals, isLess, type Fraction } from '../score/fraction'
import { contextsOf } from '../score/context'
import { meterLength } from '../score/time'
import type { Score } from '../score/types'

export interface BarPlace {
  /** As printed and spoken. A pickup is bar 0; the second half of a bar split by a repeat shares the number of the first (common practice). */
  readonly number: number
  /** The bar is the end of a longer one: a pickup, or the second half of a split bar. Its beats are counted from its end. */
  readonly pickup: boolean
}

const places = new WeakMap<Score['bars'], readonly BarPlace[]>()

/** Number and place of every bar, by position. */
export function barPlaces(score: Score): readonly BarPlace[] {
  const known = places.get(score.bars)
  if (known) return known
  const contexts = contextsOf(score)
  let number = 0
  let short: Fraction | null = null
  const found = score.bars.map((bar, index) => {
    const whole = meterLength(contexts[index]!.meter)
    const own = bar.length
    const isShort = own !== undefined && isLess(own, whole)
    const completes = isShort && short !== null && compare(add(short, own), whole) <= 0
    const pickup = isShort && (index === 0 || completes)
    if (!pickup) number += 1
    short = isShort && !pickup ? own : completes && short && !equals(add(short, own), whole) ? add(short, own) : null
    return { number, pickup }
  })
  places.set(score.bars, found)
  return found
}

/** Printed numbers of all bars, by position. */
export const barNumbers = (score: Score): readonly number[] => barPlaces(score).map(place => place.number)
