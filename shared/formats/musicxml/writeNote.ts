import { midiOf, spell, type Spelling } from '../../score/pitch'
import { capoOffset, raisedKey, soundingMidi, staffSpelling } from '../../score/sounding'
import type { Head, Key, Note, ScoreEvent, Tuplet, Voice } from '../../score/types'
import type { BeamValue } from './beams'
import type { Links } from './links'
import { PLAY, TYPE_NAMES } from './terms'
import { leaf } from './xml'

/** 1: notation, an octave above sound and as if there were no capo. 2: tablature, sounding pitch with string and fret. */
export type Staff = 1 | 2

/** What notes of one voice of a bar are written with. */
export interface NoteContext {
  readonly head: Head
  readonly key: Key
  readonly links: Links
  readonly voiceNumber: number
  readonly staff: Staff
  readonly stem: '' | 'up' | 'down' | 'none'
  readonly pieces: Pieces
}

/**
 * Notes written before, for one staff while the key holds: a piece has some hundreds of different plain notes and writes
 * them thousands of times. Looking them up is what makes 400 bars fast.
 */
export interface Pieces { key: Key | null, readonly notes: Map<number, string> }
export const createPieces = (): Pieces => ({ key: null, notes: new Map() })

/** What all notes of one event share. */
export interface EventFrame {
  readonly duration: number
  readonly beams: readonly BeamValue[]
  /** Levels (1 first, the outermost) of the tuplets that begin or end here. */
  readonly tupletStarts: readonly { readonly level: number, readonly tuplet: Tuplet }[]
  readonly tupletStops: readonly number[]
}

function pitchXml({ step, alter, octave }: Spelling): string {
  // The format knows octaves 0 to 9 (XSD, octave). No instrument in use reaches beyond.
  const written = Math.min(9, Math.max(0, octave))
  return `<pitch><step>${step}</step>${alter ? `<alter>${alter}</alter>` : ''}<octave>${written}</octave></pitch>`
}

function pitchOf(note: Note, { head, key, staff }: NoteContext): Spelling {
  if (staff === 2) return spell(soundingMidi(head, note), raisedKey(key, capoOffset(head)).fifths)
  const written = staffSpelling(head, note, key.fifths)
  return { ...written, octave: written.octave + 1 }
}

interface LinkXml { readonly technical: string, readonly slurs: string, readonly ties: string, readonly tieds: string }
const UNLINKED: LinkXml = { technical: '', slurs: '', ties: '', tieds: '' }

/** Slurred links carry the string as their number, so that links on two strings may overlap. A middle note stops, then starts. */
function linkXml(note: Note, { leaving, arriving }: Links): LinkXml {
  const from = arriving.get(note)
  const to = leaving.get(note)
  if (!from && !to) return UNLINKED
  const result = { technical: '', slurs: '', ties: '', tieds: '' }
  if (from === 'tie') {
    result.ties += '<tie type="stop"/>'
    result.tieds += '<tied type="stop"/>'
  }
  else if (from) {
    result.technical += `<${from} number="${note.string}" type="stop"/>`
    result.slurs += `<slur number="${note.string}" type="stop"/>`
  }
  if (to === 'tie') {
    result.ties += '<tie type="start"/>'
    result.tieds += '<tied type="start"/>'
  }
  else if (to) {
    result.technical += `<${to} number="${note.string}" type="start">${to === 'hammer-on' ? 'H' : 'P'}</${to}>`
    result.slurs += `<slur number="${note.string}" type="start"/>`
  }
  return result
}

/** What the common elements can't carry, on the tab staff only. */
function ownData(note: Note, context: NoteContext): string {
  let result = ''
  if (note.ring === 'written') result += leaf('other-play', 'written', { type: PLAY.ring })
  if (note.link && !context.links.leaving.has(note)) result += leaf('other-play', note.link, { type: PLAY.link })
  if (!Number.isInteger(note.fret)) result += leaf('other-play', note.fret, { type: PLAY.touched })
  if (note.spelling && !isReadOffStaff(note, context)) {
    result += leaf('other-play', `${note.spelling.step}${note.spelling.alter}`, { type: PLAY.spelling })
  }
  return result && `<play>${result}</play>`
}

/** A spelling by hand shows on the staff where it differs from the key's. */
function isReadOffStaff(note: Note, { head, key }: NoteContext): boolean {
  const written = staffSpelling(head, note, key.fifths)
  const byKey = spell(midiOf(written), key.fifths)
  return written.step !== byKey.step && written.step === note.spelling?.step
}

const HARMONIC = '<harmonic><natural/><sounding-pitch/></harmonic>'

