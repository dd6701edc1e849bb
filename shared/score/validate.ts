import { ZERO, compare, fraction } from './fraction'
import { barLabel } from './numbers'
import { midiOf, parsePitch } from './pitch'
import { isFretOnNeck } from './sounding'
import { voiceTotal } from './time'
import { BASES, VOICE_NAMES, type Bar, type Head, type Note, type Score, type ScoreEvent, type Voice } from './types'

/** Each function answers null for what is sound, else one sentence saying what is wrong and where. Shape (types of fields) is the
 * schema's affair; these are the rules of music that a schema can't state. */

const first = <T>(items: readonly T[], check: (item: T, index: number) => string | null): string | null => {
  for (const [index, item] of items.entries()) {
    const problem = check(item, index)
    if (problem) return problem
  }
  return null
}

function repeated(ids: readonly string[]): string | undefined {
  const seen = new Set<string>()
  return ids.find(id => seen.size === seen.add(id).size)
}

/** Lowest and highest open string accepted, MIDI: A0 (27.5 Hz) and C7. */
export const OPEN_RANGE = { low: 21, high: 96 } as const

export function validateHead(head: Head): string | null {
  const { strings, capos, instrument } = head
  if (strings.length < 4 || strings.length > 10) return `An instrument here has 4 to 10 strings, not ${strings.length}.`
  return first(strings, (open, index) => {
    const pitch = parsePitch(open.pitch)
    if (!pitch) return `String ${index + 1}: “${open.pitch}” is no pitch; write a letter, an accidental and an octave, like F#3.`
    const midi = midiOf(pitch)
    if (midi < OPEN_RANGE.low || midi > OPEN_RANGE.high) return `String ${index + 1}: ${open.pitch} is outside A0 to C7.`
    return (open.from ?? 0) < instrument.frets ? null : `String ${index + 1} starts beyond the last fret.`
  }) ?? first(capos, (capo) => {
    if (capo.fret < 1 || capo.fret >= instrument.frets) return `A capo at fret ${capo.fret} is not on this neck of ${instrument.frets} frets.`
    return capo.strings?.some(string => string < 1 || string > strings.length) ? 'The capo covers a string that is not there.' : null
  })
}

function validateNote(note: Note, head: Head): string | null {
  if (note.string < 1 || note.string > head.strings.length) return `there is no string ${note.string}.`
  if (note.harmonic && (note.fret <= 0 || note.harmonic.partial < 2)) return 'a harmonic is touched above the nut and sounds partial 2 or higher.'
  if (!note.harmonic && !Number.isInteger(note.fret)) return `fret ${note.fret} is no whole number.`
  return isFretOnNeck(head, note.string, note.fret) ? null : `string ${note.string} has no fret ${note.fret} on this neck.`
}

function validateEvent(event: ScoreEvent, voice: Voice, head: Head): string | null {
  if (!BASES.includes(event.length.base)) return `1/${event.length.base} is no note length.`
  const unknown = event.length.tuplets?.find(id => !voice.tuplets?.some(tuplet => tuplet.id === id))
  if (unknown) return 'a note stands in a tuplet that is not declared.'
  const strings = event.notes.map(note => note.string)
  const twice = strings.find((string, index) => strings.indexOf(string) !== index)
  if (twice) return `string ${twice} can sound one note at a time.`
  if (event.hidden && event.notes.length) return 'only a rest can be hidden.'
  return first(event.notes, note => validateNote(note, head))
}

export function validateVoice(voice: Voice, head: Head): string | null {
  const double = repeated(voice.events.flatMap(event => [event.id, ...event.notes.map(note => note.id)]))
  if (double) return `the id ${double} is used twice.`
  const tuplet = voice.tuplets?.find(each => each.actual < 2 || each.normal < 1)
  if (tuplet) return `a tuplet of ${tuplet.actual} in the time of ${tuplet.normal} is none.`
  return first(voice.events, event => validateEvent(event, voice, head)) ?? (isCountable(voice) ? null : 'its tuplets are too many kinds for their time to be counted exactly.')
}

/** Many different tuplets in one bar can need a denominator beyond the whole numbers that a computer counts exactly. */
function isCountable(voice: Voice): boolean {
  try {
    voiceTotal(voice)
    return true
  }
  catch (error) {
    if (error instanceof RangeError) return false
    throw error
  }
}

export function validateBar(bar: Bar, head: Head): string | null {
  if (bar.meter && (bar.meter.beats < 1 || bar.meter.beats > 32 || !BASES.includes(bar.meter.unit))) return `${bar.meter.beats}/${bar.meter.unit} is no meter.`
  if (bar.key && Math.abs(bar.key.fifths) > 7) return 'a key has seven sharps or flats at most.'
  if (bar.tempo && (bar.tempo.perMinute < 10 || bar.tempo.perMinute > 400)) return 'a tempo lies between 10 and 400 a minute.'
  if (bar.length && (compare(bar.length, ZERO) <= 0 || compare(bar.length, fraction(8)) > 0)) return 'a bar is longer than nothing and at most eight whole notes.'
  if (bar.repeatEnd !== undefined && bar.repeatEnd < 2) return 'a repeat is played at least twice.'
  return first(VOICE_NAMES, (name) => {
    const voice = bar.voices[name]
    return voice ? validateVoice(voice, head) : null
  })
}

export function validateScore(score: Score): string | null {
  const head = validateHead(score.head)
  if (head) return head
  if (!score.bars.length) return 'An arrangement has at least one bar.'
  const double = repeated(score.bars.map(bar => bar.id))
  if (double) return `The bar id ${double} is used twice.`
  return first(score.bars, (bar, index) => {
    const problem = validateBar(bar, score.head)
    return problem && `${barLabel(score, index)}: ${problem}`
  })
}
