import { momentOf, placeOf, type EditorState } from '#shared/editor'
import { lanesOfBar, type Lane } from '#shared/ring'
import { compare } from '#shared/score/fraction'
import { noteName, spell } from '#shared/score/pitch'
import { capoOffset, fretFromNut, raisedKey, soundingMidi } from '#shared/score/sounding'
import { VOICE_NAMES, type Note, type Score } from '#shared/score/types'
import type { NeckPlace } from '#shared/tunings/neck'

/** What the neck shows at the cursor. */
export interface NeckState {
  /** Signature of the sounding key. */
  readonly fifths: number
  readonly sounding: NeckPlace | null
  readonly ringing: readonly NeckPlace[]
}

/** The notes with these ids, looked for in the bar and back from it; a ring does not reach further than its string lasts. */
function notesBefore(score: Score, index: number, wanted: ReadonlySet<string>): readonly Note[] {
  const found: Note[] = []
  for (let at = index; at >= 0 && found.length < wanted.size; at--) {
    const bar = score.bars[at]
    for (const name of VOICE_NAMES) for (const event of bar?.voices[name]?.events ?? []) found.push(...event.notes.filter(note => wanted.has(note.id)))
  }
  return found
}

export function neckAt({ score, selection }: EditorState): NeckState {
  const { index, context, voice, at, note } = placeOf(score, selection.cursor)
  const { fifths } = raisedKey(context.key, capoOffset(score.head))
  const moment = momentOf(voice, at)
  const place = (each: Note): NeckPlace =>
    ({ string: each.string, fret: fretFromNut(score.head, each), name: noteName(spell(soundingMidi(score.head, each), fifths)) })
  const sounds = (lane: Lane) => lane.noteId !== note?.id && compare(lane.from, moment) <= 0 && compare(moment, lane.to) < 0
  const rings = new Set(lanesOfBar(score, index).filter(sounds).map(lane => lane.noteId))
  return { fifths, sounding: note && !note.dead ? place(note) : null, ringing: rings.size ? notesBefore(score, index, rings).map(place) : [] }
}
