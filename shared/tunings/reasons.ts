import { pitchLabel } from '../score/pitch'
import type { Key } from '../score/types'
import { tonicOf } from './board'
import { loadSentence } from './cautions'
import { noteInKey } from './chords'
import type { Suggestion } from './rank'
import { spellTogether } from './spelling'
import { capitalised, listed } from './words'

const percent = (part: number): string => `${Math.round(part * 100)} percent`
const named = (chromas: readonly number[], key: Key): string => listed(chromas.map(chroma => noteInKey(chroma, key)))

function openReason({ fit }: Suggestion): string {
  if (fit.openPitches.length === 0) return 'No note of the melody lies on an open string.'
  const pitches = listed(spellTogether(fit.openPitches).map(pitchLabel))
  return `${capitalised(percent(fit.open))} of the melody lies on open strings: ${pitches}.`
}

function rangeReason({ fit }: Suggestion): string {
  if (fit.lost > 0) return `${capitalised(percent(fit.lost))} of the melody is beyond this neck.`
  return fit.range > 0.999 ? 'All of it lies on the melody strings.' : `${capitalised(percent(1 - fit.range))} of it falls to the bass strings or beyond the twelfth fret.`
}

function bassReason({ fit, key }: Suggestion): string {
  const parts = [
    fit.openRoots.length ? `${named(fit.openRoots, key)} ${fit.openRoots.length === 1 ? 'is' : 'are'} open` : '',
    fit.heldRoots.length ? `${named(fit.heldRoots, key)} within four frets` : '',
    fit.wantingRoots.length ? `${named(fit.wantingRoots, key)} out of reach below the melody` : '',
  ].filter(Boolean)
  return parts.length ? `Of its bass notes ${listed(parts)}.` : ''
}

/** Why a tuning suits a melody, in words: open strings, range, bass, retuning, load. */
export const reasonsFor = (suggestion: Suggestion): readonly string[] => [
  openReason(suggestion), rangeReason(suggestion), bassReason(suggestion), suggestion.plan.summary.split('. ')[0]!.replace(/\.?$/, '.'),
  suggestion.load ? `${capitalised(loadSentence(suggestion.load))}.` : '',
].filter(Boolean)

/** "D major, capo 2, fingered as C major". */
export function settingText({ key, written, capo }: Suggestion): string {
  const name = (each: Key) => `${noteInKey(tonicOf(each), each)} ${each.mode}`
  return capo ? `${name(key)}, capo ${capo}, fingered as ${name(written)}` : name(key)
}
