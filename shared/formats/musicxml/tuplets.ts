import { ZERO, add, compare, fraction, multiply, type Fraction } from '../../score/fraction'
import { plainLength } from '../../score/time'
import type { Base, Tuplet } from '../../score/types'
import type { RawNote, RawRatio } from './readNote'

/** Tuplets of one voice of one bar while its events are read in order. */
export interface TupletReader {
  /** Ids of the tuplets that the event stands in, outermost first; null where ratio and brackets don't agree.
   * @param base the event's own note length */
  readonly enter: (note: RawNote, base: Base, dots: number) => readonly string[]
  /** Closes what ends with the event. */
  readonly leave: (note: RawNote) => void
  /** A tuplet made for one stretch of events, such as a gap that needs one. */
  readonly own: (ratio: { readonly actual: number, readonly normal: number }, base: Base) => readonly string[]
  readonly declared: () => readonly Tuplet[]
}

interface Open { readonly tuplet: Tuplet, readonly level: number, filled: Fraction, readonly bracketed: boolean }

const product = (open: readonly Open[]): Fraction => open.reduce((value, { tuplet }) => multiply(value, fraction(tuplet.actual, tuplet.normal)), fraction(1))

export function createTupletReader(newId: () => string): TupletReader {
  const declared: Tuplet[] = []
  let open: Open[] = []

  const declare = (actual: number, normal: number, base: Base): Tuplet => {
    const tuplet = { id: newId(), actual, normal, base }
    declared.push(tuplet)
    return tuplet
  }
  const isFull = ({ tuplet, filled }: Open) => compare(filled, fraction(tuplet.actual, tuplet.base)) >= 0

  /** What is left of the note's ratio inside the tuplets already open. */
  const remaining = (ratio: RawRatio): Fraction => {
    const outer = product(open)
    return fraction(ratio.actual * outer.d, ratio.normal * outer.n)
  }

  const startBracketed = (note: RawNote, ratio: RawRatio, base: Base) => {
    for (const start of [...note.tupletStarts].sort((a, b) => a.level - b.level)) {
      const rest = remaining(ratio)
      // Without figures of its own a bracket has the note's ratio: 3 in 2, not its lowest terms.
      const plain = open.length ? { actual: rest.n, normal: rest.d } : { actual: ratio.actual, normal: ratio.normal }
      const { actual, normal, base: unit } = start.detail ?? { ...plain, base: ratio.base ?? base }
      open.push({ tuplet: declare(actual, normal, unit), level: start.level, filled: ZERO, bracketed: true })
    }
  }

  return {
    enter(note, base, dots) {
      const { ratio } = note
      if (!ratio) {
        open = []
        return []
      }
      open = open.filter(each => each.bracketed || !isFull(each))
      startBracketed(note, ratio, base)
      const rest = remaining(ratio)
      if (compare(rest, fraction(1)) !== 0) {
        if (open.length) open = []
        open.push({ tuplet: declare(ratio.actual, ratio.normal, ratio.base ?? base), level: 0, filled: ZERO, bracketed: false })
      }
      const length = plainLength({ base, dots })
      for (const each of open) each.filled = add(each.filled, length)
      return open.map(({ tuplet }) => tuplet.id)
    },
    leave(note) {
      open = open.filter(each => !note.tupletStops.includes(each.level))
    },
    own: (ratio, base) => [declare(ratio.actual, ratio.normal, base).id],
    declared: () => declared,
  }
}
