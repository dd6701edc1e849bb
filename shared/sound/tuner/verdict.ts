import { frequencyOf, pitchLabel, spell } from '../../score/pitch'
import { counted } from '../../tunings/words'
import { centsBetween } from './follow'

/** What the string being tuned should sound, and where it comes from; MIDI. */
export interface Aim {
  readonly string: number
  readonly target: number
  /** Where it stood before; absent where nothing is known. */
  readonly from?: number
  /** Hertz of A4. */
  readonly a4: number
}

export interface Verdict {
  /** `other` is no pitch that this string should have on its way: nothing may be turned for it. */
  readonly kind: 'in-tune' | 'low' | 'high' | 'other'
  /** From the target, positive above. */
  readonly cents: number
  /** "Up 14 cents", "In tune". */
  readonly headline: string
  /** What to do. */
  readonly advice: string
}

/** Cents that count as in tune (ours: the tuner is true to 2). */
export const IN_TUNE = 3
/** Half steps beyond the way from old to new pitch at which a string may still be met: slack, or gone past. */
const BELOW_THE_WAY = 6
const ABOVE_THE_WAY = 3

/** A4 may be set so far, hertz: what ensembles have used since 1850 or so (common practice), baroque pitch apart. */
export const A4 = { lowest: 430, usual: 440, highest: 450 } as const

/** Whatever was typed or kept, as an A4 that can be used. */
export const readA4 = (value: unknown): number =>
  (typeof value === 'number' && value >= A4.lowest && value <= A4.highest ? value : A4.usual)

/** "D2", "F♯3": the nearest note. */
export const noteAt = (midi: number): string => pitchLabel(spell(midi, 0))

export const midiAt = (hertz: number, a4: number): number => 69 + 12 * Math.log2(hertz / a4)

function other(hertz: number, { string, target, a4 }: Aim): Verdict {
  const midi = midiAt(hertz, a4)
  const cents = (midi - target) * 100
  const isOctaveAbove = Math.abs(cents - 1200) < 40
  return {
    kind: 'other', cents, headline: `This is ${noteAt(midi)}`,
    advice: isOctaveAbove
      ? `An octave above ${noteAt(target)}: another string, or a harmonic. Pluck string ${string} alone, open, away from its middle. Turn nothing for this note.`
      : `Too far from ${noteAt(target)} for string ${string}. Is another string sounding? Turn nothing for this note.`,
  }
}

const size = (cents: number): string => {
  const halfSteps = Math.round(Math.abs(cents) / 100)
  return halfSteps > 1 || Math.abs(cents) >= 95 ? `about ${counted(halfSteps, 'half step')}` : 'a little'
}

/** How a sounding pitch stands to the one wanted, in words that need no colour. */
export function judge(hertz: number, aim: Aim): Verdict {
  const midi = midiAt(hertz, aim.a4)
  const from = aim.from ?? aim.target
  const [low, high] = [Math.min(from, aim.target) - BELOW_THE_WAY, Math.max(from, aim.target) + ABOVE_THE_WAY]
  if (midi < low || midi > high) return other(hertz, aim)
  const cents = centsBetween(hertz, frequencyOf(aim.target, aim.a4))
  if (Math.abs(cents) <= IN_TUNE) return { kind: 'in-tune', cents, headline: 'In tune', advice: 'Leave it so.' }
  const whole = Math.round(Math.abs(cents))
  const distance = `${whole} ${whole === 1 ? 'cent' : 'cents'}`
  return cents < 0
    ? { kind: 'low', cents, headline: `Up ${distance}`, advice: `Too low. Tighten ${size(cents)}, slowly.` }
    : { kind: 'high', cents, headline: `Down ${distance}`, advice: `Too high. Loosen ${size(cents)}, go below, then come up.` }
}
