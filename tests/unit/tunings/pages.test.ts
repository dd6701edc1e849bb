import { describe, expect, it } from 'vitest'
import { ANY, catalogueRows, filterRows, type CatalogueFilter } from '../../../composables/tuning/catalogueView'
import { CHART_KEYS, USUAL_OPTIONS, queryOf, readOptions, requestOf, setOf, type ChartOptions } from '../../../composables/tuning/chartOptions'
import { stringsOf, GUITAR_TUNINGS, OTHER_TUNINGS } from '../../../shared/tunings/catalogue'
import { chartOf } from '../../../shared/tunings/chart'
import { loadOf } from '../../../shared/tunings/load'

const rows = catalogueRows()
const names = (filter: Partial<CatalogueFilter>) => filterRows(rows, { ...ANY, ...filter }).map(({ name }) => name)

describe('the catalogue', () => {
  // The handbook's rows of changes; chords are common practice.
  it('lists the guitar and other instruments', () => {
    expect(rows.filter(({ instrument }) => instrument === 'guitar')).toHaveLength(GUITAR_TUNINGS.length + 1)
    expect(names({ instrument: 'banjo' })).toEqual(['Banjo, open G'])
  })
  it('is filtered by the number of strings changed and their direction', () => {
    expect(names({ changed: '0', instrument: 'guitar' })).toEqual(['Standard'])
    expect(names({ changed: '1', direction: 'down' })).toEqual(['Drop D', 'Lute-like, third string F♯'])
    expect(names({ changed: '2', direction: 'up' })).toEqual(['Cross-note E', 'All fourths'])
  })
  it('is filtered by open chord', () => expect(names({ chord: 'Csus2' })).toEqual(['Orkney', 'Csus2']))
  it('is filtered by an interval between neighbours, downwards too', () => {
    // D A D D A D has its fourth and third string in unison; a ukulele's fourth string lies a fifth above its third.
    expect(names({ step: '0' })).toEqual(['D A D D A D'])
    expect(names({ step: '2', instrument: 'guitar' })).toContain('D A D G A D (Dsus4)')
    expect(names({ step: '7', instrument: 'ukulele' })).toEqual(['Ukulele'])
  })
  it('is filtered by load', () => expect(names({ load: 'too tight' })).toEqual(['Open E', 'Open A', 'C G D A E G']))
  it.each([['wahine', ['G wahine', 'C wahine']], ['cgdgcd', ['Orkney']], ['C G D G C D', ['Orkney']], ['d a d f# a d', ['Open D']], ['no such', []]])(
    'finds %j', (search, found) => expect(names({ search })).toEqual(found))
})

describe('a chart’s address', () => {
  const own: ChartOptions = {
    from: 'd2-a2-d3-g3-b3-e4', key: 'fsm', scale: 'minor pentatonic', capo: 2, partialFret: 4, partialStrings: [3, 4, 5], set: 1, gauges: { 2: 'plain0.014' }, length: 630,
  }
  it('holds every choice', () => expect(readOptions(queryOf(own), 6)).toEqual(own))
  it('is empty for what is usual', () => expect(queryOf(USUAL_OPTIONS)).toEqual({}))
  it.each([
    [{ capo: '99' }], [{ capo: '-1' }], [{ key: 'h' }], [{ scale: 'no-such' }], [{ from: 'e2-a2' }], [{ from: 'g4-c4-e4-a4' }], [{ partial: '3on9' }],
    [{ set: '7' }], [{ gauges: '2-plain9' }], [{ length: '12' }], [{ capo: ['1', '2'] }], [{ length: 'NaN' }],
  ])('leaves what is wrong at its usual value: %j', query => expect(readOptions(query, 6)).toEqual(USUAL_OPTIONS))
  it('has one text for each key', () => expect(new Set(CHART_KEYS.map(({ value }) => value)).size).toBe(24))
})

describe('what a chart is worked out from', () => {
  const openA = stringsOf(GUITAR_TUNINGS.find(({ name }) => name === 'Open A')!)
  it('keeps a short string short', () => {
    const banjo = OTHER_TUNINGS.find(({ instrument }) => instrument === 'banjo')!
    const plain = banjo.pitches.map(pitch => ({ pitch })).reverse()
    expect(chartOf(requestOf(plain, USUAL_OPTIONS)).board.stops).toEqual([0, 0, 0, 0, 5])
  })
  it('measures exchanged gauges against what the set is meant to carry', () => {
    // Open A raises string 2 by two half steps, 126 percent; .014 for .016 weighs 4.342 against 5.671 (the maker's chart), 76.6 percent of that.
    const share = (gauges: Record<number, string>) => loadOf(openA, 647.7, setOf({ ...USUAL_OPTIONS, gauges }, openA)!).strings[1]!.share
    expect(share({})).toBeCloseTo(2 ** (4 / 12), 3)
    expect(share({ 2: 'plain0.014' })).toBeCloseTo(2 ** (4 / 12) * 4.342 / 5.671, 3)
  })
})
