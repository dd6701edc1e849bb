import { ZERO, equals, isLess, subtract, type Fraction } from '../../score/fraction'
import { barLength, lengthOf, meterLength, plainLength } from '../../score/time'
import type { Context } from '../../score/context'
import { VOICE_NAMES, type Bar, type Length, type Score, type Voice, type VoiceName } from '../../score/types'
import { beamsOf, type BeamValue } from './beams'

/** Everything about time that writing needs, counted once: in whole ticks, since exact fractions are slow by the thousand. */
export interface BarPlan {
  readonly voices: readonly VoicePlan[]
  /** Ticks that the bar takes: what it is meant to hold, or its longest voice. */
  readonly played: number
  /** True where a reader finds the bar's own length from what stands in it. */
  readonly isLengthReadable: boolean
}

export interface VoicePlan {
  readonly name: VoiceName
  readonly voice: Voice
  /** Ticks by position of the event. */
  readonly durations: readonly number[]
  readonly total: number
  readonly beams: ReadonlyMap<number, readonly BeamValue[]>
}

export interface Plan {
  /** Ticks of a quarter: MusicXML's divisions. */
  readonly divisions: number
  readonly bars: readonly BarPlan[]
}

/** Plain lengths are few, and are computed once. */
function createLengths(): (length: Length, voice: Voice) => Fraction {
  const known = new Map<number, Fraction>()
  return (length, voice) => {
    if (length.tuplets?.length) return lengthOf(length, voice.tuplets)
    const key = length.base * 4 + length.dots
    let value = known.get(key)
    if (!value) known.set(key, value = plainLength(length))
    return value
  }
}

const gcd = (a: number, b: number): number => (b === 0 ? a : gcd(b, a % b))

/** @throws RangeError when lengths are too fine to share whole-numbered ticks. */
export function planOf(score: Score, contexts: readonly Context[]): Plan {
  const lengthIn = createLengths()
  const lengths = new Map<Voice, readonly Fraction[]>()
  let whole = 4
  const include = (denominator: number) => {
    if (whole % denominator === 0) return
    whole = whole / gcd(whole, denominator) * denominator
    if (!Number.isSafeInteger(whole)) throw new RangeError('the lengths of this score are too fine for MusicXML')
  }
  score.bars.forEach((bar, index) => {
    include(barLength(bar, contexts[index]!.meter).d)
    for (const name of VOICE_NAMES) {
      const voice = bar.voices[name]
      if (!voice) continue
      const each = voice.events.map(event => lengthIn(event.length, voice))
      for (const length of each) include(length.d)
      lengths.set(voice, each)
    }
  })
  const bars = score.bars.map((bar, index) => planBar(bar, contexts[index]!, index === 0, whole, lengths))
  return { divisions: whole / 4, bars }
}

function planBar(bar: Bar, { meter }: Context, isFirst: boolean, whole: number, lengths: ReadonlyMap<Voice, readonly Fraction[]>): BarPlan {
  const inTicks = (length: Fraction) => length.n * (whole / length.d)
  const own = barLength(bar, meter)
  const missing = isFirst ? subtract(meterLength(meter), own) : ZERO
  const offset = isLess(ZERO, missing) ? inTicks(missing) : 0
  const voices = VOICE_NAMES.flatMap((name): VoicePlan[] => {
    const voice = bar.voices[name]
    if (!voice?.events.length) return []
    const durations = (lengths.get(voice) ?? []).map(inTicks)
    const total = durations.reduce((sum, each) => sum + each, 0)
    return [{ name, voice, durations, total, beams: beamsOf(voice.events, durations, { meter, whole, offset }) }]
  })
  const played = Math.max(inTicks(own), ...voices.map(voice => voice.total))
  const isLengthReadable = played === inTicks(own) && (bar.length === undefined) === equals(own, meterLength(meter))
  return { voices, played, isLengthReadable }
}
