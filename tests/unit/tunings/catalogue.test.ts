import { describe, expect, it } from 'vitest'
import { midiOfText } from '../../../shared/score/pitch'
import { GUITAR_TUNINGS, STANDARD, catalogue } from '../../../shared/tunings/catalogue'
import { parseTuning, tuningLetters } from '../../../shared/tunings/parse'

/** Changes per string, low to high, in half steps from E2 A2 D3 G3 B3 E4. Sources: those named in the catalogue; the arithmetic is the trade's. */
const CHANGES: Record<string, number[]> = {
  'Drop D': [-2, 0, 0, 0, 0, 0], // MEI Guidelines, data.COURSETUNING guitar.drop.D
  'Open D': [-2, 0, 0, -1, -2, -2], // MEI guitar.open.D
  'Open G, taro patch': [-2, -2, 0, 0, 0, -2], // MEI guitar.open.G
  'Open A': [0, 0, 2, 2, 2, 0], // MEI guitar.open.A
  'Orkney': [-4, -2, 0, 0, 1, -2], // S. Baughman, guitarplayer.com 2007, gives the moves
  'Open E': [0, 2, 2, 1, 0, 0],
  'D A D D A D': [-2, 0, 0, -5, -2, -2],
  'C6': [-4, 0, -2, 0, 1, 0],
  'All fourths': [0, 0, 0, 0, 1, 1],
  'All down two': [-2, -2, -2, -2, -2, -2],
  'C G D A E G': [-4, -2, 0, 2, 5, 3],
}

const midis = (pitches: readonly string[]) => pitches.map(midiOfText)

describe('catalogue', () => {
  it.each(Object.entries(CHANGES))('%s changes the strings as published', (name, changes) => {
    const tuning = GUITAR_TUNINGS.find(each => each.name === name)!
    const standard = midis(STANDARD.pitches)
    expect(midis(tuning.pitches).map((midi, index) => midi - standard[index]!)).toEqual(changes)
  })

  it('names no tuning twice, by name or by pitches', () => {
    expect(new Set(catalogue.map(each => each.name)).size).toBe(catalogue.length)
    expect(new Set(catalogue.map(each => midis(each.pitches).join())).size).toBe(catalogue.length)
  })
})

describe('parseTuning', () => {
  it.each(GUITAR_TUNINGS.map(each => [each.name, each.pitches.join(' ')]))('reads %s with octaves', (_name, text) => {
    expect(parseTuning(text)).toEqual({ strings: text.split(' ').map(pitch => ({ pitch })).reverse() })
  })

  // Common practice: a tuning is said as letters, low string first; which octave is meant follows from the guitar's strings.
  it.each([
    ['C G D G C D', 'C2 G2 D3 G3 C4 D4'],
    ['CGDGCD', 'C2 G2 D3 G3 C4 D4'],
    ['D A D F# A D', 'D2 A2 D3 F#3 A3 D4'],
    ['DADF#AD', 'D2 A2 D3 F#3 A3 D4'],
    ['dgdgbd', 'D2 G2 D3 G3 B3 D4'],
    ['DGDGBbD', 'D2 G2 D3 G3 Bb3 D4'],
    ['Eb Ab Db Gb Bb Eb', 'Eb2 Ab2 Db3 Gb3 Bb3 Eb4'],
    ['D–G–D–G–B♭–D', 'D2 G2 D3 G3 Bb3 D4'],
  ])('reads %s', (text, pitches) => {
    expect(parseTuning(text)).toEqual({ strings: pitches.split(' ').map(pitch => ({ pitch })).reverse() })
  })

  it('keeps re-entrant strings in their order', () => {
    expect(parseTuning('G4 C4 E4 A4')).toEqual({ strings: ['A4', 'E4', 'C4', 'G4'].map(pitch => ({ pitch })) })
  })

  it.each([
    ['E A D', /4 to 10 strings/],
    ['C2 H2 D3 G3 C4 D4', /String 5: “H2” is no pitch/],
    ['C2 G2 D3 G3 C4 D9', /String 1: D9 is outside/],
    ['G C E A', /String 4: give “G” its octave/],
    ['', /0 were read/],
  ])('says what is wrong with “%s”', (text, message) => {
    expect(parseTuning(text)).toMatchObject({ problem: expect.stringMatching(message) })
  })

  it('writes the letters low string first', () => {
    expect(tuningLetters([{ pitch: 'D4' }, { pitch: 'Bb3' }, { pitch: 'F#3' }, { pitch: 'D3' }])).toBe('D F♯ B♭ D')
  })
})
