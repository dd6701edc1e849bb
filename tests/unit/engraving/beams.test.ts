import { describe, expect, it } from 'vitest'
import { notationAt } from '../../../shared/engraving'
import { parseScore } from '../../support/score'

/** Beams of a bar as runs of event ids, all voices. */
const beams = (text: string, index = 0): string[] => notationAt(parseScore(text), index).beams.map(beam => beam.eventIds.join(' '))

describe('beams', () => {
  it('join eighths by the half bar in 4/4, never across its middle (Gould, Behind Bars, beaming in simple time)', () => {
    expect(beams('{4/4} 3/0e 3/0e 3/0e 3/0e 3/0e 3/0e 3/0e 3/0e')).toEqual(['e1 e2 e3 e4', 'e5 e6 e7 e8'])
    expect(beams('{4/4} 3/0q. 3/0e 3/0e 3/0e 3/0q')).toEqual(['e3 e4'])
    expect(beams('{4/4} 3/0q 3/0e 3/0e 3/0e 3/0e 3/0q')).toEqual(['e2 e3', 'e4 e5'])
  })

  it('join each beat where shorter notes stand among the eighths (Gould: the beat stays visible)', () => {
    expect(beams('{4/4} 3/0e 3/0s 3/0s 3/0e 3/0e 3/0h')).toEqual(['e1 e2 e3', 'e4 e5'])
    expect(beams('{4/4} 3/0e. 3/0s 3/0e. 3/0s 3/0h')).toEqual(['e1 e2', 'e3 e4'])
  })

  it('span a 3/4 bar of six eighths (MusicXML 4.0 tutorial "Après un rêve", piano, bar 1) and its triplets by the beat (voice, bar 3)', () => {
    expect(beams('{3/4} 3/0e 3/0e 3/0e 3/0e 3/0e 3/0e')).toEqual(['e1 e2 e3 e4 e5 e6'])
    expect(beams('{3/4} 1/0=q [3 1/0e 1/0e 1/0e] [3 1/0e 1/0e 1/0e]')).toEqual(['e2 e3 e4', 'e5 e6 e7'])
    expect(beams('{3/4} 3/0q 3/0e 3/0e 3/0e 3/0e')).toEqual(['e2 e3', 'e4 e5'])
  })

  it('join by the dotted quarter in 6/8: O\'Neill 1903 no. 677, bars "d2c Bcd" and "A2G FED" (spaces as in its transcription)', () => {
    expect(beams('{6/8} 1/0q 2/3e 3/4e 2/1e 1/0e')).toEqual(['e3 e4 e5'])
    expect(beams('{6/8} 1/0e 2/3e 3/4e 3/4e 2/1e 1/0e')).toEqual(['e1 e2 e3', 'e4 e5 e6'])
  })

  it('stop at rests and at quarters', () => {
    expect(beams('{6/8} 1/0e ze 1/0e 1/0e 1/0q')).toEqual([])
    expect(beams('{2/4} 3/0e ze 3/0e 3/0e')).toEqual(['e3 e4'])
  })

  it('of a pickup count from the bar line that follows', () => {
    // Three eighths before 6/8 are its second half; in 4/4 an eighth before the last beat stands alone.
    expect(beams('{6/8} {len=1/2} 1/0e 1/0e 1/0e 1/0e | 1/0h.')).toEqual(['e2 e3 e4'])
    expect(beams('{4/4} {len=3/8} 1/0e 1/0e 1/0e | 1/0w')).toEqual(['e1 e2 e3'])
    expect(beams('{4/4} {len=5/8} 1/0e 1/0e 1/0e 1/0e 1/0e | 1/0w')).toEqual(['e2 e3 e4 e5'])
  })

  it('go on in an overfull bar', () => {
    expect(beams('{2/4} 3/0q 3/0q 3/0e 3/0e')).toEqual(['e3 e4'])
  })

  it('of 32nds show each eighth by a break of the inner beams (Gould, secondary beams)', () => {
    const [beam] = notationAt(parseScore('{2/4} 3/0t 3/0t 3/0t 3/0t 3/0t 3/0t 3/0t 3/0t 3/0q'), 0).beams
    expect(beam).toEqual({ eventIds: ['e1', 'e2', 'e3', 'e4', 'e5', 'e6', 'e7', 'e8'], breaks: [3] })
  })

  it('keep to their voice', () => {
    expect(beams('{2/4} 1/0e 1/0e 1/0e 1/0e ; 6/0q 6/0e 6/0e')).toEqual(['e1 e2 e3 e4', 'e6 e7'])
  })
})
