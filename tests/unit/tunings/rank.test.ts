import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { STANDARD_TUNING, createScore } from '../../../shared/score/create'
import { midiOfText } from '../../../shared/score/pitch'
import type { Key, Note, Score } from '../../../shared/score/types'
import { chromaOf, tonicOf } from '../../../shared/tunings/board'
import { GUITAR_TUNINGS, OTHER_TUNINGS, STANDARD, stringsOf } from '../../../shared/tunings/catalogue'
import { bestFit, histogramOf } from '../../../shared/tunings/fit'
import { melodyOf, parseMelody, usualRoots, type Melody } from '../../../shared/tunings/melody'
import { rankTunings, runRanking, type RankingRequest, type Suggestion } from '../../../shared/tunings/rank'
import { reasonsFor, settingText } from '../../../shared/tunings/reasons'
import { LIGHT_SET } from '../../../shared/tunings/sets'

const D: Key = { fifths: 2, mode: 'major' }
const melody = (text: string, key = D) => {
  const read = parseMelody(text, key)
  if ('problem' in read) throw new Error(read.problem)
  return read
}
const request = (tune: Melody, more: Partial<RankingRequest> = {}): RankingRequest =>
  ({ melody: tune, tunings: [STANDARD, ...GUITAR_TUNINGS], from: STANDARD_TUNING, set: LIGHT_SET, scaleLength: 647.7, frets: 20, ...more })
const rank = (own: RankingRequest): { found: readonly Suggestion[], steps: number } => {
  const ranking = rankTunings(own)
  for (let steps = 0; ; steps += 1) {
    const step = ranking.next()
    if (step.done) return { found: step.value, steps }
    expect(step.value.done).toBe(steps + 1)
  }
}

describe('how a melody lies on the strings', () => {
  const opens = stringsOf(GUITAR_TUNINGS.find(each => each.pitches.join(' ') === 'D2 A2 D3 G3 A3 D4')!).map(({ pitch }) => midiOfText(pitch))

  it('counts time on open strings, in the octave where it lies best', () => {
    const fit = bestFit(histogramOf(melody('D5:2 A4 G4 F#4')), usualRoots(D), 0, { opens, fretsLeft: 20 })
    expect(fit.shift).toBe(-12)
    expect(fit.open).toBeCloseTo(4 / 5, 9)
    expect(fit.openPitches.map(each => each)).toEqual([55, 57, 62])
    expect([fit.openRoots, fit.wantingRoots.concat(fit.heldRoots)]).toEqual([[2, 9], [7]])
  })

  it('knows what the neck lacks', () =>
    expect(bestFit(histogramOf(melody('D2 D7')), usualRoots(D), 0, { opens, fretsLeft: 12 }).lost).toBeCloseTo(0.5, 9))

  // Law: transposing tune and strings together changes nothing.
  it('does not change when strings and tune move together', () => fc.assert(fc.property(
    fc.array(fc.integer({ min: 50, max: 76 }), { minLength: 1, maxLength: 20 }), fc.integer({ min: 0, max: 7 }), (midis, up) => {
      const histogram = histogramOf({ notes: midis.map(midi => ({ midi, length: 0.25 })), key: D, roots: [] })
      const a = bestFit(histogram, usualRoots(D), 0, { opens, fretsLeft: 15 })
      const b = bestFit(histogram, usualRoots(D), up, { opens: opens.map(open => open + up), fretsLeft: 15 })
      expect([b.open, b.range, b.bass, b.lost, b.shift]).toEqual([a.open, a.range, a.bass, a.lost, a.shift + up])
    })))
})

