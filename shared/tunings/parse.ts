import { midiOf, parsePitch, pitchText } from '../score/pitch'
import type { OpenString } from '../score/types'
import { OPEN_RANGE } from '../score/validate'
import { STANDARD } from './catalogue'

export type ParsedTuning = { readonly strings: readonly OpenString[] } | { readonly problem: string, readonly string?: number }

/**
 * Reads a tuning as players write it, low string first: "C2 G2 D3 G3 C4 D4", or letters alone, "C G D G C D" or "CGDGCD".
 * Six letters alone take the octave nearest the standard guitar's string; other numbers of strings need octaves.
 */
export function parseTuning(text: string): ParsedTuning {
  const words = text.trim().split(/[\s,–-]+/).flatMap(splitRun).filter(Boolean)
  if (words.length < 4 || words.length > 10) return { problem: `Name 4 to 10 strings, the lowest first; ${words.length} ${words.length === 1 ? 'was' : 'were'} read.` }
  const pitches: string[] = []
  for (const [index, word] of words.entries()) {
    const string = words.length - index
    const pitch = /\d$/.test(word) ? parsePitch(word) : nearStandard(word, words.length === 6 ? index : -1)
    if (!pitch && !/\d$/.test(word) && parsePitch(`${word}4`)) return { problem: `String ${string}: give “${word}” its octave, as in ${word}3; letters alone do for six strings.`, string }
    if (!pitch) return { problem: `String ${string}: “${word}” is no pitch. Write a letter, # or b, and the octave: C2, F#3, Bb3.`, string }
    const midi = midiOf(pitch)
    if (midi < OPEN_RANGE.low || midi > OPEN_RANGE.high) return { problem: `String ${string}: ${word} is outside A0 to C7.`, string }
    pitches.push(pitchText(pitch))
  }
  return { strings: pitches.map(pitch => ({ pitch })).reverse() }
}

/** "DADF#AD" is six pitches, "Bb" one. In a run of small letters a b is the note B, since "gb" could be either. */
function splitRun(word: string): string[] {
  if (/^[A-Ga-g](##|bb|[#♯b♭])?\d?$/.test(word)) return [word]
  const parts = word.match(/[A-G](?:##|bb|[#♯b♭])?\d?|[a-g][#♯♭]?\d?/g) ?? []
  return parts.join('') === word ? parts : [word]
}

/** The pitch of this letter nearest to the standard guitar's string at `index` (0 = lowest); of two as near the lower, which is slacker. */
function nearStandard(letter: string, index: number) {
  const home = STANDARD.pitches[index]
  const target = home && parsePitch(home)
  if (!target) return null
  const candidates = [-1, 0, 1].map(shift => parsePitch(`${letter}${target.octave + shift}`))
  return candidates.reduce((best, each) =>
    best && each && Math.abs(midiOf(each) - midiOf(target)) >= Math.abs(midiOf(best) - midiOf(target)) ? best : each ?? best, null)
}

/** "C G D G C D", low string first, letters only. */
export const tuningLetters = (strings: readonly OpenString[]): string =>
  [...strings].reverse().map(({ pitch }) => pitch.replace(/-?\d$/, '').replaceAll('#', '♯').replaceAll('b', '♭')).join(' ')
