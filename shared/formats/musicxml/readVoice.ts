import { ZERO, add, compare, equals, isLess, subtract, type Fraction } from '../../score/fraction'
import { spell } from '../../score/pitch'
import { PARTIAL_AT_FRET, openMidi, staffMidi } from '../../score/sounding'
import { lengthOf } from '../../score/time'
import type { Head, Key, Length, Note, Respelling, ScoreEvent, Voice } from '../../score/types'
import { isWrittenAs, nearestWritable, spelledLength, type Written } from './lengths'
import { placeChord } from './place'
import { meantMidi, type PitchRule } from './readHead'
import { statedMidi } from './readMeasures'
import type { RawNote } from './readNote'
import type { Remarks } from './remarks'
import { PLAY } from './terms'
import { createTupletReader } from './tuplets'

/** What a voice of a bar is read with. */
export interface VoiceContext {
  readonly head: Head
  readonly key: Key
  readonly bar: string
  readonly rule: PitchRule
  /** The same note on the notation staff; each is given once. */
  readonly beside: (note: RawNote) => RawNote | undefined
  /** Letters of the staff pitch hold where the staff is written as if there were no capo. */
  readonly keepsSpelling: boolean
  readonly newId: () => string
  readonly remarks: Remarks
}

/** Notes that begin together. */
interface Group { readonly start: Fraction, readonly notes: RawNote[] }

function groupsOf(notes: readonly RawNote[], { remarks, bar }: VoiceContext): Group[] {
  const groups: Group[] = []
  let end = ZERO
  for (const note of [...notes].sort((a, b) => compare(a.start, b.start))) {
    const open = groups.at(-1)
    const first = open?.notes[0]
    if (open && first && (note.isChord || (equals(note.start, open.start) && equals(note.duration, first.duration)))) {
      if (note.rest === 'none') open.notes.push(note)
      continue
    }
    if (isLess(note.start, end)) {
      remarks.count('Left out, as other notes of the voice overlap: {n} notes ({bars}).', bar)
      continue
    }
    groups.push({ start: note.start, notes: [note] })
    end = add(note.start, note.duration)
  }
  return groups
}

/** The voice, or null where it says nothing in this bar. */
export function readVoice(raw: readonly RawNote[], context: VoiceContext): Voice | null {
  const sounding = raw.filter(note => note.rest !== 'bar' && isLess(ZERO, note.duration))
  if (!sounding.length) return null
  const { newId } = context
  const tuplets = createTupletReader(newId)
  const events: ScoreEvent[] = []
  let at = ZERO

  const rests = (length: Fraction) => {
    const spelled = spelledLength(length) ?? spelledLength(nearestWritable(length))!
    const ids = spelled.ratio ? tuplets.own(spelled.ratio, spelled.pieces[0]!.base) : undefined
    for (const piece of spelled.pieces) events.push({ id: newId(), length: { ...piece, ...(ids && { tuplets: ids }) }, notes: [], hidden: true })
  }

  for (const { start, notes } of groupsOf(sounding, context)) {
    const first = notes[0]!
    if (isLess(at, start)) rests(subtract(start, at))
    at = add(start, first.duration)
    const lengths = writtenLengths(first, tuplets, context)
    const read = readNotes(notes, context)
    lengths.forEach((length, index) => {
      const isLast = index === lengths.length - 1
      const pieceNotes = read.map(note => (index === 0 && isLast ? note : { ...note, id: newId(), ...(!isLast && { link: 'tie' as const }) }))
      const hidden = first.rest === 'rest' && first.hidden
      events.push({ id: newId(), length, notes: pieceNotes, ...(hidden && { hidden }) })
    })
    tuplets.leave(first)
  }
  const declared = tuplets.declared()
  return { events, ...(declared.length && { tuplets: declared }) }
}

/** As written where that takes the stated time; else the time decides, in as many tied lengths as it needs. */
function writtenLengths(note: RawNote, tuplets: ReturnType<typeof createTupletReader>, { bar, remarks }: VoiceContext): Length[] {
  const { type, ratio, duration } = note
  if (type && type.dots <= 3 && isWrittenAs(type, ratio, duration)) return [within(type, tuplets.enter(note, type.base, type.dots), tuplets.declared(), duration)]
  const spelled = spelledLength(duration)
  if (!spelled) remarks.count('Shortened to a length that can be written: {n} notes ({bars}).', bar)
  const { pieces, ratio: own } = spelled ?? spelledLength(nearestWritable(duration))!
  const ids = own ? tuplets.own(own, pieces[0]!.base) : []
  return pieces.map(piece => withIds(piece, ids))
}

const withIds = (written: Written, ids: readonly string[]): Length => ({ base: written.base, dots: written.dots, ...(ids.length && { tuplets: ids }) })

