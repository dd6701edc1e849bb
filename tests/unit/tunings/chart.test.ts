import { describe, expect, it } from 'vitest'
import { STEEL_STRING_GUITAR } from '../../../shared/score/create'
import type { Capo } from '../../../shared/score/types'
import { catalogue, entriesFor, stringsOf } from '../../../shared/tunings/catalogue'
import { chartOf } from '../../../shared/tunings/chart'
import { neckProblem, setProblem } from '../../../shared/tunings/input'
import { readSlug } from '../../../shared/tunings/slug'
import { LIGHT_SET, MEDIUM_SET } from '../../../shared/tunings/sets'

const neck = (text: string, capos: Capo[] = [], instrument = STEEL_STRING_GUITAR) =>
  ({ strings: text.split(' ').reverse().map(pitch => ({ pitch })), capos, instrument })

describe('the chart of C G D G C D', () => {
  const chart = chartOf({ ...neck('C2 G2 D3 G3 C4 D4'), key: { fifths: 1, mode: 'major' } })

  it('tells what the tuning is and changes', () => {
    expect(chart).toMatchObject({ slug: 'c2-g2-d3-g3-c4-d4', letters: 'C G D G C D', names: ['Orkney'], summary: 'Three strings down, one up a half step, two as they were' })
    // S. Baughman gives the moves; likenesses are common practice: a string with the same letter is fingered alike.
    expect(chart.strings!.map(each => [each.from, each.to, each.changeText, each.likeText])).toEqual([
      ['E4', 'D4', '−2', 'string 4, an octave up'], ['B3', 'C4', '+1', 'no string of the other tuning'], ['G3', 'G3', '', 'itself'],
      ['D3', 'D3', '', 'itself'], ['A2', 'G2', '−2', 'string 3, an octave down'], ['E2', 'C2', '−4', 'no string of the other tuning']])
    expect(chart.plan!.steps.map(each => each.string)).toEqual([6, 5, 1, 2])
  })

  it('names barres, scale, chords and load', () => {
    expect(chart.barres.map(each => each.sound!.symbol).slice(0, 8)).toEqual(['Csus2', 'C♯sus2', 'Dsus2', 'E♭sus2', 'Esus2', 'Fsus2', 'F♯sus2', 'Gsus2'])
    expect(chart.scale.open.map(each => each?.name)).toEqual(['D', 'C', 'G', 'D', 'G', 'C'])
    expect(chart.chords.map(each => each.symbol)).toEqual(['G', 'Am', 'Bm', 'C', 'D', 'Em', 'D7'])
    expect(chart.chords.every(each => each.shapes.length > 0)).toBe(true)
    expect(chart.run.up.length).toBeGreaterThan(8)
    expect(chart.loadSentence).toBe('89 percent of the set’s tension, one string slack')
    expect(chart.loadNote).toMatch(/7 percent/)
  })
})

describe('charts', () => {
  it.each(catalogue.map(each => [each.name, each] as const))('%s can be worked out, with and without capos', (_name, tuning) => {
    const strings = stringsOf(tuning)
    for (const capos of [[], [{ fret: 3 }], [{ fret: 2, strings: [1, 2, 3] }, { fret: 1 }]]) {
      const chart = chartOf({ strings, capos, instrument: STEEL_STRING_GUITAR })
      expect(chart.names).toContain(tuning.name)
      expect(readSlug(chart.slug).kind).toBe('tuning')
      expect(chart.strings?.length ?? strings.length).toBe(strings.length)
      expect(chart.load === null).toBe(strings.length !== 6)
    }
  })

  it('have no comparison where no instrument has as many strings', () => {
    const chart = chartOf(neck('A1 B1 E2 A2 D3 G3 B3 E4 A4'))
    expect(chart).toMatchObject({ strings: null, plan: null, summary: null, blocks: [], load: null })
  })

  it('compare with any tuning, and reckon with any set', () => {
    const openD = neck('D2 A2 D3 F#3 A3 D4')
    const chart = chartOf({ ...openD, reference: neck('D2 G2 D3 G3 B3 D4').strings, set: MEDIUM_SET })
    expect(chart.strings!.map(each => each.halfSteps)).toEqual([0, -2, -1, 0, 2, 0])
    expect(chart.load!.set).toBe(MEDIUM_SET)
    expect(chartOf({ ...openD, set: null }).load).toBeNull()
  })

  it('sound in another key behind a capo', () => {
    const chart = chartOf(neck('D2 G2 D3 G3 B3 D4', [{ fret: 2 }]))
    expect([chart.key.fifths, chart.soundingKey.fifths]).toEqual([1, 3])
    expect(chart.scale.name).toBe('A major')
    expect(chart.chords[0]).toMatchObject({ symbol: 'A' })
    expect(chart.chords[0]!.shapes[0]!.frets).toEqual([0, 0, 0, 0, 0, null])
  })

  it('refuse an unknown scale', () => expect(() => chartOf({ ...neck('E2 A2 D3 G3 B3 E4'), scale: 'no such' })).toThrow(RangeError))
})

describe('bad input names its field', () => {
  it.each([
    [neck('E2 A2 D3'), 'strings', /4 to 10 strings, not 3/],
    [neck('E2 H2 D3 G3'), 'string 3', /“H2” is no pitch/],
    [neck('E2 A2 D3 D9'), 'string 1', /higher than any string bears/],
    [neck('C0 A2 D3 G3'), 'string 4', /too low to be heard/],
    [neck('E2 A2 D3 G3', [{ fret: 20 }]), 'capo 1', /beyond this neck of 20 frets/],
    [neck('E2 A2 D3 G3', [{ fret: 2 }, { fret: 0 }]), 'capo 2', /fret 0 is none/],
    [neck('E2 A2 D3 G3', [{ fret: 2, strings: [5] }]), 'capo 1', /covers string 5; this instrument has 4/],
    [neck('E2 A2 D3 G3', [{ fret: 2, strings: [] }]), 'capo 1', /covers no string/],
    [neck('E2 A2 D3 G3', [], { scaleLength: 100, frets: 20 }), 'scale length', /between 300 and 1000/],
    [neck('E2 A2 D3 G3', [], { scaleLength: 650, frets: 3 }), 'frets', /5 to 36 frets/],
    [{ ...neck('E2 A2 D3 G3'), strings: [{ pitch: 'D4' }, { pitch: 'B3' }, { pitch: 'G3' }, { pitch: 'G4', from: 25 }] }, 'string 4', /starts at fret 25/],
  ])('%#', (own, field, problem) => expect(neckProblem(own)).toEqual({ field, problem: expect.stringMatching(problem) }))

  it('and gauges', () => {
    expect(setProblem(LIGHT_SET, 6)).toBeNull()
    expect(setProblem(LIGHT_SET, 7)).toMatchObject({ field: 'gauges' })
    expect(setProblem({ ...LIGHT_SET, gauges: LIGHT_SET.gauges.map((gauge, index) => (index === 2 ? { kind: 'bronze', inches: 0.012 } : gauge)) }, 6)).toMatchObject({ field: 'gauge 3' })
  })

  it('and nothing for a sound instrument', () => expect(neckProblem(neck('G4 C4 E4 A4', [{ fret: 2, strings: [1, 2] }]))).toBeNull())
})

it('finds a tuning by its sound, however it is spelled', () => {
  expect(entriesFor(neck('E2 B2 E3 Ab3 B3 Fb4').strings).map(each => each.name)).toEqual(['Open E'])
  expect(entriesFor(neck('E2 B2 E3 Ab3 B3 F4').strings)).toEqual([])
})