describe('ranking', () => {
  it('reports each key of each tuning, best first, no fingering twice', () => {
    const { found, steps } = rank(request(melody('D5:2 C#5 B4 A4:2 G4 F#4 E4 D4')))
    expect(steps).toBe(12 * (GUITAR_TUNINGS.length + 1))
    expect(found.map(each => each.score)).toEqual([...found.map(each => each.score)].sort((a, b) => b - a))
    expect(new Set(found.map(each => `${each.tuning.name} ${tonicOf(each.written)}`)).size).toBe(found.length)
    expect(found.length).toBe(30)
  })

  it('finds the tuning whose open strings are the tune', () => {
    // A tune of the notes G C D on the open upper strings of C G D G C D, and nothing else.
    const { found } = rank(request(melody('G3:2 C4 D4:2 C4 G3 D4', { fifths: 1, mode: 'major' }), { tonics: [7], highestCapo: 0 }))
    expect(found[0]!.fit.open).toBe(1)
    expect(['C2 G2 D3 G3 C4 D4', 'D2 G2 D3 G3 C4 D4', 'C2 G2 C3 G3 C4 D4']).toContain(found[0]!.tuning.pitches.join(' '))
  })

  it('keeps to the keys and capos asked for', () => {
    const { found } = rank(request(melody('A4 E4 C5'), { tonics: [9], highestCapo: 2, keep: 100 }))
    expect(found.every(each => tonicOf(each.key) === 9 && each.capo <= 2 && chromaOf(tonicOf(each.written) + each.capo) === 9)).toBe(true)
  })

  it('leaves out instruments with other numbers of strings', () =>
    expect(rank(request(melody('D4'), { tunings: OTHER_TUNINGS.filter(each => each.pitches.length !== 6) }))).toMatchObject({ found: [], steps: 0 }))

  it('earns nothing for a load in the red', () => {
    const openA = GUITAR_TUNINGS.filter(each => each.name === 'Open A')
    const tune = melody('A3 C#4 E4', { fifths: 3, mode: 'major' })
    const [strung] = rank(request(tune, { tunings: openA })).found
    const [unstrung] = rank(request(tune, { tunings: openA, set: null })).found
    expect(unstrung!.score - strung!.score).toBeCloseTo(10, 9)
  })

  it('says why', () => {
    const [first] = rank(request(melody('D5:2 C#5 B4 A4:2 G4 F#4 E4 D4'), { tunings: GUITAR_TUNINGS.filter(each => each.name.startsWith('D A D G A D')), tonics: [4] })).found
    expect(settingText(first!)).toBe('E major, capo 2, fingered as D major')
    expect(reasonsFor(first!)).toEqual([
      '60 percent of the melody lies on open strings: E3, A3, B3 and E4.',
      'All of it lies on the melody strings.', // E3 to E4: from string 4 open, strings 6 and 5 being the thumb's
      'Of its bass notes E and B are open and A out of reach below the melody.',
      'Three strings to retune, about a minute.',
      '91 percent of the set’s tension.',
    ])
  })
})

describe('running it in slices', () => {
  const clock = () => {
    let time = 0
    return () => (time += 5)
  }
  it('pauses, reports and comes to the same end', async () => {
    const own = request(melody('D4 A4 F#4'))
    const reports: number[] = []
    const found = await runRanking(own, { now: clock(), pause: async () => {}, onProgress: ({ done }) => reports.push(done) })
    expect(found).toEqual(rank(own).found)
    expect(reports.length).toBeGreaterThan(10)
  })

  it('stops when asked to', async () => {
    let asked = 0
    const found = await runRanking(request(melody('D4')), { now: clock(), pause: async () => {}, isCancelled: () => (asked += 1) === 3 })
    expect([found, asked]).toEqual([null, 3])
  })
})

describe('melodies', () => {
  it.each([['', /Type the melody/], ['D4 H4', /Note 2: “H4” is no pitch/], ['D4:0', /Note 1: “0” is no length/], ['D4 E4:x', /Note 2: “x” is no length/]])('“%s” is answered', (text, problem) =>
    expect(parseMelody(text, D)).toEqual({ field: 'melody', problem: expect.stringMatching(problem) }))

  it('are read from an arrangement: the top of its upper voice, the thumb’s notes as roots', () => {
    let id = 0
    const note = (string: number, fret: number): Note => ({ id: `n${id += 1}`, string, fret })
    const blank = createScore({ title: 'Test', strings: stringsOf(GUITAR_TUNINGS[9]!), capos: [{ fret: 2 }], key: { fifths: 1, mode: 'major' } }, () => 'b1')
    const event = (base: 2 | 4, notes: Note[]) => ({ id: `e${id += 1}`, length: { base, dots: 0 }, notes })
    const score: Score = { ...blank, bars: [{ ...blank.bars[0]!, voices: {
      upper: { events: [event(4, [note(1, 0), note(2, 2)]), event(4, [note(2, 0)]), event(2, [])] },
      lower: { events: [event(2, [note(6, 0)]), event(2, [note(5, 0), note(4, 0)])] },
    } }] }
    // D G D G C D with a capo at 2: string 1 sounds E4, string 2 D4, string 6 E2, string 5 A2; written in G it sounds in A.
    expect(melodyOf(score)).toEqual({
      notes: [{ midi: 64, length: 0.25 }, { midi: 62, length: 0.25 }], key: { fifths: 3, mode: 'major' },
      roots: [{ chroma: 4, weight: 0.5 }, { chroma: 9, weight: 0.5 }],
    })
    expect(melodyOf(blank)).toMatchObject({ field: 'melody', problem: expect.stringMatching(/no notes yet/) })
  })
})
