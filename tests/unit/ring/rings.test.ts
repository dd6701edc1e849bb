import { describe, expect, it } from 'vitest'
import { beatsText, ringOfNote, ringSentence, ringsOfBar, lanesOfBar, secondsToDie } from '../../../shared/ring'
import { DEFAULT_METER } from '../../../shared/score/context'
import { fraction } from '../../../shared/score/fraction'
import { pitchLabel, spell } from '../../../shared/score/pitch'
import { soundingMidi } from '../../../shared/score/sounding'
import type { Head, OpenString, Score } from '../../../shared/score/types'
import { parseScore } from '../../support/score'

const strings = (low: string): readonly OpenString[] => low.split(' ').reverse().map(pitch => ({ pitch }))
const LET_RING: Partial<Head> = { ring: 'let-ring' }

/** "string/fret beats reason" of each struck note, in quarters. */
const rings = (score: Score, bar = 0): string[] => ringsOfBar(score, bar).map((ring) => {
  const note = score.bars[bar]!.voices[ring.voice]!.events.flatMap(event => event.notes).find(each => each.id === ring.noteId)!
  return `${note.string}/${note.fret} ${ring.sounds.n * 4 / ring.sounds.d} ${ring.ends}`
})

const pitches = (score: Score): string[] => score.bars[0]!.voices.upper!.events.flatMap(event =>
  event.notes.map(note => pitchLabel(spell(Math.round(soundingMidi(score.head, note)), 2))))

describe('what ends a note', () => {
  // T. McManus, "Harp-like Scales in DADGAD": the fingering is from there, that each note rings until its string is used is its point.
  it('lets the campanella scale in D A D G A D ring over itself', () => {
    const score = parseScore('{5/4} 1/0q 2/4q 3/4q 2/0q 3/0q | |', { ...LET_RING, strings: strings('D2 A2 D3 G3 A3 D4') })
    expect(pitches(score)).toEqual(['D4', 'C♯4', 'B3', 'A3', 'G3'])
    // Dying away at 80 a minute: D4 (MIDI 62) 12 s · 2^((40 − 62)/24) = 6.357 s = 8.48 beats; A3 likewise 9.79, G3 10.37 beats.
    expect(rings(score)).toEqual(['1/0 8.46875 dies', '2/4 2 string', '3/4 2 string', '2/0 9.78125 dies', '3/0 10.34375 dies'])
  })

  // G. Serci, campanella lesson: G4 F♯4 as 1/3 2/7, then an open string.
  it('lets G4 and F♯4 on two strings ring into an open string', () => {
    const score = parseScore('1/3q 2/7q 1/0q zq', LET_RING)
    expect(pitches(score)).toEqual(['G4', 'F♯4', 'E4'])
    expect(rings(score).slice(0, 2)).toEqual(['1/3 2 string', '2/7 3 end'])
  })

  it('ends a note as written where the piece says so', () => {
    expect(rings(parseScore('6/0q 1/3e ze 1/5h'))).toEqual(['6/0 1 written', '1/3 0.5 written', '1/5 2 written'])
  })

  it('hears the rule of the note before that of the bar, and that before the head’s', () => {
    expect(rings(parseScore('{ring=let-ring} 6/0!q 5/0h zq | '))).toEqual(['6/0 1 damp', '5/0 7 end'])
    expect(rings(parseScore('6/0lq 5/0q zq 6/0q'))).toEqual(['6/0 3 string', '5/0 1 written', '6/0 1 written'])
    expect(rings(parseScore('{ring=written} 6/0q 5/0q zh', LET_RING))).toEqual(['6/0 1 written', '5/0 1 written'])
  })

  it('ends a note when another voice takes its string', () => {
    expect(rings(parseScore('zq 4/2q zh ; 4/0w'))).toEqual(['4/0 1 string', '4/2 1 written'])
  })

  it('uses the string again at a hammer-on and a pull-off', () => {
    expect(rings(parseScore('3/0hq 3/2pq 3/0h', LET_RING))).toEqual(['3/0 1 string', '3/2 1 string', '3/0 2 end'])
  })

  it('lets the last notes ring to the end of the piece', () => {
    expect(rings(parseScore('1/0q 2/0q zh', LET_RING))).toEqual(['1/0 4 end', '2/0 3 end'])
  })
})

describe('ties', () => {
  it('adds the tied lengths, over the bar line and in triplets', () => {
    expect(rings(parseScore('zq 1/3=h. | 1/3=q 1/3e ze'))).toEqual(['1/3 4.5 written'])
    expect(rings(parseScore('[3 1/3e 1/3=e 1/3=e] 1/3q zh'))).toEqual(['1/3 0.3333333333333333 written', '1/3 1.6666666666666667 written'])
  })

  it('strikes nothing at the end of a tie', () => {
    const score = parseScore('zq 1/3=h. | 1/3q zq zh')
    expect(rings(score, 1)).toEqual([])
    expect(ringOfNote(score, 1, 'n2')).toMatchObject({ start: fraction(0), sounds: fraction(1, 4), ends: 'written' })
  })

  it('takes a tie to another fret, or to nothing, as no tie', () => {
    expect(rings(parseScore('1/3=q 1/5q zh'))).toEqual(['1/3 1 written', '1/5 1 written'])
    expect(rings(parseScore('1/3=q zq 1/3h'))).toEqual(['1/3 1 written', '1/3 2 written'])
  })

  it('follows the last word of a tied chain', () => {
    expect(rings(parseScore('1/0l=q 1/0q zh'))).toEqual(['1/0 4 end'])
    expect(rings(parseScore('1/0=q 1/0!q zh', LET_RING))).toEqual(['1/0 2 damp'])
  })
})

