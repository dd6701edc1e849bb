import { ZERO, add, compare, divide, fraction, multiply, subtract, sum, type Fraction } from './fraction'
import type { Bar, Length, Meter, Tempo, Tuplet, Voice } from './types'

const plain = new Map<number, Fraction>()

/** A written length without tuplets, in whole notes: each dot adds half of what went before. */
export function plainLength({ base, dots }: Pick<Length, 'base' | 'dots'>): Fraction {
  const key = base * 8 + dots
  let length = plain.get(key)
  if (!length) plain.set(key, length = fraction(2 ** (dots + 1) - 1, base * 2 ** dots))
  return length
}

/** A written length in whole notes, inside its tuplets. */
export function lengthOf(length: Length, tuplets: readonly Tuplet[] = []): Fraction {
  return (length.tuplets ?? []).reduce((value, id) => {
    const tuplet = tuplets.find(each => each.id === id)
    return tuplet ? multiply(value, fraction(tuplet.normal, tuplet.actual)) : value
  }, plainLength(length))
}

/** Where each event of a voice starts, in whole notes from the bar line. */
export function startsOf(voice: Voice): Fraction[] {
  let at = ZERO
  return voice.events.map((event) => {
    const start = at
    at = add(at, lengthOf(event.length, voice.tuplets))
    return start
  })
}

export const voiceTotal = (voice: Voice | undefined): Fraction =>
  voice ? sum(voice.events.map(event => lengthOf(event.length, voice.tuplets))) : ZERO

export const meterLength = (meter: Meter): Fraction => fraction(meter.beats, meter.unit)

/** What a bar is meant to hold: its own length (a pickup, a short closing bar), else the meter's. */
export const barLength = (bar: Bar, meter: Meter): Fraction => bar.length ?? meterLength(meter)

const played = new WeakMap<Bar, { readonly meter: Meter, readonly length: Fraction }>()

/** Time a bar takes when played: what it is meant to hold, or its longest voice where that is overfull. Remembered, as it is asked for often. */
export function playedLength(bar: Bar, meter: Meter): Fraction {
  const known = played.get(bar)
  if (known?.meter === meter) return known.length
  const length = [bar.voices.upper, bar.voices.lower, bar.voices.middle].map(voiceTotal)
    .reduce((longest, each) => (compare(each, longest) > 0 ? each : longest), barLength(bar, meter))
  played.set(bar, { meter, length })
  return length
}

/** Over (positive) or under (negative) what the bar is meant to hold; zero when it fits. */
export const surplus = (voice: Voice | undefined, bar: Bar, meter: Meter): Fraction =>
  subtract(voiceTotal(voice), barLength(bar, meter))

/** A meter of 6, 9, 12 … eighths or sixteenths beats in threes (common practice). */
export const isCompound = (meter: Meter): boolean => meter.unit >= 8 && meter.beats > 3 && meter.beats % 3 === 0

/** The beat a player counts, in whole notes: a dotted quarter in 6/8, the unit elsewhere. */
export const beatOf = (meter: Meter): Fraction => fraction(isCompound(meter) ? 3 : 1, meter.unit)

/** Seconds of a span of whole notes at a tempo; `rate` 1 is as written. */
export const secondsOf = (span: Fraction, tempo: Tempo, rate = 1): number => {
  const beats = divide(span, plainLength(tempo))
  return (beats.n / beats.d) * (60 / (tempo.perMinute * rate))
}
