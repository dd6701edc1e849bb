import { describe, expect, it } from 'vitest'
import { STEEL_STRING_GUITAR } from '../../../shared/score/create'
import type { Capo, Key } from '../../../shared/score/types'
import { boardOf, keyOf, movedKey, tonicOf } from '../../../shared/tunings/board'
import { capoSentence, homeKey, straightBarres } from '../../../shared/tunings/barres'
import { nameChord } from '../../../shared/tunings/chords'
import { chordsOfKey } from '../../../shared/tunings/keyChords'
import { chromaOfNote } from '../../../shared/tunings/notes'

const neck = (text: string, capos: Capo[] = []) => ({ strings: text.split(' ').reverse().map(pitch => ({ pitch })), capos, instrument: STEEL_STRING_GUITAR })
const D: Key = { fifths: 2, mode: 'major' }
const C: Key = { fifths: 0, mode: 'major' }
const name = (text: string, key = C) => nameChord(text.split(' ').map((each, index) => 48 + 12 * index + chromaOfNote(each)), key)

describe('D A D G A D', () => {
  // Common practice: what every player of this tuning knows of its barres.
  const barres = straightBarres(neck('D2 A2 D3 G3 A3 D4'), D)
  it('is a D suspended fourth, at 5 G, at 7 A, at 12 D again', () => {
    expect([0, 5, 7, 12].map(fret => barres[fret]!.sound!.spoken)).toEqual(['D suspended fourth', 'G suspended fourth', 'A suspended fourth', 'D suspended fourth'])
    expect([0, 5, 7].map(fret => barres[fret]!.degree)).toEqual(['Isus4', 'IVsus4', 'Vsus4'])
  })

  it('sounds higher behind a capo and is written as if there were none', () => {
    const behind = straightBarres(neck('D2 A2 D3 G3 A3 D4', [{ fret: 2 }]), D)
    expect(behind[5]).toMatchObject({ fret: 5, degree: 'IVsus4', sound: { symbol: 'Asus4' }, written: { symbol: 'Gsus4' } })
    expect(behind[0]!.midis).toEqual([64, 59, 57, 52, 47, 40])
  })
})

describe('straight barres', () => {
  // Open tunings are named by their open chord; barres at 5 and 7 give the fourth and fifth degrees (common practice).
  it.each([
    ['D2 A2 D3 F#3 A3 D4', D, ['D', 'G', 'A']],
    ['D2 G2 D3 G3 B3 D4', { fifths: 1, mode: 'major' }, ['G/D', 'C/G', 'D/A']],
    ['C2 G2 C3 G3 C4 E4', C, ['C', 'F', 'G']],
    ['D2 G2 D3 G3 Bb3 D4', { fifths: -2, mode: 'minor' }, ['Gm/D', 'Cm/G', 'Dm/A']],
    ['C2 G2 D3 G3 C4 D4', C, ['Csus2', 'Fsus2', 'Gsus2']],
    ['D2 A2 D3 D3 A3 D4', D, ['D5', 'G5', 'A5']],
    ['C2 A2 C3 G3 C4 E4', C, ['C6', 'F6', 'G6']],
    ['D2 G2 D3 F#3 B3 D4', { fifths: 1, mode: 'major' }, ['Gmaj7/D', 'Cmaj7/G', 'Dmaj7/A']],
  ] as const)('%s', (text, key, symbols) =>
    expect([0, 5, 7].map(fret => straightBarres(neck(text), key)[fret]!.sound!.symbol)).toEqual(symbols))

  it('leave strings alone that a partial capo holds higher', () => {
    // Capo at 2 on strings 3 to 5 of standard: E B E A B E, common practice. A barre at 2 reaches the other strings only.
    const partial = neck('E2 A2 D3 G3 B3 E4', [{ fret: 2, strings: [3, 4, 5] }])
    expect(straightBarres(partial, C)[0]!.midis).toEqual([64, 59, 57, 52, 47, 40])
    expect(straightBarres(partial, C)[2]!.midis).toEqual([66, 61, 57, 52, 47, 42])
    expect(straightBarres(partial, C)[0]!.sound!.symbol).toBe('Esus4')
  })

  // A capo on some strings leaves the barring finger to count from the nut; a full one takes its place (common practice).
  it.each<[Capo[], string]>([
    [[], ''], [[{ fret: 2 }], 'Capo at fret 2. Frets count from it, chords as they sound.'],
    [[{ fret: 2, strings: [3, 4, 5] }], 'Partial capo at fret 2 on strings 3, 4 and 5. Frets count from the nut, chords as they sound.'],
    [[{ fret: 1 }, { fret: 3, strings: [2] }], 'Capo at fret 1. Partial capo at fret 3 on string 2. Frets count from the full capo, chords as they sound.'],
  ])('say where their frets count from: %j', (capos, sentence) =>
    expect(capoSentence(neck('E2 A2 D3 G3 B3 E4', capos))).toBe(sentence))

  it('start a short string where it starts', () => {
    const banjo = { strings: [{ pitch: 'D4' }, { pitch: 'B3' }, { pitch: 'G3' }, { pitch: 'D3' }, { pitch: 'G4', from: 5 }], capos: [], instrument: STEEL_STRING_GUITAR }
    expect(straightBarres(banjo, C).map(({ midis }) => midis[4])).toEqual([67, 67, 67, 67, 67, 67, 68, 69, 70, 71, 72, 73, 74])
    expect(straightBarres(banjo, { fifths: 1, mode: 'major' })[0]!.sound!.symbol).toBe('G/D')
  })

  it('end with the neck', () => expect(straightBarres({ ...neck('G4 C4 E4 A4', [{ fret: 3 }]), instrument: { scaleLength: 350, frets: 10 } }, C)).toHaveLength(8))
})

