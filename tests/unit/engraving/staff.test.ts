import { describe, expect, it } from 'vitest'
import { alterInKey, notationAt, type StaffNote } from '../../../shared/engraving'
import { STEPS, parsePitch } from '../../../shared/score/pitch'
import type { Head } from '../../../shared/score/types'
import { parseScore } from '../../support/score'

const bar = (text: string, index = 0, head: Partial<Head> = {}) => notationAt(parseScore(text, head), index)
const notes = (text: string, index = 0, head: Partial<Head> = {}): readonly StaffNote[] => bar(text, index, head).events.flatMap(event => event.notes)
const written = (text: string, index = 0, head: Partial<Head> = {}): string[] => notes(text, index, head).map(note => note.step + note.octave)
const accidentals = (text: string, index = 0): (number | null)[] => notes(text, index).map(note => note.accidental)
const tuned = (pitches: string): Partial<Head> => ({ strings: pitches.split(' ').map(pitch => ({ pitch })) })

describe('pitch on the staff', () => {
  it('is written an octave above the sound: open strings of standard tuning (common practice, treble clef with 8 below)', () => {
    // The open sixth string, E2, stands below the third ledger line; the first, E4, in the top space.
    expect(notes('6/0q 5/0q 4/0q 3/0q 2/0q 1/0q').map(note => [note.step + note.octave, note.position]))
      .toEqual([['E3', -7], ['A3', -4], ['D4', -1], ['G4', 2], ['B4', 4], ['E5', 7]])
  })

  it('follows the strings as they are tuned', () => {
    expect(written('6/0q 5/0q 1/2q', 0, tuned('D4 C4 G3 D3 G2 C2'))).toEqual(['C3', 'G3', 'E5'])
    expect(written('1/0q 1/2q', 0, tuned('E4 B3 G3 D3 A2 E2 B1'))).toEqual(['E5', 'F5'])
  })

  it('ignores a full capo, and shows what a partial one changes', () => {
    expect(written('3/0q', 0, { capos: [{ fret: 2 }] })).toEqual(['G4'])
    expect(written('3/0q 4/0q 5/0q', 0, { capos: [{ fret: 2, strings: [3, 4, 5] }] })).toEqual(['A4', 'E4', 'B3'])
  })

  it('of a natural harmonic is the pitch that sounds, with a diamond head', () => {
    // Partial 2 of E4 is E5, partial 3 of A2 is E4 (12·log₂3 = 19.02 half steps).
    expect(notes('1/12<q 5/7<q').map(note => [note.step + note.octave, note.head])).toEqual([['E6', 'diamond'], ['E5', 'diamond']])
  })

  it('of a dead note has a cross', () => {
    expect(notes('3/0xq')[0]!.head).toBe('cross')
  })
})

describe('accidentals', () => {
  it('are what the key does not say: signatures of F and D major, C flat and C sharp major (common practice)', () => {
    const altered = (fifths: number): string => STEPS.filter(step => alterInKey(step, fifths) !== 0).join('')
    expect([altered(-1), altered(2), altered(0), altered(7), altered(-7)]).toEqual(['B', 'CF', '', 'CDEFGAB', 'CDEFGAB'])
    expect(accidentals('{D} 2/2q 2/1q 1/2q 1/1q')).toEqual([null, 0, null, 0])
  })

  it('hold to the bar line at their own octave (Gould, Behind Bars, accidentals)', () => {
    // F#5, F#5, F4 sharp an octave lower: it says so itself; then F natural, again natural.
    expect(accidentals('{C} 1/2e 1/2e 4/4e 1/1e 1/1q')).toEqual([1, null, 1, 0, null])
    expect(accidentals('{C} 1/2w | 1/2w', 1)).toEqual([1])
  })

  it('hold for the other voice too, in time order', () => {
    // Lower voice: string 3 fret 11 is F#4 like string 1 fret 2.
    expect(accidentals('{C} 1/2h 1/2h ; 3/11h 3/10h')).toEqual([1, null, null, 0])
  })

  it('are not repeated on a note tied over the bar line, and do not hold beyond it (Gould, tied accidentals)', () => {
    expect(accidentals('{C} 1/2=w | 1/2h 1/2h', 1)).toEqual([null, 1])
  })

  it('of Chopin, op. 28 no. 20, bar 1: only the B natural (MusicXML 4.0 tutorial)', () => {
    const pitches = ['G3', 'Eb4', 'Ab3', 'Eb4', 'Eb4', 'G4', 'D4', 'F4', 'Eb3', 'G3', 'B3', 'C4']
    // Each on its own string, so that every one can be fretted: sounding an octave below, as staves here write.
    const head = { strings: ['G3', 'G2', 'B2', 'D3'].map(pitch => ({ pitch })) }
    const place = (text: string): string => {
      const { step, alter, octave } = parsePitch(text)!
      const midi = 12 * octave + { C: 0, D: 2, E: 4, F: 5, G: 7, A: 9, B: 11 }[step] + alter
      const string = [55, 43, 47, 50].findIndex(open => midi >= open && midi - open <= 20)
      return string < 0 ? '' : `${string + 1}/${midi - [55, 43, 47, 50][string]!}e`
    }
    const playable = pitches.map(place).filter(Boolean)
    const found = notes(`{Eb} ${playable.join(' ')}`, 0, head)
    expect(found.filter(note => note.accidental !== null).map(note => [note.step, note.accidental])).toEqual([['B', 0]])
  })
})

