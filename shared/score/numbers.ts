import { add, compare, equals, isLess, type Fraction } from './fraction'
import { contextsOf } from './context'
import { meterLength } from './time'
import type { Score } from './types'

export interface BarPlace {
  /** As printed and spoken. A pickup is bar 0; the second half of a bar split by a repeat shares the number of the first (common practice). */
  readonly number: number
  /** The bar is the end of a longer one: a pickup, or the second half of a split bar. Its beats are counted from its end. */
  readonly pickup: boolean
}

const placeOf = (number: number, pickup: boolean): BarPlace => ({ number, pickup })
const places = new WeakMap<Score['bars'], readonly BarPlace[]>()

/** Number and place of every bar, by position. */
export function barPlaces(score: Score): readonly BarPlace[] {
  const known = places.get(score.bars)
  if (known) return known
  const contexts = contextsOf(score)
  let number = 0
  let short: Fraction | null = null
  const found = score.bars.map((bar, index) => {
    const own = bar.length
    const whole = own && meterLength(contexts[index]!.meter)
    if (!own || !whole || !isLess(own, whole)) {
      short = null
      return placeOf(number += 1, false)
    }
    const together: Fraction | null = short && add(short, own)
    const completes = together !== null && compare(together, whole) <= 0
    const pickup = index === 0 || completes
    short = completes ? (equals(together, whole) ? null : together) : pickup ? null : own
    return placeOf(pickup ? number : number += 1, pickup)
  })
  places.set(score.bars, found)
  return found
}

/** Printed numbers of all bars, by position. */
export const barNumbers = (score: Score): readonly number[] => barPlaces(score).map(place => place.number)

/** A bar by the number that is printed: "Bar 2"; what stands before bar 1 is the "Pickup".
 * @param index position of the bar, from 0 */
export function barLabel(score: Score, index: number): string {
  const number = barPlaces(score)[index]?.number ?? index + 1
  return number > 0 ? `Bar ${number}` : 'Pickup'
}

/** The same within a sentence: "bar 2", "the pickup". */
export const barInWords = (score: Score, index: number): string => barLabel(score, index).replace('Pickup', 'the pickup').replace('Bar', 'bar')
