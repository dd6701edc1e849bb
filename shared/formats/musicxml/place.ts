import { isFretOnNeck, openMidi } from '../../score/sounding'
import type { Head } from '../../score/types'

/** Where a pitch that says no string could be played. */
export interface Place { readonly string: number, readonly fret: number }

function placesOf(head: Head, midi: number, taken: ReadonlySet<number>): Place[] {
  return head.strings
    .map((_, index) => ({ string: index + 1, fret: midi - openMidi(head, index + 1) }))
    .filter(({ string, fret }) => !taken.has(string) && isFretOnNeck(head, string, fret))
    .sort((a, b) => a.fret - b.fret)
}

/**
 * Places for pitches that sound together, each on a string of its own at the lowest frets that can be had: as many
 * pitches as possible are placed, then the sum of frets is least. It is a start for the player, no fingering.
 * @param pitches sounding (MIDI), in the order of the answer; null where no string is left
 */
export function placeChord(head: Head, pitches: readonly number[], taken: ReadonlySet<number>): (Place | null)[] {
  // More pitches than strings can't all be had; the search stays small.
  const wanted = pitches.slice(0, head.strings.length)
  const { places } = best(head, wanted, 0, taken)
  return pitches.map((_, index) => places[index] ?? null)
}

interface Answer { readonly places: readonly (Place | null)[], readonly missing: number, readonly frets: number }
const DONE: Answer = { places: [], missing: 0, frets: 0 }

function best(head: Head, wanted: readonly number[], index: number, used: ReadonlySet<number>): Answer {
  const midi = wanted[index]
  if (midi === undefined) return DONE
  const options: (Place | null)[] = [...placesOf(head, midi, used), null]
  const answers = options.map((place): Answer => {
    const rest = best(head, wanted, index + 1, place ? new Set([...used, place.string]) : used)
    return { places: [place, ...rest.places], missing: rest.missing + (place ? 0 : 1), frets: rest.frets + (place?.fret ?? 0) }
  })
  return answers.reduce((a, b) => (b.missing < a.missing || (b.missing === a.missing && b.frets < a.frets) ? b : a))
}
