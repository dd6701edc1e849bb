import { add, compare, equals, fraction, isLess, subtract, ZERO, type Fraction } from '../score/fraction'
import { beatOf, isCompound, plainLength } from '../score/time'
import { BASES, type Length, type Meter } from '../score/types'

type Plain = Pick<Length, 'base' | 'dots'>

const PLAIN: readonly Plain[] = BASES.map(base => ({ base, dots: 0 }))

const isMultiple = (value: Fraction, of: Fraction): boolean => (value.n * of.d) % (value.d * of.n) === 0

/**
 * Rests that fill a bar from one moment to another, the longest first that starts on a multiple of itself, so that beats stay
 * visible; in 6/8, 9/8 and 12/8 whole beats as dotted rests (common practice). Null where no written length comes out even.
 */
export function restsBetween(from: Fraction, to: Fraction, meter: Meter): readonly Plain[] | null {
  const span = subtract(to, from)
  const single = [...PLAIN, ...BASES.map(base => ({ base, dots: 1 }))].find(length => equals(plainLength(length), span))
  if (equals(from, ZERO) && single) return [single]
  const rests: Plain[] = []
  let at = from
  while (isLess(at, to)) {
    const next = longestAt(at, subtract(to, at), meter)
    if (!next) return null
    rests.push(next)
    at = add(at, plainLength(next))
  }
  return rests
}

function longestAt(at: Fraction, room: Fraction, meter: Meter): Plain | undefined {
  const fits = (length: Plain): boolean => compare(plainLength(length), room) <= 0
  if (!isCompound(meter)) return PLAIN.find(length => fits(length) && isMultiple(at, plainLength(length)))
  const beat = beatOf(meter)
  const dotted: Plain = { base: (meter.unit / 2) as Plain['base'], dots: 1 }
  if (isMultiple(at, beat) && fits(dotted)) return dotted
  return PLAIN.find(length => fits(length) && isMultiple(at, plainLength(length)) && compare(plainLength(length), fraction(1, meter.unit)) <= 0)
}
