import { midiOf, parsePitch, pitchText } from '../score/pitch'
import type { OpenString } from '../score/types'
import { OPEN_RANGE } from '../score/validate'
import { respell } from './spelling'

/** A tuning's address is its sounding open pitches from string N to string 1: "c2-g2-d3-g3-c4-d4". Every possible tuning has one,
 * and every sound has only one: other spellings lead to it. */

/** The one address of these strings (string 1 first, valid pitches), "s" for sharp, "b" for flat. */
export const slugOf = (strings: readonly OpenString[]): string =>
  respell(strings).map(({ pitch }) => pitch.toLowerCase().replaceAll('#', 's')).reverse().join('-')

export type ReadSlug
  = | { readonly kind: 'tuning', readonly strings: readonly OpenString[], readonly slug: string }
    | { readonly kind: 'redirect', readonly slug: string }
    | { readonly kind: 'impossible', readonly problem: string, readonly field: string }

const impossible = (field: string, problem: string): ReadSlug => ({ kind: 'impossible', field, problem })

/** "fs3", "f#3", "F♯3" → "F#3"; the first letter is the note, so "bb3" is B flat and "b3" is B. */
const asPitch = (word: string): string => word.slice(0, 1).toUpperCase() + word.slice(1).toLowerCase().replace(/^s+/, signs => '#'.repeat(signs.length))

/**
 * Reads an address. `tuning`: as it should be written; `redirect`: the same sound is at `slug`;
 * `impossible`: no instrument here has it, and `problem` says why, `field` where ("strings", "string 5").
 */
export function readSlug(text: string): ReadSlug {
  const words = text.split('-')
  if (words.some(word => word === '')) return impossible('strings', 'The address names a string that has no pitch. Write one pitch for each string with a hyphen between, like d2-g2-d3-g3-b3-d4.')
  if (words.length < 4 || words.length > 10) return impossible('strings', `An instrument here has 4 to 10 strings; the address names ${words.length}.`)
  const pitches: string[] = []
  for (const [index, word] of words.entries()) {
    const field = `string ${words.length - index}`
    const pitch = parsePitch(asPitch(word))
    if (!pitch) return impossible(field, `String ${words.length - index}: “${word}” is no pitch. Write a letter, s or b, and the octave: c2, fs3, bb3.`)
    const midi = midiOf(pitch)
    if (midi < OPEN_RANGE.low) return impossible(field, `String ${words.length - index}: ${pitchText(pitch)} is too low to be heard as a pitch; the lowest here is A0.`)
    if (midi > OPEN_RANGE.high) return impossible(field, `String ${words.length - index}: ${pitchText(pitch)} is higher than any string bears; the highest here is C7.`)
    pitches.push(pitchText(pitch))
  }
  const strings = respell(pitches.map(pitch => ({ pitch })).reverse())
  const slug = slugOf(strings)
  return slug === text ? { kind: 'tuning', strings, slug } : { kind: 'redirect', slug }
}
