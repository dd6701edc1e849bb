import { contextsOf, type Context } from '../score/context'
import { isEqual } from '../score/equal'
import type { Key, Meter, Score, Tempo } from '../score/types'
import { engraveBar, isSameContext } from './bar'
import { carriedOut } from './links'
import { CLEF_WIDTH, KEY_ACCIDENTAL_WIDTH, METER_WIDTH, REPEAT_WIDTH } from './metrics'
import { barPlaces } from '../score/numbers'
import type { BarNotation } from './types'

/** What stands before a bar's first note, and the lines at its ends. */
export interface Role {
  /** First in its system: clef, key and bar number. */
  readonly opens: boolean
  readonly key: Key | null
  /** Signature that a change to none cancels; before other signatures naturals are not needed (Gould, "Key signatures"). */
  readonly cancels: number
  readonly meter: Meter | null
  /** Stated here and not the one that held before. */
  readonly tempo: Tempo | null
  readonly repeatStart: boolean
  readonly right: 'single' | 'double' | 'final' | 'repeat'
}

/** A bar's place in a system. x and widths in points from the system's left edge. */
export interface PlacedBar {
  readonly index: number
  readonly x: number
  readonly width: number
  readonly prefix: number
  readonly role: Role
}

export interface System {
  readonly bars: readonly PlacedBar[]
  readonly width: number
  /** Highest and lowest y that its staff reaches. */
  readonly top: number
  readonly bottom: number
}

/** Notation of the bar at `index`, with what surrounds it. */
export const notationAt = (score: Score, index: number): BarNotation => engraveBar(score.bars[index]!, {
  context: contextsOf(score)[index]!, carried: carriedOut(score.bars[index - 1]), pickup: barPlaces(score)[index]!.pickup,
})

const sameMeter = (a: Meter, b: Meter): boolean => a.beats === b.beats && a.unit === b.unit

/** Role of the bar at `index`, first in its system or not. */
export function roleAt(score: Score, index: number, opens: boolean): Role {
  const contexts = contextsOf(score)
  const here = contexts[index]!
  const before = contexts[index - 1]
  const bar = score.bars[index]!
  const keyChanges = before !== undefined && before.key.fifths !== here.key.fifths
  const isLast = index === score.bars.length - 1
  return {
    opens,
    key: opens || keyChanges ? here.key : null,
    cancels: keyChanges && here.key.fifths === 0 ? before.key.fifths : 0,
    meter: !before || !sameMeter(before.meter, here.meter) ? here.meter : null,
    tempo: bar.tempo && !(before && isEqual(before.tempo, bar.tempo)) ? bar.tempo : null,
    repeatStart: !!bar.repeatStart,
    right: bar.repeatEnd ? 'repeat' : isLast ? 'final' : contexts[index + 1]!.key.fifths !== here.key.fifths ? 'double' : 'single',
  }
}

/** Naturals that a change to no signature shows. */
export const cancelledCount = (role: Role): number => Math.abs(role.cancels)

/** Points that clef, key, meter and repeat sign take before a bar's body. */
export function prefixWidth(role: Role): number {
  const accidentals = (role.key ? Math.abs(role.key.fifths) : 0) + cancelledCount(role)
  return (role.opens ? CLEF_WIDTH : 0) + (accidentals ? accidentals * KEY_ACCIDENTAL_WIDTH + 6 : 0)
    + (!role.opens && accidentals ? 8 : 0)
    + (role.meter ? METER_WIDTH : 0) + (role.repeatStart ? REPEAT_WIDTH : 0)
}

const roleKeys = (role: Role): string =>
  [role.opens, role.key?.fifths, role.cancels, role.meter && `${role.meter.beats}/${role.meter.unit}`, role.tempo && Object.values(role.tempo).join('-'), role.repeatStart, role.right].join(' ')
export const isSameRole = (a: Role, b: Role): boolean => a === b || roleKeys(a) === roleKeys(b)

/** How far a system may be pressed together, as a part of its wished width. */
const TIGHTEST = 0.78
/** A last system shorter than this part of the line keeps its natural width. */
const RAGGED = 0.82

interface Measure { readonly body: number, readonly least: number, readonly inner: number, readonly opening: number }

/**
 * First bar of every system. Optimal over the whole piece, as for text (Knuth and Plass 1981; for music Hegazy and
 * Gourlay 1988): the sum of the squared strains is least, a last system may stay short.
 */
export function breakIntoSystems(measures: readonly Measure[], width: number): readonly number[] {
  const best: { cost: number, from: number }[] = [{ cost: 0, from: 0 }]
  for (let end = 1; end <= measures.length; end++) {
    let found = { cost: Infinity, from: end - 1 }
    let body = 0
    let inner = 0
    for (let from = end - 1; from >= 0; from--) {
      body += measures[from]!.body
      const room = width - measures[from]!.opening - inner
      const strain = room / body
      if (strain < TIGHTEST && from < end - 1) break
      const badness = end === measures.length && strain > 1 ? 0 : (strain > 1 ? strain - 1 : 3 * (1 - strain)) ** 2
      const cost = best[from]!.cost + badness
      if (cost < found.cost) found = { cost, from }
      inner += measures[from]!.inner
    }
    best.push(found)
  }
  const starts: number[] = []
  for (let end = measures.length; end > 0; end = best[end]!.from) starts.unshift(best[end]!.from)
  return starts
}

/** Bars of one system in a line of this width: justified, a short last one natural. */
export function fillSystem(score: Score, from: number, to: number, width: number): System {
  const bars = Array.from({ length: to - from }, (_, offset) => {
    const role = roleAt(score, from + offset, offset === 0)
    return { index: from + offset, role, prefix: prefixWidth(role), notation: notationAt(score, from + offset) }
  })
  const fixed = bars.reduce((sum, bar) => sum + bar.prefix, 0)
  const wish = bars.reduce((sum, bar) => sum + bar.notation.body, 0)
  const isShort = to === score.bars.length && fixed + wish < width * RAGGED
  const stretch = isShort ? 1 : (width - fixed) / wish
  let x = 0
  const placed = bars.map(({ index, role, prefix, notation }) => {
    const bar = { index, x, width: Math.round((prefix + notation.body * stretch) * 100) / 100, prefix, role }
    x += bar.width
    return bar
  })
  return { bars: placed, width: x, top: Math.min(0, ...bars.map(bar => bar.notation.top)), bottom: Math.max(40, ...bars.map(bar => bar.notation.bottom)) }
}

/** All systems of a score for a line of `width` points. */
export function layOut(score: Score, width: number): readonly System[] {
  const measures = score.bars.map((_, index) => {
    const { body, least } = notationAt(score, index)
    return { body, least, inner: prefixWidth(roleAt(score, index, false)), opening: prefixWidth(roleAt(score, index, true)) }
  })
  const starts = breakIntoSystems(measures, width)
  return starts.map((from, index) => fillSystem(score, from, starts[index + 1] ?? score.bars.length, width))
}

/** Do equal bars look equal in both scores? Their contexts may be different objects, as after a new title. */
export function contextsDrawAlike(a: Score, b: Score): boolean {
  const [left, right] = [contextsOf(a), contextsOf(b)]
  if (left === right) return true
  let last: { a: Context, b: Context } | null = null
  return right.every((context, index) => {
    const other = left[index]
    if (!other || (last?.a === other && last.b === context)) return !!other
    last = { a: other, b: context }
    return isSameContext(other, context)
  })
}
