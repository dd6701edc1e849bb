import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { add, compare, divide, equals, fraction, max, min, multiply, ONE, subtract, sum, toNumber, ZERO } from '../../../shared/score/fraction'
import { fractions } from '../../support/arbitrary'

const holds = (property: fc.IRawProperty<unknown>) => fc.assert(property as fc.IProperty<unknown>)

/** The laws of an ordered field (common practice in mathematics); fast-check prints the seed of a failing run. */
describe('fractions', () => {
  it('are a commutative group under addition', () => {
    holds(fc.property(fractions, fractions, fractions, (a, b, c) => {
      expect(add(a, b)).toEqual(add(b, a))
      expect(add(add(a, b), c)).toEqual(add(a, add(b, c)))
      expect(add(a, ZERO)).toEqual(a)
      expect(subtract(add(a, b), b)).toEqual(a)
    }))
  })

  it('multiply and divide', () => {
    holds(fc.property(fractions, fractions, fractions, (a, b, c) => {
      expect(multiply(a, add(b, c))).toEqual(add(multiply(a, b), multiply(a, c)))
      expect(multiply(a, ONE)).toEqual(a)
      if (b.n !== 0) expect(divide(multiply(a, b), b)).toEqual(a)
    }))
  })

  it('are in lowest terms with a positive denominator, so that equal values are equal by content', () => {
    holds(fc.property(fractions, fc.integer({ min: -40, max: 40 }).filter(k => k !== 0), (a, k) => {
      expect(fraction(a.n * k, a.d * k)).toEqual(a)
      expect(a.d).toBeGreaterThan(0)
      expect(Object.is(fraction(0, k).n, 0)).toBe(true)
    }))
  })

  it('are ordered as their values are', () => {
    holds(fc.property(fractions, fractions, (a, b) => {
      expect(Math.sign(compare(a, b))).toBe(Math.sign(toNumber(a) - toNumber(b)) + 0)
      expect(equals(a, b)).toBe(compare(a, b) === 0)
      expect([min(a, b), max(a, b)].map(toNumber)).toEqual([Math.min(toNumber(a), toNumber(b)), Math.max(toNumber(a), toNumber(b))])
    }))
  })

  it('add up exactly where floating point does not', () => {
    expect(sum(Array.from({ length: 3 }, () => fraction(1, 12)))).toEqual(fraction(1, 4))
    expect(sum(Array.from({ length: 10 }, () => fraction(1, 10)))).toEqual(ONE)
  })

  it('refuse what is no fraction', () => {
    for (const [n, d] of [[1, 0], [0.5, 1], [1, Number.NaN], [2 ** 54, 1]] as const) expect(() => fraction(n, d)).toThrow(RangeError)
  })
})
