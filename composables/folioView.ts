import type { ArrangementState, ArrangementSummary } from '#shared/schemas/arrangement'
import { midiOfText } from '#shared/score/pitch'
import type { OpenString } from '#shared/score/types'
import { catalogue, stringsOf } from '#shared/tunings/catalogue'
import { tuningLetters } from '#shared/tunings/parse'

export type FolioColumn = 'title' | 'tuning' | 'bars' | 'changed' | 'state'
export const FOLIO_COLUMNS: readonly { readonly id: FolioColumn, readonly label: string }[] = [
  { id: 'title', label: 'Title' }, { id: 'tuning', label: 'Tuning' }, { id: 'bars', label: 'Bars' },
  { id: 'changed', label: 'Changed' }, { id: 'state', label: 'State' },
]
export interface FolioSort { readonly by: FolioColumn, readonly down: boolean }
/** What the table shows; an empty text means any. */
export interface FolioFilter { readonly search: string, readonly tuning: string, readonly state: ArrangementState | '' }
export const EVERYTHING: FolioFilter = { search: '', tuning: '', state: '' }

/** Equal for tunings that sound alike, however they are spelled. */
export const tuningId = (strings: readonly OpenString[]): string => strings.map(({ pitch }) => midiOfText(pitch)).join('.')

/** The catalogue's name, undefined for a tuning of one's own. */
export const tuningName = (strings: readonly OpenString[]): string | undefined => NAMES.get(tuningId(strings))
const NAMES: ReadonlyMap<string, string> = new Map([...catalogue].reverse().map(each => [tuningId(stringsOf(each)), each.name]))

/** The tunings in use, each once, by name or letters. */
export function tuningsIn(items: readonly ArrangementSummary[]): { value: string, label: string }[] {
  const found = new Map(items.map(({ strings }) => [tuningId(strings), strings]))
  return [...found]
    .map(([value, strings]) => ({ value, label: labelOf(strings) }))
    .sort((a, b) => compareText(a.label, b.label))
}

/** "C G D G C D, Orkney"; the name alone where it says the letters already. */
function labelOf(strings: readonly OpenString[]): string {
  const letters = tuningLetters(strings)
  const name = tuningName(strings)
  return !name || name.startsWith(letters) ? name ?? letters : `${letters}, ${name}`
}

const collator = new Intl.Collator('en', { sensitivity: 'base', numeric: true })
const compareText = (a: string, b: string) => collator.compare(a, b)

/** Accents and case don't hide a title. */
const folded = (text: string) => text.normalize('NFD').replace(/\p{M}/gu, '').toLowerCase()

function matches(item: ArrangementSummary, filter: FolioFilter): boolean {
  const haystack = folded(`${item.title} ${labelOf(item.strings)}`)
  return folded(filter.search).split(/\s+/).every(word => haystack.includes(word))
    && (!filter.tuning || tuningId(item.strings) === filter.tuning)
    && (!filter.state || item.state === filter.state)
}

const order: Record<FolioColumn, (a: ArrangementSummary, b: ArrangementSummary) => number> = {
  title: (a, b) => compareText(a.title, b.title),
  tuning: (a, b) => compareText(tuningLetters(a.strings), tuningLetters(b.strings)),
  bars: (a, b) => a.bars - b.bars,
  changed: (a, b) => Date.parse(a.changedAt) - Date.parse(b.changedAt),
  state: (a, b) => compareText(a.state, b.state),
}

/** The rows to show. Equal ones stand by title. */
export function folioRows(items: readonly ArrangementSummary[], filter: FolioFilter, sort: FolioSort): ArrangementSummary[] {
  const sign = sort.down ? -1 : 1
  return items.filter(item => matches(item, filter)).sort((a, b) => sign * order[sort.by](a, b) || order.title(a, b))
}

/** A second press on a column turns its order round. What changed last and what is longest is looked for first. */
export const nextSort = (sort: FolioSort, by: FolioColumn): FolioSort =>
  sort.by === by ? { by, down: !sort.down } : { by, down: by === 'changed' || by === 'bars' }

export const ARRANGEMENT_STATE_LABELS: readonly { readonly value: ArrangementState, readonly label: string }[] = [
  { value: 'draft', label: 'Draft' }, { value: 'ready', label: 'Ready' },
]