describe('two voices on one string', () => {
  it('plucks the same note once, for the longer', () => {
    expect(rings(parseScore('4/0q zq zh ; 4/0h. zq'))).toEqual(['4/0 3 written'])
    expect(rings(parseScore('4/0q zq zh ; 4/0lh. zq'))).toEqual(['4/0 4 end'])
  })

  // A stopped string vibrates between the bridge and the nearest finger (mechanics of the string; common practice).
  it('hears the higher of two frets', () => {
    const score = parseScore('4/2q zq zh ; 4/5h. zq')
    expect(rings(score)).toEqual(['4/5 3 written'])
    const silent = ringOfNote(score, 0, 'n1')!
    expect(silent.sounds).toEqual(fraction(0))
    expect(ringSentence(silent, DEFAULT_METER)).toBe('is not heard: string 4 is stopped nearer the bridge at the same moment')
  })
})

describe('dying away', () => {
  it('takes longer the lower the string, and on open strings', () => {
    expect(secondsToDie(40, true)).toBe(12)
    expect(secondsToDie(64, true)).toBe(6)
    expect(secondsToDie(64, false)).toBeCloseTo(4.5, 10)
  })

  it('counts seconds by the tempo, also where it changes', () => {
    // E4 takes 6 s: 2 s are 2 beats at 60 in the first bar, the other 4 s are 8 beats at 120.
    expect(rings(parseScore('{q=60} zh 1/0h | {q=120} _w | _w', LET_RING))).toEqual(['1/0 10 dies'])
  })

  it('hears harmonics as open strings, by the pitch that sounds', () => {
    // E3: 12 s · 2^((40 − 52)/24) = 8.485 s.
    expect(rings(parseScore('{q=60} 6/12<q _h. | _w | _w | _w', LET_RING))[0]).toMatch(/^6\/12 8\.4687\d* dies$/)
    expect(ringsOfBar(parseScore('6/12<q', LET_RING), 0)[0]!.open).toBe(true)
    expect(ringsOfBar(parseScore('6/12q', LET_RING), 0)[0]!.open).toBe(false)
  })

  it('makes a dead note a thud', () => {
    expect(rings(parseScore('{q=60} 6/0xq _h.'))).toEqual(['6/0 0.09375 dies'])
  })
})

describe('lanes', () => {
  it('clips what rings to each bar', () => {
    const score = parseScore('zh. 6/0q | 1/3q zq 6/3h', LET_RING)
    expect(lanesOfBar(score, 0).map(lane => [lane.string, lane.from, lane.to, lane.open, lane.starts, lane.ends])).toEqual([
      [6, fraction(3, 4), fraction(1), true, true, false],
    ])
    expect(lanesOfBar(score, 1).map(lane => [lane.string, lane.from, lane.to, lane.open, lane.starts, lane.ends])).toEqual([
      [1, fraction(0), fraction(1), false, true, true],
      [6, fraction(0), fraction(1, 2), true, false, true],
      [6, fraction(1, 2), fraction(1), false, true, true],
    ])
  })
})

describe('words', () => {
  const ring = (text: string, at = 0) => ringsOfBar(parseScore(text, LET_RING), 0)[at]!

  it('says what a note does', () => {
    expect(ringSentence(ring('3/0q. 3/2e zh'), DEFAULT_METER)).toBe('rings 1½ beats, until string 3 is played again')
    expect(ringSentence(ring('3/0!e zh'), DEFAULT_METER)).toBe('sounds ½ beat, then it is damped')
    expect(ringSentence(ring('{ring=written} 3/0q zh'), DEFAULT_METER)).toBe('sounds 1 beat, as written')
    expect(ringSentence(ring('3/0q'), DEFAULT_METER)).toBe('rings 4 beats, to the end of the piece')
    expect(ringSentence(ring('{q=60} 1/0q _h. | _w'), DEFAULT_METER)).toBe('rings about 6 beats, until it dies away')
  })

  it('counts the beat that the meter has', () => {
    expect(beatsText(fraction(3, 8), { beats: 6, unit: 8 })).toBe('1 beat')
    expect(beatsText(fraction(1, 8), { beats: 6, unit: 8 })).toBe('⅓ beat')
    expect(beatsText(fraction(1, 2), { beats: 9, unit: 8 })).toBe('1⅓ beats')
    expect(beatsText(fraction(3, 8), { beats: 3, unit: 8 })).toBe('3 beats')
    expect(beatsText(fraction(5, 64), { beats: 4, unit: 4 })).toBe('5⁄16 beat')
    expect(beatsText(fraction(21, 64), { beats: 4, unit: 4 })).toBe('1 5⁄16 beats')
  })
})
