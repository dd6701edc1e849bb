import { describe, expect, it } from 'vitest'
import { STANDARD_TUNING, STEEL_STRING_GUITAR } from '../../../shared/score/create'
import { fretMm, soundingLengthMm, spanBetween, spanMm, spanWord } from '../../../shared/hand/geometry'

const SCALE = 647.7
const board = (capos: { fret: number, strings?: number[] }[] = []) => ({ strings: STANDARD_TUNING, capos, instrument: STEEL_STRING_GUITAR })

describe('fret positions', () => {
  // R. M. Mottola, American Lutherie 130, at a scale of 647.7 mm.
  it.each([[1, 36.35], [3, 103.05], [5, 162.47], [7, 215.41], [12, 323.85]])('fret %i lies %f mm from the nut', (fret, mm) => {
    expect(fretMm(SCALE, fret)).toBeCloseTo(mm, 2)
  })

  // The luthier's rule in the same article: each fret takes the remaining length divided by 17.817.
  it('agrees with the remaining length divided by 17.817 at each of 24 frets', () => {
    let nut = 0
    for (let fret = 1; fret <= 24; fret += 1) {
      nut += (SCALE - nut) / 17.817
      expect(Math.abs(fretMm(SCALE, fret) - nut)).toBeLessThan(0.05)
    }
  })

  it('halves the string at the octave', () => expect(soundingLengthMm(SCALE, 12)).toBeCloseTo(SCALE / 2, 9))
})

describe('spans', () => {
  // Calculated from the formula above: fret p to p+3 and p to p+4 at positions I, V, VII and XII.
  it.each([[1, 4, 97], [5, 8, 77], [7, 10, 69], [12, 15, 52], [1, 5, 126], [5, 9, 100]])('fret %i to %i is %i mm', (from, to, mm) => {
    expect(Math.round(spanMm(SCALE, from, to))).toBe(mm)
    expect(spanMm(SCALE, to, from)).toBe(spanMm(SCALE, from, to))
  })

  it('shrinks by 11 percent behind a capo at 2, since 2^(−2/12) is 0.891', () => {
    const open = spanBetween(board(), { string: 1, fret: 1 }, { string: 2, fret: 4 })!
    expect(spanBetween(board([{ fret: 2 }]), { string: 1, fret: 1 }, { string: 2, fret: 4 })! / open).toBeCloseTo(0.891, 3)
  })

  it('measures from each string’s own capo', () => {
    // String 1 fret 1 behind a partial capo at 4 is the nut's fret 5.
    expect(spanBetween(board([{ fret: 4, strings: [1] }]), { string: 1, fret: 1 }, { string: 2, fret: 5 })).toBe(0)
  })

  it('needs no hand for an open string', () => expect(spanBetween(board(), { string: 1, fret: 0 }, { string: 2, fret: 9 })).toBeNull())

  it('names the limits', () => {
    expect([99, 100, 110, 120, 126].map(mm => spanWord(mm))).toEqual(['comfortable', 'comfortable', 'stretch', 'hard', 'beyond reach'])
    expect(spanWord(110, { comfortable: 90, stretch: 100, hard: 112 })).toBe('hard')
  })
})
