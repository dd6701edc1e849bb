import { describe, expect, it } from 'vitest'
import type { ArrangementSummary } from '../../../shared/schemas/arrangement'
import { parseTuning } from '../../../shared/tunings/parse'
import { exactTime, relativeTime } from '../../../composables/dates'
import { actionsFor } from '../../../composables/folioActions'
import { EVERYTHING, folioRows, nextSort, tuningId, tuningsIn, type FolioSort } from '../../../composables/folioView'

const strings = (text: string) => {
  const read = parseTuning(text)
  if ('problem' in read) throw new Error(read.problem)
  return read.strings
}
const item = (id: string, title: string, tuning: string, more: Partial<ArrangementSummary> = {}): ArrangementSummary =>
  ({ id, title, strings: strings(tuning), capos: [], bars: 8, state: 'draft', role: 'arranger', changedAt: '2026-01-01T00:00:00Z', ...more })

const items = [
  item('a', 'Étude 10', 'C2 G2 D3 G3 C4 D4', { bars: 32, changedAt: '2026-03-01T00:00:00Z', state: 'ready' }),
  item('b', 'Étude 9', 'D2 G2 D3 G3 A#3 D4', { changedAt: '2026-02-01T00:00:00Z' }),
  item('c', 'lantern waltz', 'D2 G2 D3 G3 Bb3 D4', { bars: 16 }),
]
const ids = (sort: FolioSort, filter = EVERYTHING) => folioRows(items, filter, sort).map(({ id }) => id).join('')
const up = { by: 'title', down: false } as const

describe('the folio', () => {
  it('sorts titles as people do: accents and case apart, numbers by size', () => expect(ids(up)).toBe('bac'))
  it('sorts by time, bars and state', () => {
    expect(ids({ by: 'changed', down: true })).toBe('abc')
    expect(ids({ by: 'bars', down: false })).toBe('bca')
    expect(ids({ by: 'state', down: true })).toBe('abc')
  })
  it('turns the order at the second press', () => {
    expect(nextSort(up, 'title')).toEqual({ by: 'title', down: true })
    expect(nextSort(up, 'changed')).toEqual({ by: 'changed', down: true })
  })
  it('finds words of the title and the tuning, with or without accents', () => {
    expect(ids(up, { ...EVERYTHING, search: 'etude' })).toBe('ba')
    expect(ids(up, { ...EVERYTHING, search: 'ETUDE orkney' })).toBe('a')
    expect(ids(up, { ...EVERYTHING, search: 'zither' })).toBe('')
  })
  it('filters by state, and by how a tuning sounds, not how it is spelled', () => {
    expect(ids(up, { ...EVERYTHING, state: 'ready' })).toBe('a')
    expect(ids(up, { ...EVERYTHING, tuning: tuningId(items[1]!.strings) })).toBe('bc')
  })
  it('offers each tuning once, with the name players know', () => {
    // Open G minor and Orkney: sources in shared/tunings/catalogue.ts.
    expect(tuningsIn(items).map(({ label }) => label)).toEqual(['C G D G C D, Orkney', 'D G D G B♭ D, Open G minor'])
  })
  it('offers what the person may do, and no more', () => {
    const offered = (more: Partial<ArrangementSummary>) => actionsFor({ ...items[1]!, ...more }).map(({ id }) => id)
    expect(offered({})).toEqual(['rename', 'duplicate', 'ready', 'delete'])
    expect(offered({ state: 'ready' })).toContain('draft')
    expect(offered({ role: 'co-arranger' })).not.toContain('delete')
    expect(offered({ role: 'performer' })).toEqual([])
  })
})

describe('time', () => {
  const now = new Date('2026-06-15T12:00:00Z')
  it.each([
    ['2026-06-15T11:59:40Z', 'just now'], ['2026-06-15T12:00:20Z', 'just now'], ['2026-06-15T11:55:00Z', '5 minutes ago'], ['2026-06-15T09:00:00Z', '3 hours ago'],
    ['2026-06-14T11:00:00Z', 'yesterday'], ['2026-06-11T12:00:00Z', '4 days ago'], ['2026-06-01T12:00:00Z', '2 weeks ago'], ['2024-05-01T00:00:00Z', '2 years ago'],
  ])('%s is %s', (when, words) => expect(relativeTime(new Date(when), now)).toBe(words))
  it('is exact in a zone', () => expect(exactTime(now, 'UTC')).toBe('15 June 2026 at 12:00'))
})
