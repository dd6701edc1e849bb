import { VOICE_NAMES, type LinkKind, type Note, type Score, type VoiceName } from '../../score/types'

/** Links of a score by note. A link whose note to arrive at is not there is incomplete and in neither map. */
export interface Links {
  readonly leaving: ReadonlyMap<Note, LinkKind>
  readonly arriving: ReadonlyMap<Note, LinkKind>
}

interface Placed { readonly note: Note, readonly at: number }

const isSamePlace = (a: Note, b: Note): boolean => a.fret === b.fret && a.harmonic?.partial === b.harmonic?.partial

/** A link aims at the next note of its string and voice; a tie only at the very next event and the same place. */
function arrives(from: Placed, to: Placed): boolean {
  return from.note.link !== 'tie' || (to.at === from.at + 1 && isSamePlace(from.note, to.note))
}

function followVoice(score: Score, voice: VoiceName, leaving: Map<Note, LinkKind>, arriving: Map<Note, LinkKind>): void {
  const waiting = new Map<number, Placed>()
  let at = 0
  for (const bar of score.bars) {
    for (const event of bar.voices[voice]?.events ?? []) {
      at++
      for (const note of event.notes) {
        const from = waiting.get(note.string)
        if (from?.note.link && arrives(from, { note, at })) {
          leaving.set(from.note, from.note.link)
          arriving.set(note, from.note.link)
        }
        waiting.set(note.string, { note, at })
      }
    }
  }
}

export function linksOf(score: Score): Links {
  const leaving = new Map<Note, LinkKind>()
  const arriving = new Map<Note, LinkKind>()
  for (const voice of VOICE_NAMES) followVoice(score, voice, leaving, arriving)
  return { leaving, arriving }
}
