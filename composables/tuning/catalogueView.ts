import { STEEL_STRING_GUITAR } from '#shared/score/create'
import { midiOfText } from '#shared/score/pitch'
import type { OpenString } from '#shared/score/types'
import { homeKey } from '#shared/tunings/barres'
import { catalogue, stringsOf } from '#shared/tunings/catalogue'
import { loadSentence } from '#shared/tunings/cautions'
import { changeSentence, compareTunings, usualReference } from '#shared/tunings/change'
import { nameChord } from '#shared/tunings/chords'
import { isGrave, loadOf, type Load } from '#shared/tunings/load'
import { tuningLetters } from '#shared/tunings/parse'
import { usualSet } from '#shared/tunings/sets'
import { slugOf } from '#shared/tunings/slug'

/** How much a tuning asks of the strings, in one word. */
export type LoadWord = 'lighter' | 'as meant' | 'take care' | 'too tight'

/** A tuning as the catalogue lists it. */
export interface CatalogueRow {
  readonly slug: string
  readonly name: string
  readonly letters: string
  readonly instrument: string
  readonly strings: readonly OpenString[]
  /** Against the usual tuning of its instrument; null where there is none. */
  readonly moves: readonly number[] | null
  readonly change: string
  /** Of the open strings: "Csus2"; '' where no name fits. */
  readonly chord: string
  /** Half steps between neighbouring strings, downwards counted as upwards. */
  readonly steps: readonly number[]
  readonly load: LoadWord | null
  readonly loadSentence: string
}

const wordOf = (load: Load): LoadWord => {
  if (isGrave(load)) return 'too tight'
  if (load.strings.some(({ band }) => band !== 'green')) return 'take care'
  return load.share < 0.94 ? 'lighter' : 'as meant'
}

/** Works out a row from strings alone; the name is what the list shows. */
export function rowOf(name: string, strings: readonly OpenString[], instrument: string): CatalogueRow {
  const reference = usualReference(strings)
  const changes = reference && compareTunings(reference, strings)
  const midis = strings.map(({ pitch }) => midiOfText(pitch))
  const set = instrument === 'guitar' ? usualSet(strings) : null
  const load = set && loadOf(strings, set.scaleLength, set)
  const key = homeKey({ strings, capos: [], instrument: STEEL_STRING_GUITAR })
  return {
    name, strings, instrument, slug: slugOf(strings), letters: tuningLetters(strings),
    moves: changes?.map(each => each.halfSteps) ?? null, change: changes ? changeSentence(changes) : '',
    chord: nameChord(midis, key)?.symbol ?? '', steps: midis.slice(1).map((midi, index) => Math.abs(midis[index]! - midi)),
    load: load && wordOf(load), loadSentence: load ? loadSentence(load) : '',
  }
}

export const catalogueRows = (): readonly CatalogueRow[] => catalogue.map(tuning => rowOf(tuning.name, stringsOf(tuning), tuning.instrument))

/** What the list shows; '' means any. */
export interface CatalogueFilter {
  readonly search: string
  readonly instrument: string
  /** Number of strings that differ, as text. */
  readonly changed: string
  readonly direction: '' | 'down' | 'up'
  readonly chord: string
  /** Half steps between two neighbouring strings, as text. */
  readonly step: string
  readonly load: '' | LoadWord
}
export const ANY: CatalogueFilter = { search: '', instrument: '', changed: '', direction: '', chord: '', step: '', load: '' }

const plain = (text: string): string => text.toLowerCase().replaceAll('♯', '#').replaceAll('♭', 'b')
/** Two letters or more, as strings are said. */
const LETTERS = /^[a-g][#b]?(\s+[a-g][#b]?)+$/
/** Letters find the tunings that begin so, from the lowest string; other words those that have them all in name, letters, chord or change. */
const isFound = (row: CatalogueRow, search: string): boolean => {
  const [sought, letters] = [plain(search).trim().replace(/\s+/g, ' '), plain(row.letters)]
  if (LETTERS.test(sought)) return `${letters} `.startsWith(`${sought} `)
  const all = plain(`${row.name} ${row.letters} ${letters.replaceAll(' ', '')} ${row.instrument} ${row.chord} ${row.change}`)
  return sought.split(' ').every(word => all.includes(word))
}

const goes = (moves: readonly number[], direction: 'down' | 'up'): boolean =>
  (direction === 'down' ? moves.every(move => move <= 0) && moves.some(move => move < 0) : moves.some(move => move > 0))

/** Rows that have all of what is asked. */
export const filterRows = (rows: readonly CatalogueRow[], filter: CatalogueFilter): readonly CatalogueRow[] => rows.filter(row =>
  isFound(row, filter.search)
  && (!filter.instrument || row.instrument === filter.instrument)
  && (!filter.changed || row.moves?.filter(Boolean).length === Number(filter.changed))
  && (!filter.direction || (row.moves !== null && goes(row.moves, filter.direction)))
  && (!filter.chord || row.chord === filter.chord)
  && (!filter.step || row.steps.includes(Number(filter.step)))
  && (!filter.load || row.load === filter.load))

export const INTERVALS: readonly { readonly value: string, readonly label: string }[] = [
  'unison', 'minor second', 'major second', 'minor third', 'major third', 'fourth', 'tritone', 'fifth', 'minor sixth', 'major sixth', 'minor seventh', 'major seventh', 'octave',
].map((label, index) => ({ value: String(index), label }))

/** Each value that occurs, once, in the order of the list. */
export const valuesOf = (rows: readonly CatalogueRow[], value: (row: CatalogueRow) => string): readonly string[] =>
  [...new Set(rows.map(value))].filter(Boolean)
