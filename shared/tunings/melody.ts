import { capoOffset, soundingMidi } from '../score/sounding'
import { lengthOf } from '../score/time'
import { contextOf } from '../score/context'
import { toNumber } from '../score/fraction'
import { midiOf, parsePitch } from '../score/pitch'
import type { Key, Score, VoiceName } from '../score/types'
import { chromaOf, movedKey, tonicOf } from './board'

/** A tune as the ranking hears it. */
export interface Melody {
  /** Sounding pitches with how much each counts, in whole notes. */
  readonly notes: readonly { readonly midi: number, readonly length: number }[]
  /** As it sounds. */
  readonly key: Key
  /** Bass notes that its harmony asks for, chroma with weight. */
  readonly roots: readonly { readonly chroma: number, readonly weight: number }[]
}

/** Tonic, fourth and fifth: what any tune asks for whose harmony is not known (common practice). */
export const usualRoots = (key: Key): Melody['roots'] => [0, 5, 7].map(degree => ({ chroma: chromaOf(tonicOf(key) + degree), weight: 1 }))

/** Reads a melody typed as pitches, "D4 F#4 A4:2 B4", a length in beats after a colon; commas and bar lines are allowed between. */
export function parseMelody(text: string, key: Key): Melody | { readonly problem: string, readonly field: string } {
  const words = text.split(/[\s,|]+/).filter(Boolean)
  if (words.length === 0) return { field: 'melody', problem: 'Type the melody as pitches: D4 F#4 A4.' }
  const notes: { midi: number, length: number }[] = []
  for (const [index, word] of words.entries()) {
    const [name = '', beats = '1'] = word.split(':')
    const pitch = parsePitch(name)
    const length = Number(beats) / 4
    if (!pitch) return { field: 'melody', problem: `Note ${index + 1}: “${word}” is no pitch. Write a letter, # or b, and the octave: D4, F#4, Bb3.` }
    if (!(length > 0 && length <= 16)) return { field: 'melody', problem: `Note ${index + 1}: “${beats}” is no length. Write beats after a colon: D4:2.` }
    notes.push({ midi: midiOf(pitch), length })
  }
  return { notes, key, roots: usualRoots(key) }
}

/** Sounding notes of one voice, the highest or lowest of each event. */
function notesOf(score: Score, name: VoiceName, pick: 'highest' | 'lowest'): Melody['notes'] {
  return score.bars.flatMap(({ voices }) => {
    const voice = voices[name]
    return (voice?.events ?? []).flatMap((event) => {
      const midis = event.notes.filter(note => !note.dead).map(note => Math.round(soundingMidi(score.head, note)))
      if (midis.length === 0 || !voice) return []
      return [{ midi: pick === 'highest' ? Math.max(...midis) : Math.min(...midis), length: toNumber(lengthOf(event.length, voice.tuplets)) }]
    })
  })
}

/** An arrangement's own tune: the top of its upper voice, in the key of its first bar; the harmony's roots from the thumb's voice. */
export function melodyOf(score: Score): Melody | { readonly problem: string, readonly field: string } {
  const upper = notesOf(score, 'upper', 'highest')
  const notes = upper.length ? upper : notesOf(score, 'lower', 'highest')
  if (notes.length === 0) return { field: 'melody', problem: 'This arrangement has no notes yet.' }
  const key = movedKey(contextOf(score, 0).key, capoOffset(score.head))
  const bass = upper.length ? notesOf(score, 'lower', 'lowest') : []
  const weights = Array.from({ length: 12 }, (_, chroma) => bass.filter(each => chromaOf(each.midi) === chroma).reduce((sum, each) => sum + each.length, 0))
  const roots = weights.flatMap((weight, chroma) => (weight > 0 ? [{ chroma, weight }] : []))
  return { notes, key, roots: roots.length ? roots : usualRoots(key) }
}