describe('names', () => {
  // Common practice; the bass decides where a set of notes has two names.
  it.each([
    ['C E G A', 'C6', 'Am7/C'], ['A C E G', 'Am7', 'C6/A'], ['D G A', 'Dsus4', 'Gsus2/D'], ['G A D', 'Gsus2', 'Dsus4/G'],
    ['C E A', 'Am/C', 'C6'], ['F A C E', 'Fmaj7', 'Am/F'], ['C G B D', 'G/C', undefined], ['C E Bb', 'C7', undefined],
  ])('%s is %s, also %s', (notes, symbol, other) => {
    expect(name(notes)!.symbol).toBe(symbol)
    if (other) expect(name(notes)!.others.map(each => each.symbol)).toContain(other)
  })

  it('are spelled in the key', () => {
    expect(name('Eb G Bb', { fifths: -3, mode: 'major' })!.symbol).toBe('E♭')
    expect(name('D# F# A#', { fifths: 5, mode: 'major' })!.symbol).toBe('D♯m')
    expect(name('G# C# F', { fifths: 3, mode: 'major' })!.symbol).toBe('C♯/G♯')
  })

  it('need two notes at least, and a chord that has them', () => {
    expect(name('D D D')).toBeNull()
    expect(name('C C# D D# E')).toBeNull()
    expect(nameChord([], C)).toBeNull()
  })
})

describe('keys', () => {
  it.each([['D2 A2 D3 G3 A3 D4', 2, 'major'], ['D2 G2 D3 G3 B3 D4', 1, 'major'], ['D2 A2 D3 F3 A3 D4', -1, 'minor'],
    ['Eb2 Ab2 Db3 Gb3 Bb3 Eb4', -6, 'minor'], ['E2 B2 E3 G#3 B3 E4', 4, 'major']] as const)('%s is at home with %i fifths, %s', (text, fifths, mode) =>
    expect(homeKey(neck(text, [{ fret: 2 }]))).toEqual({ fifths, mode }))

  it('move by half steps', () => {
    expect(movedKey(D, 2)).toEqual({ fifths: 4, mode: 'major' })
    for (let tonic = 0; tonic < 12; tonic += 1) {
      for (const mode of ['major', 'minor'] as const) expect(tonicOf(keyOf(tonic, mode))).toBe(tonic)
    }
    expect(() => boardOf(neck('H2 A2 D3 G3'))).toThrow(RangeError)
  })

  // Diatonic triads and the dominant seventh (any harmony textbook).
  it('have their chords', () => {
    expect(chordsOfKey(D).map(each => `${each.degree} ${each.symbol}`)).toEqual(['I D', 'ii Em', 'iii F♯m', 'IV G', 'V A', 'vi Bm', 'V7 A7'])
    expect(chordsOfKey({ fifths: 0, mode: 'minor' }).map(each => each.symbol)).toEqual(['Am', 'C', 'Dm', 'Em', 'F', 'G', 'E', 'E7'])
    expect(chordsOfKey(D)[6]!.names).toEqual(['A', 'C♯', 'E', 'G'])
  })
})
