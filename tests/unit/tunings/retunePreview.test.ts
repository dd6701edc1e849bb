import { describe, expect, it } from 'vitest'
import { arrangementOptions } from '../../../composables/tuning/arrangementChart'
import { onInstrument, retunePlans } from '../../../composables/tuning/retunePreview'
import { parseScore } from '../../support/score'

const strung = (pitches: string) => pitches.split(' ').map(pitch => ({ pitch })).reverse()
const LOW = strung('D2 A2 D3 G3 B3 D4')
const STANDARD = strung('E2 A2 D3 G3 B3 E4')

describe('both ways to retune', () => {
  const score = parseScore('6/0q 5/0q | 6/2q | 6/0q (6/0 5/2)q', { strings: LOW })

  it('are counted before anything is done', () => {
    const { sound, frets } = retunePlans(score, STANDARD)
    expect(frets.sentence).toBe('4 of 6 notes would sound otherwise.')
    expect(sound.sentence).toBe('3 of 6 notes keep their sound: 2 where they are and 1 at another fret. 3 notes have no place and sound otherwise.')
    expect([sound.transaction?.label, frets.transaction?.label]).toEqual(['Change the tuning, keep the sound', 'Change the tuning'])
    expect(frets.transaction?.edits).toHaveLength(1)
  })

  it('list what has no place bar by bar', () => {
    const sentence = 'String 6, fret 0: D2 is lower than any string now goes. Left there, it sounds E2.'
    expect(retunePlans(score, STANDARD).sound.left).toEqual([{ bar: 1, notes: [sentence] }, { bar: 3, notes: [sentence, sentence] }])
  })

  it('spell pitches in the key of the bar, as they sound', () => {
    // The fourth fret of D2: the third of D major, the fourth of D flat major.
    const sharp = parseScore('{D} 6/4q', { strings: LOW })
    expect(retunePlans(sharp, strung('G2 A2 D3 G3 B3 D4')).sound.left[0]?.notes[0]).toMatch(/^String 6, fret 4: F♯2 /)
    const flat = parseScore('{Db} 6/4q', { strings: LOW })
    expect(retunePlans(flat, strung('G2 A2 D3 G3 B3 D4')).sound.left[0]?.notes[0]).toMatch(/^String 6, fret 4: G♭2 /)
  })

  it('name the bars that come to need a wider grip, of many the first ten', () => {
    const grips = parseScore(Array.from({ length: 12 }, () => '(6/1 1/1)w').join(' | '))
    expect(retunePlans(grips, strung('A1 A2 D3 G3 B3 E4')).sound.wide).toBe('Bars 1, 2, 3, 4, 5, 6, 7, 8, 9, 10 and 2 more come to need a wider grip than a hand opens.')
    expect(retunePlans(parseScore('(6/1 1/1)w'), strung('A1 A2 D3 G3 B3 E4')).sound.wide).toBe('Bar 1 comes to need a wider grip than a hand opens.')
  })

  it('say what stands in the way', () => {
    const { sound, frets } = retunePlans(parseScore('7/0q', { strings: strung('B1 E2 A2 D3 G3 B3 E4') }), STANDARD)
    expect([sound.problem, frets.problem]).toEqual(['Bar 1: there is no string 7.', 'Bar 1: there is no string 7.'])
    expect(frets.sentence).toBe('Some notes are on strings that would not be there.')
  })

  it('keep a short string short, where the text says nothing of it', () => {
    // A banjo's fifth string starts at the fifth fret (common practice).
    const banjo = [...strung('D3 G3 B3 D4'), { pitch: 'G4', from: 5 }]
    expect(onInstrument(strung('A4 D3 G3 C4 D4'), { strings: banjo }).at(-1)).toEqual({ pitch: 'A4', from: 5 })
    expect(onInstrument(LOW, { strings: banjo })).toEqual(LOW)
  })
})

describe('the chart of an arrangement', () => {
  it('has its key as written, its capos and its scale length', () => {
    const score = parseScore('{Em} 6/0q', { strings: LOW, capos: [{ fret: 2 }, { fret: 4, strings: [1, 2] }] })
    expect(arrangementOptions(score)).toMatchObject({ key: 'em', capo: 2, partialFret: 4, partialStrings: [1, 2], length: 647.7 })
    expect(arrangementOptions(parseScore('{Gb} 6/0q'))).toMatchObject({ key: 'fs', capo: 0, partialFret: 0 })
  })
})
