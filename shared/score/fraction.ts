/**
 * Exact musical time. A fraction counts whole notes: {n: 1, d: 4} is a quarter.
 * Always in lowest terms with a positive denominator, so that equal values are equal objects by content.
 */
export interface Fraction { readonly n: number, readonly d: number }

const gcd = (a: number, b: number): number => (b === 0 ? Math.abs(a) : gcd(b, a % b))

/** @throws RangeError when a part is not a safe whole number or the denominator is zero. */
export function fraction(n: number, d = 1): Fraction {
  if (!Number.isSafeInteger(n) || !Number.isSafeInteger(d) || d === 0) throw new RangeError(`no fraction: ${n}/${d}`)
  const divisor = gcd(n, d) * Math.sign(d)
  return { n: n / divisor + 0, d: d / divisor }
}

export const ZERO: Fraction = { n: 0, d: 1 }
export const ONE: Fraction = { n: 1, d: 1 }

export const add = (a: Fraction, b: Fraction): Fraction => fraction(a.n * b.d + b.n * a.d, a.d * b.d)
export const subtract = (a: Fraction, b: Fraction): Fraction => fraction(a.n * b.d - b.n * a.d, a.d * b.d)
export const multiply = (a: Fraction, b: Fraction): Fraction => fraction(a.n * b.n, a.d * b.d)
export const divide = (a: Fraction, b: Fraction): Fraction => fraction(a.n * b.d, a.d * b.n)
export const compare = (a: Fraction, b: Fraction): number => a.n * b.d - b.n * a.d
export const equals = (a: Fraction, b: Fraction): boolean => a.n === b.n && a.d === b.d
export const isLess = (a: Fraction, b: Fraction): boolean => compare(a, b) < 0
export const min = (a: Fraction, b: Fraction): Fraction => (isLess(b, a) ? b : a)
export const max = (a: Fraction, b: Fraction): Fraction => (isLess(a, b) ? b : a)
export const sum = (parts: readonly Fraction[]): Fraction => parts.reduce(add, ZERO)
export const toNumber = (a: Fraction): number => a.n / a.d