describe('stems', () => {
  const stems = (text: string): string => bar(text).events.filter(event => event.notes.length).map(event => (event.stem === 1 ? 'u' : 'd')).join('')

  it('of one voice turn by position: "Après un rêve", voice, bar 2: G4 up, C5 and D5 down (MusicXML 4.0 tutorial)', () => {
    // Written G4 C5 D5 sound an octave lower: G3 C4 D4.
    expect(stems('{3/4} 3/0q 2/1q 2/3q')).toBe('udd')
  })

  it('on the middle line turn down; a chord by its farthest note (Gould, Behind Bars, stems)', () => {
    expect(stems('2/0q (6/0 1/0)q (3/0 1/0)q')).toBe('dud')
  })

  it('under one beam turn one way', () => {
    expect(stems('{2/4} 6/0e 1/0e 1/0e 1/0e')).toBe('uuuu')
    expect(stems('{2/4} 3/0e 1/3e 1/3e 3/0e')).toBe('dddd')
  })

  it('of two voices part, whatever the position', () => {
    const { events } = bar('{2/4} 6/0q 6/0q ; 1/0q 1/0q')
    expect(events.map(event => `${event.voice} ${event.stem}`)).toEqual(['upper 1', 'lower -1', 'upper 1', 'lower -1'])
  })
})

describe('rests', () => {
  it('leave the middle where two voices sound, and one serves both when they rest alike', () => {
    const { events } = bar('{4/4} zq 1/0q zh ; 6/0h zh')
    expect(events.filter(event => !event.notes.length).map(event => [event.voice, event.restPosition > 4, event.hidden]))
      .toEqual([['upper', true, false], ['upper', true, false], ['lower', false, true]])
    expect(bar('{4/4} zq 1/0h.').events[0]!.restPosition).toBe(4)
  })

  it('keep clear of what another voice strikes in the same column', () => {
    // Open string 4 is D3, written D4: position −1, below the staff. The rest beneath it reaches a space and a half up.
    const { events, bottom } = bar('{4/4} 4/0q 1/0h. ; zq 6/0h.')
    const [rest, note] = [events.find(event => !event.notes.length)!, events.find(event => event.voice === 'upper')!]
    expect(note.notes.map(each => each.position)).toEqual([-1])
    expect(rest.restPosition + 3).toBeLessThanOrEqual(-1 - 1)
    expect(bottom).toBeGreaterThanOrEqual(40 + 5 * -rest.restPosition)
    // Where nothing is in the way it stands where it does usually, on a line either way.
    expect(bar('{4/4} 1/0q 1/0h. ; zq 6/0h.').events.find(event => !event.notes.length)!.restPosition).toBe(0)
    expect(bar('{4/4} zq 1/0h. ; 1/12q 6/0h.').events.find(event => !event.notes.length)!.restPosition % 2).toBe(0)
  })

  it('that are hidden keep their place in time', () => {
    const { events, slices } = bar('{4/4} _h 1/0h')
    expect([events[0]!.hidden, events[1]!.slice, slices.length]).toEqual([true, 1, 2])
  })
})
