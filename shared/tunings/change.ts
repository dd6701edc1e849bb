import { STANDARD_TUNING } from '../score/create'
import { midiOfText } from '../score/pitch'
import type { Head, OpenString } from '../score/types'
import { OTHER_TUNINGS, STANDARD, stringsOf } from './catalogue'
import { capitalised, counted, numberWord, octavesWord } from './words'

/** Half steps by which each string is tuned away from standard at its own place, string 1 first. Instruments without six strings have no standard here: null. */
export function changesFromStandard(head: Pick<Head, 'strings'>): readonly number[] | null {
  if (head.strings.length !== STANDARD_TUNING.length) return null
  return head.strings.map((open, index) => midiOfText(open.pitch) - midiOfText(STANDARD_TUNING[index]!.pitch))
}

/** "+1", "−4" with a true minus sign; "" where nothing changed. */
export const changeText = (halfSteps: number): string =>
  (halfSteps === 0 ? '' : halfSteps > 0 ? `+${halfSteps}` : `−${-halfSteps}`)

const midisOf = (strings: readonly OpenString[]): number[] => strings.map(({ pitch }) => midiOfText(pitch))

/**
 * What a tuning is compared with unless another is named: standard for six strings; for other numbers the usual tuning nearest in
 * pitch among the catalogue's instruments with as many; null where the catalogue has none.
 */
export function usualReference(strings: readonly OpenString[]): readonly OpenString[] | null {
  const away = (other: readonly OpenString[]) =>
    midisOf(other).reduce((sum, midi, index) => sum + Math.abs(midi - midiOfText(strings[index]!.pitch)), 0)
  const usual = strings.length === STANDARD.pitches.length ? [STANDARD] : OTHER_TUNINGS
  const candidates = usual.map(stringsOf).filter(other => other.length === strings.length)
  return candidates.length === 0 ? null : candidates.reduce((best, each) => (away(each) < away(best) ? each : best))
}

/** A string whose notes are the same by name, so that what is known there holds here. */
export interface Likeness {
  /** The reference instrument's string. */
  readonly string: number
  /** How many octaves above it this string sounds; below: negative. */
  readonly octaves: number
}

export interface StringChange {
  readonly string: number
  readonly from: string
  readonly to: string
  /** Half steps, which are frets; up is positive. */
  readonly halfSteps: number
  /** The same string first where it is unchanged, then the nearest in pitch, then in place. */
  readonly like: readonly Likeness[]
}

/** Reference strings with the same pitch class as `midi` on string `string`. */
function likenesses(midi: number, string: number, reference: readonly number[]): Likeness[] {
  return reference.map((other, index) => ({ string: index + 1, octaves: (midi - other) / 12 }))
    .filter(each => Number.isInteger(each.octaves))
    .sort((a, b) => Math.abs(a.octaves) - Math.abs(b.octaves) || Math.abs(a.string - string) - Math.abs(b.string - string))
}

/**
 * What becomes of each string between two tunings of the same instrument, string 1 first.
 * @throws RangeError when they have different numbers of strings or a pitch is none
 */
export function compareTunings(reference: readonly OpenString[], strings: readonly OpenString[]): readonly StringChange[] {
  if (reference.length !== strings.length) throw new RangeError(`${strings.length} strings can't be compared with ${reference.length}`)
  const from = midisOf(reference)
  return strings.map((open, index) => ({
    string: index + 1, from: reference[index]!.pitch, to: open.pitch,
    halfSteps: midiOfText(open.pitch) - from[index]!, like: likenesses(midiOfText(open.pitch), index + 1, from),
  }))
}

/** "itself", "string 4, an octave up; string 6, two octaves up", "no string of the other tuning". */
export function likeText({ string, halfSteps, like }: StringChange): string {
  const others = like.filter(each => each.string !== string).map(each => `string ${each.string}, ${octavesWord(each.octaves)}`)
  const all = halfSteps === 0 ? ['itself', ...others] : like.map(each => `string ${each.string}, ${octavesWord(each.octaves)}`)
  return all.length ? all.join('; ') : 'no string of the other tuning'
}

const movedWord = (halfSteps: number): string => `${halfSteps > 0 ? 'up' : 'down'} ${Math.abs(halfSteps) === 1 ? 'a half step' : counted(Math.abs(halfSteps), 'half step')}`

/** "Three strings down, one up a half step, two as they were": the amount is named where all that move that way move alike. */
export function changeSentence(changes: readonly StringChange[]): string {
  const moved = changes.filter(each => each.halfSteps !== 0)
  if (moved.length === 0) return 'Every string as it was'
  const group = (direction: 1 | -1): string[] => {
    const own = moved.filter(each => Math.sign(each.halfSteps) === direction)
    if (own.length === 0) return []
    const alike = own.every(each => each.halfSteps === own[0]!.halfSteps)
    return [alike ? movedWord(own[0]!.halfSteps) : direction > 0 ? 'up' : 'down'].map(move => `${numberWord(own.length)} ${move}`)
  }
  const still = changes.length - moved.length
  const parts = [...group(-1), ...group(1), ...(still ? [`${numberWord(still)} as ${still === 1 ? 'it was' : 'they were'}`] : [])]
  const [head, ...rest] = parts
  const noun = head!.startsWith('one ') ? 'string' : 'strings'
  return capitalised([head!.replace(/^(\S+)/, `$1 ${noun}`), ...rest].join(', '))
}
