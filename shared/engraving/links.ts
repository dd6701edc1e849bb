import type { Bar, LinkKind, Note, VoiceName } from '../score/types'
import { VOICE_NAMES } from '../score/types'

/** A link that has not met its note when its bar ends. The next bar is drawn with it. */
export interface Carried {
  readonly voice: VoiceName
  readonly kind: LinkKind
  readonly note: Note
}

/** A drawn link. `from` null: it comes out of the bar before. `to` null: its note is not in this bar. */
export interface Link {
  readonly kind: LinkKind
  readonly voice: VoiceName
  readonly string: number
  readonly from: string | null
  readonly to: string | null
  /** The note aimed at is there and fits: the same pitch for a tie, a higher fret for a hammer-on, a lower one for a pull-off. */
  readonly complete: boolean
}

export interface BarLinks {
  readonly links: readonly Link[]
  readonly out: readonly Carried[]
}

const NONE: readonly Carried[] = []

/** Does a link of this kind lead from one note to the other? Both are on one string. */
export function fits(kind: LinkKind, from: Note, to: Note): boolean {
  if (kind === 'tie') return from.fret === to.fret && from.harmonic?.partial === to.harmonic?.partial && !from.dead === !to.dead
  return kind === 'hammer-on' ? to.fret > from.fret : to.fret < from.fret
}

/** Links of a bar: each aims at the next note of its string and voice, here or in the bar that follows. */
export function linksOf(bar: Bar, carried: readonly Carried[]): BarLinks {
  const links: Link[] = []
  const out: Carried[] = []
  for (const voice of VOICE_NAMES) {
    const open = new Map<number, { note: Note, kind: LinkKind, here: boolean }>()
    for (const each of carried) if (each.voice === voice) open.set(each.note.string, { note: each.note, kind: each.kind, here: false })
    for (const note of bar.voices[voice]?.events.flatMap(event => event.notes) ?? []) {
      const before = open.get(note.string)
      if (before) links.push({ kind: before.kind, voice, string: note.string, from: before.here ? before.note.id : null, to: note.id, complete: fits(before.kind, before.note, note) })
      open.delete(note.string)
      if (note.link) open.set(note.string, { note, kind: note.link, here: true })
    }
    for (const [string, { note, kind, here }] of open) {
      if (!here) continue
      out.push({ voice, kind, note })
      links.push({ kind, voice, string, from: note.id, to: null, complete: false })
    }
  }
  return { links, out: out.length ? out : NONE }
}

const known = new WeakMap<Bar, readonly Carried[]>()

/** What a bar hands on to the next; one object as long as the bar is the same. */
export function carriedOut(bar: Bar | undefined): readonly Carried[] {
  if (!bar) return NONE
  let carried = known.get(bar)
  if (!carried) known.set(bar, carried = linksOf(bar, NONE).out)
  return carried
}

/** Equal texts: the next bar looks the same. */
export const carriedKey = (carried: readonly Carried[]): string =>
  carried.map(({ voice, kind, note }) => `${voice} ${kind} ${note.id} ${note.string} ${note.fret} ${note.harmonic?.partial ?? ''} ${note.dead ?? ''}`).join(';')
