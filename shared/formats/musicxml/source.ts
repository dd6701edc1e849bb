import { toNumber } from '../../score/fraction'
import type { RawStaff } from './attributes'
import { statedMidi, type RawMeasure } from './readMeasures'
import type { RawNote } from './readNote'
import type { Remarks } from './remarks'

export interface RawPart { readonly name: string, readonly measures: readonly RawMeasure[] }

/** One staff of one part. */
export interface StaffSource { readonly part: RawPart, readonly staff: number }

/** Where the music is read from, and where the notation beside it stands. */
export interface Sources {
  readonly music: StaffSource
  /** The staff that describes strings and capo; null in a file without tablature. */
  readonly tab: RawStaff | null
  readonly notation: StaffSource | null
  /** Staves that are not read. */
  readonly others: readonly StaffSource[]
}

export const notesOf = (source: StaffSource, measure: RawMeasure): RawNote[] => measure.notes.filter(note => note.staff === source.staff)

function stavesOf(part: RawPart): StaffSource[] {
  const numbers = new Set(part.measures.flatMap(measure => [...measure.notes.map(note => note.staff), ...measure.staves.map(staff => staff.staff)]))
  return [...numbers].sort((a, b) => a - b).map(staff => ({ part, staff }))
}

const soundingNotes = (source: StaffSource): RawNote[] => source.part.measures.flatMap(measure => notesOf(source, measure)).filter(note => note.rest === 'none')
const placedCount = (source: StaffSource): number => soundingNotes(source).filter(note => note.string !== undefined && note.fret !== undefined).length
const isSame = (a: StaffSource, b: StaffSource): boolean => a.part === b.part && a.staff === b.staff

const key = (measure: number, note: RawNote): string => `${measure} ${toNumber(note.start)} ${statedMidi(note)}`

/** The share of one staff's notes that stand at the same time and pitch on another. */
function likeness(source: StaffSource, other: StaffSource): number {
  const there = new Set(other.part.measures.flatMap((measure, index) => notesOf(other, measure).map(note => key(index, note))))
  const mine = source.part.measures.flatMap((measure, index) => notesOf(source, measure).filter(note => note.rest === 'none').map(note => key(index, note)))
  return mine.length ? mine.filter(each => there.has(each)).length / mine.length : 0
}

/** The staff of the tablature; without one the first staff that has notes. Null where nothing can be read. */
export function chooseSources(parts: readonly RawPart[]): Sources | null {
  const staves = parts.flatMap(stavesOf)
  const tabStaff = staves.find(source => placedCount(source) > 0) ?? staves.find(source => detailsOf(source)?.isTab)
  // An alternate staff may be empty: it shares the notes of the staff before it (XSD, staff-type).
  const withNotes = staves.filter(source => soundingNotes(source).length > 0)
  const music = tabStaff && soundingNotes(tabStaff).length ? tabStaff : withNotes.find(source => source.part === tabStaff?.part) ?? withNotes[0] ?? tabStaff ?? staves[0]
  if (!music) return null
  const tab = detailsOf(music)?.isTab ? music : staves.find(source => source.part === music.part && detailsOf(source)?.isTab)
  const candidates = staves.filter(source => !isSame(source, music) && source !== tab)
  const isSilent = soundingNotes(music).length === 0
  const notation = candidates.find(source => source.part === music.part && (isSilent || likeness(music, source) > 0))
    ?? candidates.find(source => likeness(music, source) >= 0.9) ?? null
  return { music, tab: tab ? detailsOf(tab) : null, notation, others: candidates.filter(source => source !== notation && soundingNotes(source).length > 0) }
}

/** A staff's clef and details, as first stated. */
function detailsOf(source: StaffSource): RawStaff | null {
  const stated = source.part.measures.flatMap(measure => measure.staves).filter(staff => staff.staff === source.staff)
  return stated.find(staff => staff.tunings.size > 0) ?? stated.find(staff => staff.isTab) ?? stated[0] ?? null
}

/** Tuning and capo are those of the first bar that states them. */
export function remarkRetuning({ music, tab }: Sources, remarks: Remarks): void {
  for (const measure of music.part.measures) {
    const changes = measure.staves.some(staff => staff.staff === tab?.staff && staff !== tab && (staff.tunings.size > 0 || staff.capo !== undefined))
    if (changes) remarks.leaveOut('a change of tuning or capo', measure.number)
  }
}
