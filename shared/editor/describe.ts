import { contextOf, type Context } from '../score/context'
import { add, compare, divide, equals, fraction, subtract, toNumber, ZERO, type Fraction } from '../score/fraction'
import { barLabel, barPlaces } from '../score/numbers'
import { capoOffset, raisedKey, soundingLabel } from '../score/sounding'
import { VULGAR } from '../score/text'
import { barLength, beatOf, meterLength, plainLength, surplus } from '../score/time'
import { BASES, VOICE_NAMES, type Bar, type Head, type Key, type Length, type Meter, type Note, type Score, type ScoreEvent, type Voice, type VoiceName } from '../score/types'
import { momentOf, placeOf } from './place'
import type { EditorState } from './state'

export { barLabel }

/** Voices as players speak of them. */
export const VOICE_LABELS: Readonly<Record<VoiceName, string>> = { upper: 'upper voice', lower: 'lower voice', middle: 'middle voice' }

const LENGTH_NAMES = ['whole', 'half', 'quarter', 'eighth', 'sixteenth', 'thirty-second', 'sixty-fourth']
const DOTS = ['', 'dotted ', 'double-dotted ', 'triple-dotted ']

/** "dotted quarter" */
export const lengthLabel = ({ base, dots }: Pick<Length, 'base' | 'dots'>): string => `${DOTS[dots] ?? ''}${LENGTH_NAMES[BASES.indexOf(base)]}`

const article = (words: string): string => (/^[aeiou]/.test(words) ? `an ${words}` : `a ${words}`)

/** A span in words: "an eighth", "a half note", "3 eighths", and where no note says it, as inside tuplets, "1⅔ beats". */
export function spanLabel(span: Fraction, meter: Meter): string {
  const plain = BASES.flatMap(base => [0, 1].map(dots => ({ base, dots }) as const))
    .find(length => equals(plainLength(length), span))
  if (plain) return article(lengthLabel(plain)) + (plain.base < 4 ? ' note' : '')
  const at = BASES.findIndex(base => base === span.d)
  if (at >= 0) return `${span.n} ${LENGTH_NAMES[at]}${span.d < 4 ? ' note' : ''}s`
  const beats = divide(span, beatOf(meter))
  return `${mixedLabel(beats)} beat${compare(beats, fraction(1)) > 0 ? 's' : ''}`
}

/** How a voice fills its bar: "This bar is an eighth short"; null when it fits or nothing is in it. */
export function fillSentence(bar: Bar, name: VoiceName, meter: Meter): string | null {
  const voice = bar.voices[name]
  const over = surplus(voice, bar, meter)
  if (!voice || compare(over, ZERO) === 0) return null
  return compare(over, ZERO) > 0
    ? `This bar is over by ${spanLabel(over, meter)}`
    : `This bar is ${spanLabel(subtract(ZERO, over), meter)} short`
}

/** The beat a moment falls on, counted from 1, with the fraction of the beat that has passed: "2", "2½", "3⅓". */
export const beatLabel = (moment: Fraction, meter: Meter): string => mixedLabel(add(divide(moment, beatOf(meter)), fraction(1)))

/** "2", "2½", "⅔", "1 + 2/9" */
function mixedLabel(value: Fraction): string {
  const whole = Math.floor(toNumber(value))
  const rest = subtract(value, fraction(whole))
  if (rest.n === 0) return String(whole)
  const vulgar = VULGAR[`${rest.n}/${rest.d}`]
  if (whole === 0) return vulgar ?? `${rest.n}/${rest.d}`
  return `${whole}${vulgar ?? ` + ${rest.n}/${rest.d}`}`
}

/** What is missing before the first beat of a bar, whose beats are counted from the end where it is a pickup. */
const missingBefore = (score: Score, index: number, meter: Meter): Fraction =>
  barPlaces(score)[index]?.pickup ? subtract(meterLength(meter), barLength(score.bars[index]!, meter)) : ZERO

/** What a note says besides its fret, in the order in which it is read. */
export function marksOf(note: Note): readonly string[] {
  return [
    note.dead && 'dead note', note.harmonic && `harmonic, partial ${note.harmonic.partial}`, note.link,
    note.ring === 'let-ring' && 'let ring', note.ring === 'written' && 'ends as written',
  ].filter(text => typeof text === 'string')
}

/** The key that sounds where `key` is fingered: a full capo raises it. */
export const soundingFifths = (key: Key, head: Head): number => raisedKey(key, capoOffset(head)).fifths

/** Parts of the status line and of what a screen reader says. */
export interface CursorDescription {
  /** "Bar 2", as printed; "Pickup" */
  readonly bar: string
  readonly bars: number
  /** "beat 2½"; behind the last beat "end" */
  readonly beat: string
  readonly string: number
  /** The string's open pitch as it sounds now, capo on: "D2". */
  readonly open: string
  /** null: no note on this string here. */
  readonly fret: number | null
  /** Sounding pitch: "F♯3". */
  readonly pitch: string | null
  readonly marks: readonly string[]
  readonly voice: string
  /** Written length under the cursor, at the end what is entered next: "dotted quarter". */
  readonly length: string
  readonly at: 'note' | 'event' | 'rest' | 'end'
  /** How the bar is over or short, null when it fits. */
  readonly fill: string | null
}