/** Elements after `duration` and `tie` up to `type` and the dots are the same for the event's notes and for a rest. */
function timeXml(event: ScoreEvent, voice: Voice, context: NoteContext): { type: string, modification: string } {
  const { base, dots, tuplets } = event.length
  const type = `<voice>${context.voiceNumber}</voice><type>${TYPE_NAMES[base]}</type>${'<dot/>'.repeat(dots)}`
  if (!tuplets?.length) return { type, modification: '' }
  const inside = tuplets.flatMap(id => voice.tuplets?.find(tuplet => tuplet.id === id) ?? [])
  const product = (part: 'actual' | 'normal') => inside.reduce((value, tuplet) => value * tuplet[part], 1)
  const normalType = inside.at(-1)?.base ?? base
  return {
    type,
    modification: `<time-modification><actual-notes>${product('actual')}</actual-notes><normal-notes>${product('normal')}</normal-notes><normal-type>${TYPE_NAMES[normalType]}</normal-type></time-modification>`,
  }
}

function tupletXml(frame: EventFrame): string {
  const starts = frame.tupletStarts.map(({ level, tuplet }) => {
    const part = (name: string, number: number) => `<${name}><tuplet-number>${number}</tuplet-number><tuplet-type>${TYPE_NAMES[tuplet.base]}</tuplet-type></${name}>`
    return `<tuplet type="start" number="${level}">${part('tuplet-actual', tuplet.actual)}${part('tuplet-normal', tuplet.normal)}</tuplet>`
  })
  return starts.join('') + frame.tupletStops.map(level => `<tuplet type="stop" number="${level}"/>`).join('')
}

/** Adds all `note` elements of an event on one staff to `out`. */
export function writeEvent(out: string[], event: ScoreEvent, voice: Voice, frame: EventFrame, context: NoteContext): void {
  if (!event.notes.length) {
    out.push(restXml(event, voice, frame, context))
    return
  }
  const { pieces, key } = context
  if (pieces.key !== key) {
    pieces.key = key
    pieces.notes.clear()
  }
  event.notes.forEach((note, index) => {
    const known = isPlain(note, event, context.links) ? plainKey(note, event, frame, context, index === 0) : null
    let xml = known === null ? undefined : pieces.notes.get(known)
    if (xml === undefined) {
      xml = noteXml(note, event, voice, frame, context, index === 0)
      if (known !== null) pieces.notes.set(known, xml)
    }
    out.push(xml)
  })
}

/** Nothing but a place and a length. */
const isPlain = (note: Note, event: ScoreEvent, links: Links): boolean =>
  !event.length.tuplets?.length && !note.harmonic && !note.dead && !note.ring && !note.link && !note.spelling && !links.arriving.has(note)

const BEAM_DIGITS: Readonly<Record<BeamValue, number>> = { 'begin': 1, 'continue': 2, 'end': 3, 'forward hook': 4, 'backward hook': 5 }

/** A number for everything that a plain note's text depends on: place, length, voice, place in the chord, beams. */
function plainKey(note: Note, { length }: ScoreEvent, { beams }: EventFrame, { voiceNumber }: NoteContext, isFirst: boolean): number {
  const beamed = isFirst ? beams.reduce((value, each) => value * 6 + BEAM_DIGITS[each], 0) : 0
  const place = note.string * 40 + note.fret
  const time = Math.log2(length.base) * 4 + length.dots
  return (((place * 28 + time) * 4 + voiceNumber % 4) * 2 + (isFirst ? 1 : 0)) * 1296 + beamed
}

function restXml(event: ScoreEvent, voice: Voice, frame: EventFrame, context: NoteContext): string {
  const { type, modification } = timeXml(event, voice, context)
  const tuplets = tupletXml(frame)
  const notations = tuplets && `<notations>${tuplets}</notations>`
  return `<note${event.hidden ? ' print-object="no"' : ''}><rest/><duration>${frame.duration}</duration>${type}${modification}<staff>${context.staff}</staff>${notations}</note>`
}

function noteXml(note: Note, event: ScoreEvent, voice: Voice, frame: EventFrame, context: NoteContext, isFirst: boolean): string {
  const { type, modification } = timeXml(event, voice, context)
  const links = linkXml(note, context.links)
  const place = context.staff === 2 ? `<string>${note.string}</string><fret>${Math.round(note.fret)}</fret>` : ''
  const technical = place + links.technical + (note.harmonic ? HARMONIC : '')
  const letRing = note.ring === 'let-ring' ? '<tied type="let-ring"/>' : ''
  const notations = links.tieds + letRing + links.slurs + (isFirst ? tupletXml(frame) : '') + (technical && `<technical>${technical}</technical>`)
  const beams = isFirst ? frame.beams.map((value, index) => `<beam number="${index + 1}">${value}</beam>`).join('') : ''
  // Joined, not added up: the text is kept and copied many times.
  return [
    isFirst ? '<note>' : '<note><chord/>', pitchXml(pitchOf(note, context)), `<duration>${frame.duration}</duration>`, links.ties,
    type, modification, context.stem && `<stem>${context.stem}</stem>`, headXml(note, context.staff), `<staff>${context.staff}</staff>`, beams,
    notations && `<notations>${notations}</notations>`, context.staff === 2 ? ownData(note, context) : '', '</note>',
  ].join('')
}

function headXml(note: Note, staff: Staff): string {
  if (note.dead) return '<notehead>x</notehead>'
  return note.harmonic && staff === 1 ? '<notehead>diamond</notehead>' : ''
}
