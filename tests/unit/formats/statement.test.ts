import { describe, expect, it } from 'vitest'
import { createScore } from '../../../shared/score/create'
import type { Head } from '../../../shared/score/types'
import { capoStatement, changedStrings, keyName, tuningStatement } from '../../../shared/formats/statement'
import { raisedKey } from '../../../shared/score/sounding'

const head = (pitches: string, capos: Head['capos'] = []): Head => ({
  ...createScore({ title: 'Test' }, () => 'b').head, strings: pitches.split(' ').reverse().map(pitch => ({ pitch })), capos,
})

describe('tuning statement', () => {
  // Orkney: C2 G2 D3 G3 C4 D4 (S. Baughman, "Orkney Tuning"); circled = string, changed strings named: Aaron Shearer Foundation, "Scordatura".
  it('names pitches low to high and changed strings by position', () => {
    expect(tuningStatement(head('C2 G2 D3 G3 C4 D4'))).toBe('Tuning C2 G2 D3 G3 C4 D4 (⑥ = C2, ⑤ = G2, ② = C4, ① = D4).')
  })
  it('says standard where nothing is changed', () => {
    expect(tuningStatement(head('E2 A2 D3 G3 B3 E4'))).toBe('Standard tuning E2 A2 D3 G3 B3 E4.')
  })
  it('writes accidentals as read', () => {
    expect(changedStrings(head('D2 A2 D3 F#3 A3 D4'))).toEqual(['⑥ = D2', '③ = F♯3', '② = A3', '① = D4'])
  })
  it('lists no changes for other numbers of strings, and says where a short string starts', () => {
    const banjo = { ...head('G4 D3 G3 B3 D4'), strings: [{ pitch: 'D4' }, { pitch: 'B3' }, { pitch: 'G3' }, { pitch: 'D3' }, { pitch: 'G4', from: 5 }] }
    expect(tuningStatement(banjo)).toBe('Tuning G4 D3 G3 B3 D4. String 5 starts at fret 5.')
  })
})

describe('capo', () => {
  // Planxty Irwin in D, capo 2 sounds E: O'Neill 1903 no. 677 as arranged in the handbook of the project.
  it('names the key heard', () => {
    expect(capoStatement(head('D2 A2 D3 G3 A3 D4', [{ fret: 2 }]), { fifths: 2, mode: 'major' })).toBe('Capo 2, sounds E')
  })
  it('keeps the mode', () => {
    expect(capoStatement(head('E2 A2 D3 G3 B3 E4', [{ fret: 3 }]), { fifths: 0, mode: 'minor' })).toBe('Capo 3, sounds C minor')
  })
  it('says no key where none is known', () => {
    expect(capoStatement(head('E2 A2 D3 G3 B3 E4', [{ fret: 3 }]))).toBe('Capo 3')
    expect(capoStatement(head('E2 A2 D3 G3 B3 E4'))).toBeNull()
  })
  it('names the strings of a partial capo, which changes no key', () => {
    expect(capoStatement(head('E2 A2 D3 G3 B3 E4', [{ fret: 2, strings: [5, 3, 4] }]), { fifths: 4, mode: 'major' })).toBe('Capo 2 on strings 3 to 5')
    expect(capoStatement(head('E2 A2 D3 G3 B3 E4', [{ fret: 2 }, { fret: 4, strings: [1, 4] }]), { fifths: 0, mode: 'major' }))
      .toBe('Capo 2, sounds D; capo 4 on strings 1, 4')
  })
})

describe('keys', () => {
  // The circle of fifths (common practice): sharps F C G D A E B, relative minor a minor third below.
  it.each([[0, 'C', 'A minor'], [1, 'G', 'E minor'], [6, 'F♯', 'D♯ minor'], [7, 'C♯', 'A♯ minor'], [-1, 'F', 'D minor'], [-3, 'E♭', 'C minor'], [-7, 'C♭', 'A♭ minor']])('%i signs', (fifths, major, minor) => {
    expect(keyName({ fifths, mode: 'major' })).toBe(major)
    expect(keyName({ fifths, mode: 'minor' })).toBe(minor)
  })
  it('rises by half steps', () => {
    // From C: D♭ D E♭ E F F♯ G A♭ A B♭ B (common practice; six sharps before six flats is this project's choice).
    const names = Array.from({ length: 12 }, (_, halfSteps) => keyName(raisedKey({ fifths: 0, mode: 'major' }, halfSteps)))
    expect(names).toEqual(['C', 'D♭', 'D', 'E♭', 'E', 'F', 'F♯', 'G', 'A♭', 'A', 'B♭', 'B'])
  })
})