export function describeCursor({ score, selection, entry }: EditorState): CursorDescription {
  const { cursor } = selection
  const { index, bar, context, voice, at, event, note } = placeOf(score, cursor)
  const fifths = soundingFifths(context.key, score.head)
  const moment = momentOf(voice, at)
  const isPast = !event && compare(moment, barLength(bar, context.meter)) >= 0
  return {
    bar: barLabel(score, index),
    bars: score.bars.length,
    beat: isPast ? 'end' : `beat ${beatLabel(add(missingBefore(score, index, context.meter), moment), context.meter)}`,
    string: cursor.string,
    open: soundingLabel(score.head, { string: cursor.string, fret: 0 }, fifths),
    fret: note?.fret ?? null,
    pitch: note && !note.dead ? soundingLabel(score.head, note, fifths) : null,
    marks: note ? marksOf(note) : [],
    voice: VOICE_LABELS[cursor.voice],
    length: lengthLabel(event?.length ?? entry),
    at: note ? 'note' : event ? (event.notes.length ? 'event' : 'rest') : 'end',
    fill: fillSentence(bar, cursor.voice, context.meter),
  }
}

/** What is spoken when the cursor comes to rest: "String 3, fret 4, B3, eighth. Bar 2, beat 1½, upper voice." */
export function cursorSentence(state: EditorState): string {
  const { bar, beat, string, fret, pitch, marks, voice, length, at, fill, open } = describeCursor(state)
  const what = {
    note: `String ${string}, ${[`fret ${fret}`, pitch, ...marks, length].filter(Boolean).join(', ')}`,
    event: `String ${string}, ${open}, nothing here, ${length}`,
    rest: `Rest, ${length}, string ${string}`,
    end: `End of the voice, string ${string}, ${open}, ${length} next`,
  }[at]
  return [what, `${bar}, ${beat}, ${voice}`, fill].filter(Boolean).join('. ') + '.'
}

/** "2 sharps", "1 flat", "no sharps or flats" */
function signatureLabel({ fifths }: Key): string {
  const count = Math.abs(fifths)
  return count ? `${count} ${fifths > 0 ? 'sharp' : 'flat'}${count > 1 ? 's' : ''}` : 'no sharps or flats'
}

/** A bar read aloud, voice by voice: "Bar 2, 6/8. Upper voice: beat 1, eighth, string 2 fret 1, C4; …". Meter, key, tempo and repeats where they are stated.
 * @param index position of the bar, from 0; empty text when there is none */
export function readBar(score: Score, index: number): string {
  const bar = score.bars[index]
  if (!bar) return ''
  const context = contextOf(score, index)
  const stated = [
    bar.meter && `${bar.meter.beats}/${bar.meter.unit}`, bar.key && signatureLabel(bar.key),
    bar.tempo && `${lengthLabel(bar.tempo)} = ${bar.tempo.perMinute}`, bar.repeatStart && 'repeat begins',
    bar.repeatEnd && (bar.repeatEnd === 2 ? 'repeat ends' : `repeat ends, played ${bar.repeatEnd} times`),
  ].filter(text => typeof text === 'string')
  const voices = VOICE_NAMES.flatMap((name) => {
    const voice = bar.voices[name]
    if (!voice) return []
    const label = VOICE_LABELS[name]
    const fill = fillSentence(bar, name, context.meter)
    return [`${label[0]!.toUpperCase()}${label.slice(1)}: ${readVoice(voice, score.head, context, missingBefore(score, index, context.meter))}.${fill ? ` ${fill}.` : ''}`]
  })
  return [`${[barLabel(score, index), ...stated].join(', ')}.`, ...(voices.length ? voices : ['Empty.'])].join(' ')
}

function readVoice(voice: Voice, head: Head, { meter, key }: Context, before: Fraction): string {
  return voice.events.map((event, at) => {
    const tuplet = event.length.tuplets?.length ? ' in a tuplet' : ''
    return `beat ${beatLabel(add(before, momentOf(voice, at)), meter)}, ${lengthLabel(event.length)}${tuplet}, ${readNotes(event, head, key)}`
  }).join('; ')
}

function readNotes(event: ScoreEvent, head: Head, key: Key): string {
  if (!event.notes.length) return 'rest'
  return event.notes.map((note) => {
    const pitch = note.dead ? null : soundingLabel(head, note, soundingFifths(key, head))
    return [`string ${note.string} fret ${note.fret}`, pitch, ...marksOf(note)].filter(Boolean).join(', ')
  }).join(' with ')
}
