import { describe, expect, it } from 'vitest'
import { add, fraction, sum, toNumber } from '../../../shared/score/fraction'
import { GREENSLEEVES, NEW_BRITAIN, PLANXTY_IRWIN_FIRST_STRAIN, readAbc, soundedNotes } from '../../support/abc'

const notes = (music: string, head = 'M:4/4 L:1/8 K:C') => readAbc(`${head}\n${music}`).bars.flatMap(bar => bar.notes)
const midis = (music: string, head?: string) => notes(music, head).map(note => note.midi)
const eighths = (music: string) => notes(music).map(note => toNumber(note.length) * 8)

// All facts: the ABC music standard 2.1 (abcnotation.com), the sections named beside them.
describe('ABC reader', () => {
  it('reads octaves (4.1): C is middle C', () => expect(midis('C, C c c\' A B')).toEqual([48, 60, 72, 84, 69, 71]))
  it('reads lengths (4.3)', () => expect(eighths('A A2 A3 A/ A/2 A// A3/2 A/4')).toEqual([1, 2, 3, 0.5, 0.5, 0.25, 1.5, 0.25]))
  it('reads broken rhythm (4.4)', () => {
    expect(eighths('A>B A<B A2>B2 A>>B')).toEqual([1.5, 0.5, 0.5, 1.5, 3, 1, 1.75, 0.25])
  })
  it('spells by the key (3.1.14)', () => {
    expect(midis('F G A B c', 'K:D')).toEqual([66, 67, 69, 71, 73])
    expect(midis('B E', 'K:Bb')).toEqual([70, 63])
    expect(midis('F C', 'K:Em')).toEqual([66, 60])
    expect(midis('F C', 'K:Ador')).toEqual([66, 60])
  })
  it('keeps an accidental to the end of the bar, in its octave (11.3)', () => {
    expect(midis('^F F f =F|F', 'K:C')).toEqual([66, 66, 77, 65, 65])
    expect(midis('_B ^^C __D', 'K:C')).toEqual([70, 62, 60])
  })
  it('reads triplets (4.13)', () => expect(notes('(3ABc d').map(note => note.length)).toEqual([fraction(1, 12), fraction(1, 12), fraction(1, 12), fraction(1, 8)]))
  it('reads rests and ties (4.5, 4.11)', () => {
    expect(soundedNotes(readAbc('L:1/4 K:C\nA2-|A z B').bars)).toEqual([
      { midi: 69, length: fraction(3, 4) }, { midi: null, length: fraction(1, 4) }, { midi: 71, length: fraction(1, 4) },
    ])
  })
  it('keeps repeats as written (4.8)', () => {
    expect(readAbc('K:C\n|:A|B:|:c|d:|').bars.map(bar => [bar.repeatStart, bar.repeatEnd])).toEqual([[true, false], [false, true], [true, false], [false, true]])
  })
  it('says what it does not understand', () => expect(() => readAbc('K:C\nA & B')).toThrow('not understood: “& B”'))
})

describe('melodies', () => {
  it.each([
    ['Planxty Irwin', PLANXTY_IRWIN_FIRST_STRAIN, 6 / 8], ['Greensleeves', GREENSLEEVES, 6 / 8], ['New Britain', NEW_BRITAIN, 3 / 4],
  ])('%s: whole bars inside, the pickup and the closing bar are one together', (_, text, whole) => {
    const { bars } = readAbc(text)
    const lengths = bars.map(bar => sum(bar.notes.map(note => note.length)))
    const first = lengths[0]!
    const last = lengths.at(-1)!
    const strainEnds = text === GREENSLEEVES ? [8, 9] : []
    lengths.slice(1, -1).forEach((length, index) => {
      if (!strainEnds.includes(index + 1)) expect(toNumber(length)).toBe(whole)
    })
    if (text === GREENSLEEVES) expect(toNumber(add(first, lengths[8]!))).toBe(whole)
    else expect(toNumber(add(first, last))).toBe(whole)
  })
  it('Planxty Irwin begins and ends on the notes of the print', () => {
    const sounded = soundedNotes(readAbc(PLANXTY_IRWIN_FIRST_STRAIN).bars)
    // Counted in the print, bar by bar: 1 + 5 + 5 + 5 + 4 + 5 + 5 + 5 + 3.
    expect(sounded).toHaveLength(38)
    // A | d c♯ B c♯ d … D C♯ D, staff pitches.
    expect(sounded.slice(0, 6).map(note => note.midi)).toEqual([69, 74, 73, 71, 73, 74])
    expect(sounded.slice(-3).map(note => note.midi)).toEqual([62, 61, 62])
  })
})
