import fc from 'fast-check'
import { TimeSignature } from 'tonal'
import { describe, expect, it } from 'vitest'
import { add, equals, fraction, subtract, sum, toNumber } from '../../../shared/score/fraction'
import { barLength, beatOf, isCompound, lengthOf, meterLength, plainLength, playedLength, secondsOf, startsOf, surplus, voiceTotal } from '../../../shared/score/time'
import { BASES } from '../../../shared/score/types'
import { meters, scores } from '../../support/arbitrary'
import { parseScore } from '../../support/score'

const upper = (text: string) => parseScore(text).bars[0]!.voices.upper!

describe('written lengths', () => {
  it('halve from the whole note down; a dot adds half, two dots three quarters (common practice)', () => {
    expect(BASES.map(base => toNumber(plainLength({ base, dots: 0 })))).toEqual([1, 1 / 2, 1 / 4, 1 / 8, 1 / 16, 1 / 32, 1 / 64])
    expect([0, 1, 2, 3].map(dots => plainLength({ base: 4, dots }))).toEqual([fraction(1, 4), fraction(3, 8), fraction(7, 16), fraction(15, 32)])
  })

  it('in a triplet are three in the time of two; tuplets in tuplets multiply (common practice)', () => {
    expect(voiceTotal(upper('[3 3/0e 3/0e 3/0e]'))).toEqual(fraction(1, 4))
    expect(voiceTotal(upper('[5:4 3/0s 3/0s 3/0s 3/0s 3/0s]'))).toEqual(fraction(1, 4))
    expect(voiceTotal(upper('[3 3/0q [3 3/0e 3/0e 3/0e] 3/0q]'))).toEqual(fraction(1, 2))
    expect(upper('[3 3/0q [3 3/0e 3/0e 3/0e] 3/0q]').events.map(event => lengthOf(event.length, upper('[3 3/0q [3 3/0e 3/0e 3/0e] 3/0q]').tuplets)))
      .toEqual([fraction(1, 6), fraction(1, 18), fraction(1, 18), fraction(1, 18), fraction(1, 6)])
  })

  it('place each event where the one before ends', () => {
    fc.assert(fc.property(scores, (score) => {
      for (const voice of score.bars.flatMap(bar => Object.values(bar.voices))) {
        const starts = startsOf(voice)
        const lengths = voice.events.map(event => lengthOf(event.length, voice.tuplets))
        starts.forEach((start, index) => expect(start).toEqual(sum(lengths.slice(0, index))))
        expect(voiceTotal(voice)).toEqual(add(starts.at(-1)!, lengths.at(-1)!))
      }
    }))
  })
})

describe('bars and meters', () => {
  it('are simple or compound as tonal says', () => {
    fc.assert(fc.property(meters, ({ beats, unit }) => {
      expect(isCompound({ beats, unit })).toBe(TimeSignature.get(`${beats}/${unit}`).type === 'compound')
    }))
    expect(beatOf({ beats: 6, unit: 8 })).toEqual(fraction(3, 8))
    expect(beatOf({ beats: 3, unit: 4 })).toEqual(fraction(1, 4))
    expect(beatOf({ beats: 3, unit: 8 })).toEqual(fraction(1, 8))
    expect(meterLength({ beats: 7, unit: 8 })).toEqual(fraction(7, 8))
  })

  it('know how much they are over or short, and a pickup what it is meant to hold', () => {
    const [bar] = parseScore('3/0h 3/0q ; 6/0w 6/0e').bars
    const meter = { beats: 4, unit: 4 } as const
    expect(surplus(bar!.voices.upper, bar!, meter)).toEqual(fraction(-1, 4))
    expect(surplus(bar!.voices.lower, bar!, meter)).toEqual(fraction(1, 8))
    expect(playedLength(bar!, meter)).toEqual(fraction(9, 8))
    const [pickup] = parseScore('{6/8} {len=1/8} 3/0e').bars
    expect(barLength(pickup!, { beats: 6, unit: 8 })).toEqual(fraction(1, 8))
    expect(surplus(pickup!.voices.upper, pickup!, { beats: 6, unit: 8 })).toEqual(fraction(0))
    expect(playedLength(pickup!, { beats: 6, unit: 8 })).toEqual(fraction(1, 8))
  })

  it('last at least what they hold', () => {
    fc.assert(fc.property(scores, meters, (score, meter) => {
      for (const bar of score.bars) {
        const over = subtract(playedLength(bar, meter), barLength(bar, meter))
        expect(over.n).toBeGreaterThanOrEqual(0)
        if (over.n > 0) expect(Object.values(bar.voices).some(voice => equals(voiceTotal(voice), playedLength(bar, meter)))).toBe(true)
      }
    }))
  })
})

describe('tempo', () => {
  it('counts its own note: dotted quarter = 60 makes a bar of 6/8 two seconds; quarter = 90 is the same speed (MusicXML 4.0, sound tempo)', () => {
    expect(secondsOf(fraction(6, 8), { base: 4, dots: 1, perMinute: 60 })).toBeCloseTo(2, 12)
    expect(secondsOf(fraction(6, 8), { base: 4, dots: 0, perMinute: 90 })).toBeCloseTo(2, 12)
    expect(secondsOf(fraction(1), { base: 4, dots: 0, perMinute: 120 }, 0.5)).toBeCloseTo(4, 12)
  })
})