/** Tuplets that come out right in sum. */
function within(written: Written, ids: readonly string[], declared: ReturnType<ReturnType<typeof createTupletReader>['declared']>, duration: Fraction): Length {
  const length = withIds(written, ids)
  return equals(lengthOf(length, declared), duration) ? length : withIds(written, ids.slice(-1))
}

interface Sited { readonly raw: RawNote, readonly string: number, readonly fret: number }

function readNotes(raws: readonly RawNote[], context: VoiceContext): Note[] {
  const notes = raws.filter(note => note.rest === 'none')
  return siteNotes(notes, context).map(sited => readOne(sited, context))
}

/** String and fret for each note: as stated, else the lowest fret to be had beside the others. */
function siteNotes(notes: readonly RawNote[], { head, rule, bar, remarks }: VoiceContext): Sited[] {
  const taken = new Set<number>()
  const sites = new Map<RawNote, Sited>()
  const open: { raw: RawNote, midi: number }[] = []
  for (const raw of notes) {
    const midi = statedMidi(raw)
    if (raw.string !== undefined && raw.fret !== undefined && raw.string >= 1 && raw.string <= head.strings.length) {
      if (taken.has(raw.string)) remarks.count('Left out, as the string sounds already in the chord: {n} notes ({bars}).', bar)
      else sites.set(raw, { raw, string: raw.string, fret: raw.fret })
      taken.add(raw.string)
    }
    else if (midi !== null) open.push({ raw, midi: meantMidi(head, rule, midi) })
    else remarks.leaveOut('notes without a pitch', bar)
  }
  placeChord(head, open.map(each => each.midi), taken).forEach((place, index) => {
    const raw = open[index]?.raw
    if (!raw) return
    if (!place) return remarks.count('Left out, as no string of this tuning is left to play it on: {n} notes ({bars}).', bar)
    remarks.count('{n} notes had no string and fret: placed at the lowest possible fret ({bars}). Check their fingering.', bar)
    sites.set(raw, { raw, ...place })
  })
  return notes.flatMap(raw => sites.get(raw) ?? [])
}

function partialOf(sited: Sited, { head, bar, remarks }: VoiceContext): number | undefined {
  const { raw, string, fret } = sited
  if (raw.harmonic === 'none') return undefined
  if (raw.harmonic === 'artificial') {
    remarks.count('Read as plain notes, being artificial: {n} harmonics ({bars}).', bar)
    return undefined
  }
  const midi = statedMidi(raw)
  const bySound = midi === null ? 0 : Math.round(2 ** ((midi - openMidi(head, string)) / 12))
  const isSound = raw.harmonic === 'sounding' && bySound >= 2 && bySound <= 12
  const partial = isSound ? bySound : PARTIAL_AT_FRET[fret]
  if (partial === undefined || fret <= 0) {
    remarks.count('Read as plain notes, as the place to touch is not given: {n} harmonics ({bars}).', bar)
    return undefined
  }
  return partial
}

function readOne(sited: Sited, context: VoiceContext): Note {
  const { raw } = sited
  const other = context.beside(raw)
  const partial = partialOf(sited, context)
  const touched = Number(raw.own[PLAY.touched])
  const link = raw.link ?? linkOfText(raw.own[PLAY.link]) ?? (other?.link === 'tie' ? other.link : undefined)
  const ring = raw.letRing || other?.letRing ? 'let-ring' as const : raw.own[PLAY.ring] === 'written' ? 'written' as const : undefined
  const note: Note = {
    id: context.newId(), string: sited.string, fret: partial !== undefined && touched > 0 ? touched : sited.fret,
    ...(partial !== undefined && { harmonic: { partial } }),
    ...((raw.dead || other?.dead) && { dead: true }),
    ...(ring && { ring }), ...(link && { link }),
  }
  const spelling = spellingOf(note, raw, other, context)
  return spelling ? { ...note, spelling } : note
}

const linkOfText = (text: string | undefined): Note['link'] => (text === 'tie' || text === 'hammer-on' || text === 'pull-off' ? text : undefined)

/** A letter that is not the key's own is a spelling by hand. */
function spellingOf(note: Note, raw: RawNote, other: RawNote | undefined, { head, key, keepsSpelling }: VoiceContext): Respelling | undefined {
  const own = /^([A-G])(-?\d)$/.exec(raw.own[PLAY.spelling] ?? '')
  if (own) return { step: own[1] as Respelling['step'], alter: Number(own[2]) }
  const written = other?.written
  if (!keepsSpelling || !written || Math.abs(written.alter) > 2 || !Number.isInteger(written.alter)) return undefined
  return written.step === spell(staffMidi(head, note), key.fifths).step ? undefined : { step: written.step, alter: written.alter }
}
