import { octavesWord } from './words'

/** How far a string used as a reference can be believed: as it was all along, tuned a moment ago, or still to be moved itself. */
export type Trust = 'unchanged' | 'done' | 'waiting'

/** Another string to tune by. */
export interface StringReference {
  readonly kind: 'string'
  readonly string: number
  /** Stopped there; 0 open. */
  readonly fret: number
  /** Where the string being tuned is stopped itself; 0 open. Only against an open string. */
  readonly ownFret: number
  /** Octaves by which the reference then sounds higher than the string being tuned. */
  readonly octaves: number
  readonly trust: Trust
}

/** No string to tune by: a sounded pitch. */
export interface ToneReference { readonly kind: 'tone', readonly pitch: string }
export type Reference = StringReference | ToneReference

/** A string as it stands, to tune another by. */
export interface Standing { readonly string: number, readonly midi: number, readonly trust: Trust }

/** Octaves further apart than this are hard to match by ear, frets beyond the twelfth seldom in tune (ours). */
const MOST_OCTAVES = 2
const LAST_FRET = 12

const TRUST_COST: Record<Trust, number> = { unchanged: 0, done: 1, waiting: 4 }

/** Ease of a reference, smaller is easier (ours): an open string first, then one stopped while a hand turns the peg; unison before octaves;
 * neighbours before far strings. */
export const referenceCost = (reference: StringReference, own: number): number => TRUST_COST[reference.trust]
  + (reference.fret ? 1.5 + 0.15 * reference.fret : 0) + (reference.ownFret ? 2.5 + 0.15 * reference.ownFret : 0)
  + Math.abs(reference.octaves) + 0.1 * Math.abs(reference.string - own)

/** Every unison and octave by which `own` can be brought to `target`. */
function candidates(target: number, standing: readonly Standing[]): StringReference[] {
  const frets = Array.from({ length: LAST_FRET + 1 }, (_, fret) => fret)
  const octavesTo = (difference: number) => (difference % 12 === 0 && Math.abs(difference) <= 12 * MOST_OCTAVES ? difference / 12 : null)
  return standing.flatMap(({ string, midi, trust }) => frets.flatMap((fret): StringReference[] => {
    const stopped = octavesTo(midi + fret - target)
    const ownStopped = fret === 0 ? null : octavesTo(midi - target - fret)
    return [
      ...(stopped === null ? [] : [{ kind: 'string' as const, string, fret, ownFret: 0, octaves: stopped, trust }]),
      ...(ownStopped === null ? [] : [{ kind: 'string' as const, string, fret: 0, ownFret: fret, octaves: ownStopped, trust }]),
    ]
  }))
}

/** The easiest reference to bring string `own` to the sounding pitch `target`; null where no string gives one. */
export function bestReference(own: number, target: number, standing: readonly Standing[]): StringReference | null {
  const others = candidates(target, standing.filter(each => each.string !== own))
  return others.reduce<StringReference | null>((best, each) =>
    (best === null || referenceCost(each, own) < referenceCost(best, own) - 1e-9 ? each : best), null)
}

/** "it sounds an octave below string 4 open", "at its fret 7 it sounds like string 5 open". */
export function referenceText(reference: Reference): string {
  if (reference.kind === 'tone') return `take ${reference.pitch.replace('#', '♯').replace('b', '♭')} from a reference tone`
  const { string, fret, ownFret, octaves } = reference
  const own = ownFret ? `stopped at its fret ${ownFret} it sounds` : 'it sounds'
  const interval = octaves === 0 ? 'the same as' : octavesWord(-octaves).replace('up', 'above').replace('down', 'below')
  return `${own} ${interval} string ${string} ${fret ? `at fret ${fret}` : 'open'}`
}
