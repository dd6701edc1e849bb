import { add, compare, divide, equals, fraction, isLess, multiply, subtract, toNumber, type Fraction } from '../score/fraction'
import { beatOf, isCompound, meterLength } from '../score/time'
import type { Base, Meter } from '../score/types'

/** An event as far as beaming cares. */
export interface Beamable {
  readonly start: Fraction
  readonly duration: Fraction
  readonly base: Base
  readonly dots: number
  readonly tuplet: boolean
  readonly rest: boolean
}

/** Indices of events under one beam, and those after which only the first beam goes on. */
export interface BeamGroup {
  readonly members: readonly number[]
  readonly breaks: readonly number[]
}

const floor = (value: Fraction): number => Math.floor(toNumber(value))

/** Irregular meters in their usual groups of units (common practice). */
const GROUPS: Readonly<Record<number, readonly number[]>> = { 5: [3, 2], 7: [2, 2, 3], 8: [3, 3, 2] }

/** Starts of the beats of a meter, in whole notes from the bar line. */
function beats(meter: Meter): readonly Fraction[] {
  const irregular = meter.unit >= 8 && !isCompound(meter) ? GROUPS[meter.beats] : undefined
  if (irregular) {
    let units = 0
    return irregular.map((size) => {
      const at = fraction(units, meter.unit)
      units += size
      return at
    })
  }
  const beat = meter.unit >= 8 && !isCompound(meter) ? fraction(meter.beats <= 3 ? meter.beats : 2, meter.unit) : beatOf(meter)
  const count = Math.ceil(toNumber(divide(meterLength(meter), beat)))
  return Array.from({ length: count }, (_, index) => multiply(beat, fraction(index)))
}

/**
 * Wider groups that plain eighths may fill under one beam: half a bar of 4/4, a whole bar of 2/4 and 3/4
 * (Gould, Behind Bars, "Beaming according to the metre": in 4/4 never across the middle).
 */
function wide(meter: Meter): Fraction | null {
  if (meter.unit === 4 && meter.beats % 4 === 0) return fraction(1, 2)
  if (meter.unit === 4 && (meter.beats === 2 || meter.beats === 3)) return meterLength(meter)
  return null
}

/** Which beat, or which wider group, a time belongs to; counting goes on beyond the bar's end. */
function groupAt(at: Fraction, meter: Meter, starts: readonly Fraction[]): number {
  const length = meterLength(meter)
  const bar = floor(divide(at, length))
  const rest = subtract(at, multiply(length, fraction(bar)))
  const within = starts.findLastIndex(start => compare(start, rest) <= 0)
  return bar * starts.length + within
}

const isBeamable = (event: Beamable): boolean => event.base >= 8 && !event.rest
const isPlainEighth = (event: Beamable): boolean => event.base === 8 && event.dots === 0 && !event.tuplet

function runs(events: readonly Beamable[], groupOf: (event: Beamable) => number): number[][] {
  const found: number[][] = []
  events.forEach((event, index) => {
    if (!isBeamable(event)) return
    const last = found.at(-1)
    const previous = last?.at(-1)
    if (last && previous === index - 1 && groupOf(events[previous]!) === groupOf(event)) last.push(index)
    else found.push([index])
  })
  return found
}

/** Inner breaks: notes of 1/32 and shorter show each eighth. */
function breaksOf(members: readonly number[], events: readonly Beamable[], offset: Fraction): number[] {
  if (!members.some(index => events[index]!.base >= 32)) return []
  const eighth = fraction(1, 8)
  return members.flatMap((index, place) => {
    const event = events[index]!
    const end = divide(add(add(event.start, event.duration), offset), eighth)
    return end.d === 1 && place < members.length - 1 ? [place] : []
  })
}

/**
 * Beams of one voice. Rests, quarters and longer, and the borders of beats end a beam.
 * @param offset where the bar begins in its meter: zero, or what a pickup leaves out
 */
export function beamsOf(events: readonly Beamable[], meter: Meter, offset: Fraction): readonly BeamGroup[] {
  const starts = beats(meter)
  const byBeat = (event: Beamable): number => groupAt(add(event.start, offset), meter, starts)
  const span = wide(meter)
  const widely = (event: Beamable): number => floor(divide(add(event.start, offset), span!))
  const wideRuns = span ? runs(events, widely).filter(run => run.every(index => isPlainEighth(events[index]!)) && isWhole(run, events, span, offset)) : []
  const taken = new Set(wideRuns.flat())
  const beatRuns = runs(events.map((event, index) => taken.has(index) ? { ...event, rest: true } : event), byBeat)
  return [...wideRuns, ...beatRuns].filter(run => run.length > 1).sort((a, b) => a[0]! - b[0]!)
    .map(members => ({ members, breaks: breaksOf(members, events, offset) }))
}

/** In 2/4 and 3/4 the beam spans the bar only when eighths fill it; half a 4/4 bar may begin or end with a rest. */
function isWhole(run: readonly number[], events: readonly Beamable[], span: Fraction, offset: Fraction): boolean {
  if (equals(span, fraction(1, 2)) && run.length > 1) {
    const first = add(events[run[0]!]!.start, offset)
    return divide(first, fraction(1, 8)).d === 1
  }
  const length = run.reduce((total, index) => add(total, events[index]!.duration), fraction(0))
  return !isLess(length, span)
}
