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
/** Half steps beyond the way from old to new pitch at which a string may still be met. Less than a major third below: the next string
 * is often a third or a fourth lower, and one must not tighten that. Farther where nobody says where the string was, above all upward, as
 * loosening breaks nothing (ours). */
const WAY = { below: 2.5, above: 3 } as const
const UNKNOWN = { below: 3.5, above: 5.5 } as const
/** Cents from which the wrong string is so near a danger that the advice names the string. */
const NAMES_STRING = 150

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
  const wanted = noteAt(target)
  return { kind: 'other', cents, headline: `This is ${noteAt(midi)}`, advice: `${reason(cents, wanted, string)} Turn nothing for this note.` }
}

function reason(cents: number, wanted: string, string: number): string {
  if (Math.abs(cents - 1200) < 40) return `An octave above ${wanted}: another string, or a harmonic. Pluck string ${string} alone, open, away from its middle.`
  if (cents < 0) return `Too far below ${wanted}: another string, or string ${string} is slack. Wind a slack one up until it comes near.`
  return `Too far above ${wanted} for string ${string}. Is another string sounding?`
}

const size = (cents: number): string => {
  const halfSteps = Math.round(Math.abs(cents) / 100)
  return halfSteps > 1 || Math.abs(cents) >= 95 ? `about ${counted(halfSteps, 'half step')}` : 'a little'
}

/** How a sounding pitch stands to the one wanted, in words that need no colour. */
export function judge(hertz: number, aim: Aim): Verdict {
  const midi = midiAt(hertz, aim.a4)
  const from = aim.from ?? aim.target
  const reach = aim.from === undefined ? UNKNOWN : WAY
  if (midi < Math.min(from, aim.target) - reach.below || midi > Math.max(from, aim.target) + reach.above) return other(hertz, aim)
  const cents = centsBetween(hertz, frequencyOf(aim.target, aim.a4))
  if (Math.abs(cents) <= IN_TUNE) return { kind: 'in-tune', cents, headline: 'In tune', advice: 'Leave it so.' }
  const whole = Math.round(Math.abs(cents))
  const distance = `${whole} ${whole === 1 ? 'cent' : 'cents'}`
  return cents < 0
    ? { kind: 'low', cents, headline: `Up ${distance}`, advice: `Too low. ${cents < -NAMES_STRING ? `If this is string ${aim.string}, tighten` : 'Tighten'} ${size(cents)}, slowly.` }
    : { kind: 'high', cents, headline: `Down ${distance}`, advice: `Too high. Loosen ${size(cents)}, go below, then come up.` }
}
