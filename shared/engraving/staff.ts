import { add, isLess, type Fraction } from '../score/fraction'
import { STEPS } from '../score/pitch'
import { staffSpelling } from '../score/sounding'
import { lengthOf } from '../score/time'
import type { Context } from '../score/context'
import { VOICE_NAMES, type Bar, type Note, type RingRule, type ScoreEvent, type Voice, type VoiceName } from '../score/types'
import { accidentalsOf } from './accidentals'
import type { StaffNote } from './types'

/** An event with its place in time and its notes on the staff, before beams and stems. */
export interface Placed {
  readonly event: ScoreEvent
  readonly voice: VoiceName
  readonly start: Fraction
  readonly duration: Fraction
  readonly notes: readonly StaffNote[]
}

/** The octave sign of the clef lowers the drawing by one octave: sounding E3 stands on the bottom line, as written E4. */
const positionOf = (step: StaffNote['step'], writtenOctave: number): number => STEPS.indexOf(step) + 7 * writtenOctave - 30

function headOf(note: Note): StaffNote['head'] {
  if (note.dead) return 'cross'
  return note.harmonic ? 'diamond' : 'normal'
}

function timed(voice: Voice, name: VoiceName): { event: ScoreEvent, voice: VoiceName, start: Fraction, duration: Fraction }[] {
  let start: Fraction = { n: 0, d: 1 }
  return voice.events.map((event) => {
    const duration = lengthOf(event.length, voice.tuplets)
    const placed = { event, voice: name, start, duration }
    start = add(start, duration)
    return placed
  })
}

/** Events of all voices in time order, the upper voice first, with spelled pitches and accidentals. `tied`: notes that continue a tie. */
export function placeEvents(bar: Bar, context: Context, tied: ReadonlyMap<string, 'here' | 'before'>): readonly Placed[] {
  const { head, key } = context
  const rule: RingRule = bar.ring ?? head.ring
  const events = VOICE_NAMES.flatMap(name => (bar.voices[name] ? timed(bar.voices[name], name) : []))
  const order = events.map((each, index) => ({ each, index }))
    .sort((a, b) => (isLess(a.each.start, b.each.start) ? -1 : isLess(b.each.start, a.each.start) ? 1 : a.index - b.index))
  const spelled = order.flatMap(({ each }) => each.event.notes.map(note => ({
    note, ...staffSpelling(head, note, key.fifths), tied: tied.get(note.id) === 'before',
  })))
  const accidentals = accidentalsOf(spelled, key.fifths)
  const staffNotes = new Map(spelled.map(({ note, step, octave }, index): [Note, StaffNote] => [note, {
    noteId: note.id, string: note.string, step, octave: octave + 1, position: positionOf(step, octave + 1),
    accidental: tied.has(note.id) ? null : accidentals[index]!, head: headOf(note), letRing: note.ring === 'let-ring' && rule === 'written',
  }]))
  return order.map(({ each }) => ({ ...each, notes: each.event.notes.map(note => staffNotes.get(note)!).sort((a, b) => a.position - b.position) }))
}
