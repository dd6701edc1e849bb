import { pitchLabel, spell } from '../score/pitch'
import { soundingMidi } from '../score/sounding'
import type { Head } from '../score/types'
import type { Carried, LeftNote } from './carry'
import { listed } from './words'

const label = (head: Head, { note }: LeftNote, fifths: number): string => pitchLabel(spell(Math.round(soundingMidi(head, note)), fifths))

/** Why, as a clause that follows the pitch: "B1 is lower than any string now goes". */
function because(pitch: string, { reason, otherString }: LeftNote): string {
  switch (reason) {
    case 'low': return `${pitch} is lower than any string now goes`
    case 'high': return `no string has ${pitch} on its neck`
    case 'harmonic': return `no string sounds ${pitch} as a harmonic`
    case 'bound': return `the note that ${pitch} is slurred, tied or plucked with can’t go along`
    case 'taken': return `string ${otherString} has ${pitch}, but is in use`
    case 'reach': return `string ${otherString} has ${pitch}, out of the hand’s reach`
    case 'slur': return `string ${otherString} has ${pitch}, but a slur or tie passes there`
  }
}

/**
 * "String 6, fret 0: E2 is lower than any string now goes. Left there, it sounds D2."
 * @param before the head as it is; @param after with the new strings; @param fifths of the sounding key
 */
export function leftSentence(left: LeftNote, before: Head, after: Head, fifths: number): string {
  const { string, fret, harmonic } = left.note
  const place = `String ${string}, ${harmonic ? 'harmonic at ' : ''}fret ${fret}`
  const consequence = string > after.strings.length ? `String ${string} is not there any more.` : `Left there, it sounds ${label(after, left, fifths)}.`
  return `${place}: ${because(label(before, left, fifths), left)}. ${consequence}`
}

/** "84 of 96 notes keep their sound: 60 as they are, 20 at another fret, 4 on another string. 12 notes have no place and sound otherwise." */
export function carrySentence({ counts, left }: Pick<Carried, 'counts' | 'left'>): string {
  const { notes, same, fret, string } = counts
  if (notes === 0) return 'There are no notes yet.'
  const parts = [same && `${same} where they are`, fret && `${fret} at another fret`, string && `${string} on another string`].filter(part => typeof part === 'string')
  const kept = left.length === 0 ? `${notes === 1 ? 'The one note keeps its' : `All ${notes} notes keep their`} sound` : `${notes - left.length} of ${notes} notes keep their sound`
  const rest = left.length === 0 ? '' : ` ${left.length === 1 ? '1 note has' : `${left.length} notes have`} no place and ${left.length === 1 ? 'sounds' : 'sound'} otherwise.`
  return `${kept}${parts.length ? `: ${listed(parts)}` : ''}.${rest}`
}

/** "58 of 96 notes would sound otherwise." */
export function soundSentence({ notes, changed }: { readonly notes: number, readonly changed: number }): string {
  if (notes === 0) return 'There are no notes yet.'
  if (changed === 0) return 'No note would sound otherwise.'
  return `${changed} of ${notes} ${notes === 1 ? 'note' : 'notes'} would sound otherwise.`
}
