import { STEPS, fifthsOf, midiOfText, pitchText, type Spelling } from '../score/pitch'
import type { OpenString } from '../score/types'

/** Half steps above C of the twelve places that the line of fifths offers from G♭ (−6) to A♯ (10): two spellings of each black key. */
const NAMED: readonly Spelling[] = STEPS.flatMap(step => [-1, 0, 1].map(alter => ({ step, alter, octave: 4 })))
const BLACK = new Set([1, 3, 6, 8, 10])
const chromaOf = (pitch: Spelling): number => ((midiOfText(pitchText(pitch)) % 12) + 12) % 12
const CHOICES = NAMED.filter(pitch => BLACK.has(chromaOf(pitch)) === (pitch.alter !== 0))

/** Twelve neighbours on the line of fifths that hold all white keys: from all flats (−6 to 5) to all sharps (−1 to 10). */
const WINDOWS: readonly number[] = [-6, -5, -4, -3, -2, -1]
/** D lies in the middle of the white keys. */
const CENTRE = 2

const inWindow = (low: number) => (chroma: number): Spelling =>
  CHOICES.find(each => chromaOf(each) === chroma && fifthsOf(each) >= low && fifthsOf(each) <= low + 11)!

/** Smaller is plainer: notes close together on the line of fifths, then close to its middle. */
function strain(spelled: readonly Spelling[]): readonly [number, number] {
  const places = spelled.map(fifthsOf)
  return [Math.max(...places) - Math.min(...places), places.reduce((sum, place) => sum + Math.abs(place - CENTRE), 0)]
}

/**
 * Spells pitches that belong together by their sound alone, so that equal sounds are spelled equally: white keys plainly, black keys
 * by the notes beside them (E B E G♯ B E, D G D G B♭ D); where flats and sharps serve alike, flats, as players say a guitar tuned down.
 * @param midis whole MIDI numbers
 */
export function spellTogether(midis: readonly number[]): Spelling[] {
  if (midis.length === 0) return []
  const chromas = [...new Set(midis.map(midi => ((midi % 12) + 12) % 12))]
  const best = WINDOWS.map(low => ({ low, strain: strain(chromas.map(inWindow(low))) }))
    .reduce((a, b) => ((b.strain[0] - a.strain[0] || b.strain[1] - a.strain[1]) < 0 ? b : a))
  return midis.map((midi) => {
    const spelling = inWindow(best.low)(((midi % 12) + 12) % 12)
    return { ...spelling, octave: 4 + (midi - midiOfText(pitchText(spelling))) / 12 }
  })
}

/** The same strings in the one spelling that their sound has; where short strings start is kept. */
export function respell(strings: readonly OpenString[]): OpenString[] {
  const spelled = spellTogether(strings.map(({ pitch }) => midiOfText(pitch)))
  return strings.map((open, index) => ({ ...open, pitch: pitchText(spelled[index]!) }))
}
