import { ZERO, divide, equals, fraction, isLess, multiply, subtract, type Fraction } from '../../score/fraction'
import { plainLength } from '../../score/time'
import { BASES, type Base } from '../../score/types'

/** A length as written. */
export interface Written { readonly base: Base, readonly dots: number }
/** Lengths that follow each other (tied, or rests), within a tuplet where one is needed. */
export interface Spelled { readonly pieces: readonly Written[], readonly ratio: { readonly actual: number, readonly normal: number } | null }

const SINGLE: readonly (Written & { readonly length: Fraction })[] = BASES
  .flatMap(base => [0, 1, 2, 3].map(dots => ({ base, dots, length: plainLength({ base, dots }) })))
  .sort((a, b) => (isLess(a.length, b.length) ? 1 : -1))

/** The one written length of this value; null where it takes more than one. Not more than two dots are chosen. */
export function single(length: Fraction): Written | null {
  const found = SINGLE.find(each => each.dots < 3 && equals(each.length, length))
  return found ? { base: found.base, dots: found.dots } : null
}

/** Longest first, with one dot at most; null where the value is finer than a 64th or no multiple of it. */
function several(length: Fraction): Written[] | null {
  const pieces: Written[] = []
  let rest = length
  while (isLess(ZERO, rest)) {
    const next = SINGLE.find(each => each.dots < 2 && !isLess(rest, each.length))
    if (!next || pieces.length > 64) return null
    pieces.push({ base: next.base, dots: next.dots })
    rest = subtract(rest, next.length)
  }
  return pieces
}

/** The power of two that a tuplet of so many stands in the time of: 3 in 2, 5 and 7 in 4. */
const normalFor = (actual: number): number => 2 ** Math.floor(Math.log2(actual))

const oddPart = (value: number): number => (value % 2 === 0 ? oddPart(value / 2) : value)

/** Writes a value down; null where notes and rests down to the 64th, with a tuplet, can't say it. */
export function spelledLength(length: Fraction): Spelled | null {
  const one = single(length)
  if (one) return { pieces: [one], ratio: null }
  const actual = oddPart(length.d)
  if (actual === 1) {
    const pieces = several(length)
    return pieces && { pieces, ratio: null }
  }
  if (actual > 63) return null
  const ratio = { actual, normal: normalFor(actual) }
  const inside = divide(length, fraction(ratio.normal, ratio.actual))
  const alone = single(inside)
  const pieces = alone ? [alone] : several(inside)
  return pieces && { pieces, ratio }
}

/** The nearest value below that can be written without tuplets: a multiple of a 64th, at least one. */
export const nearestWritable = (length: Fraction): Fraction => fraction(Math.max(1, Math.floor(length.n * 64 / length.d)), 64)

/** True when a length of this writing, inside tuplets of this ratio, takes this time. */
export const isWrittenAs = (written: Written, ratio: { readonly actual: number, readonly normal: number } | null, length: Fraction): boolean =>
  equals(ratio ? multiply(plainLength(written), fraction(ratio.normal, ratio.actual)) : plainLength(written), length)
