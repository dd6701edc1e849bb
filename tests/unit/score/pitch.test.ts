import fc from 'fast-check'
import { Key, Note } from 'tonal'
import { describe, expect, it } from 'vitest'
import { fifthsOf, frequencyOf, midiOf, midiOfText, noteName, parsePitch, pitchLabel, pitchText, spell, STEPS } from '../../../shared/score/pitch'

const spellings = fc.record({ step: fc.constantFrom(...STEPS), alter: fc.integer({ min: -2, max: 2 }), octave: fc.integer({ min: 0, max: 8 }) }, { noNullPrototype: true })
const KEYS = Array.from({ length: 15 }, (_, index) => index - 7)

/** tonal (MIT) is an independent library of music theory: github.com/tonaljs/tonal. */
describe('pitches', () => {
  it('are written and read alike, and sound as tonal says', () => {
    fc.assert(fc.property(spellings, (pitch) => {
      expect(parsePitch(pitchText(pitch))).toEqual(pitch)
      expect(parsePitch(pitchLabel(pitch))).toEqual(pitch)
      expect(midiOf(pitch)).toBe(Note.midi(pitchText(pitch)))
    }))
  })

  it('refuse other text', () => {
    for (const text of ['', 'H2', 'C', 'C#', 'C###3', 'Cb#3', '3C', 'C 3', 'C10', 'C-2']) expect(parsePitch(text), text).toBeNull()
    expect(() => midiOfText('h9')).toThrow(RangeError)
  })

  it('sound at 440 Hz on A4 (ISO 16:1975) and at equal temperament around it', () => {
    expect(frequencyOf(69)).toBe(440)
    fc.assert(fc.property(fc.integer({ min: 12, max: 119 }), (midi) => {
      expect(frequencyOf(midi)).toBeCloseTo(Note.freq(Note.fromMidi(midi))!, 8)
    }))
  })
})

describe('spelling', () => {
  it('sounds what was to be spelled, whatever the key', () => {
    fc.assert(fc.property(fc.integer({ min: 21, max: 108 }), fc.integer({ min: -7, max: 7 }), (midi, fifths) => {
      const pitch = spell(midi, fifths)
      expect(midiOf(pitch)).toBe(midi)
      // Twelve neighbours on the line of fifths: two below the scale, three above it.
      expect(fifthsOf(pitch)).toBeGreaterThanOrEqual(fifths - 3)
      expect(fifthsOf(pitch)).toBeLessThanOrEqual(fifths + 8)
    }))
  })

  it('gives C major its common accidentals: B♭ E♭ F♯ C♯ G♯ (common practice)', () => {
    expect([70, 63, 66, 61, 68].map(midi => noteName(spell(midi, 0)))).toEqual(['B♭', 'E♭', 'F♯', 'C♯', 'G♯'])
  })

  it.each([['E minor', 1, 63, 'D♯'], ['A minor', 0, 68, 'G♯'], ['D minor', -1, 61, 'C♯'], ['G minor', -2, 66, 'F♯'], ['B minor', 2, 70, 'A♯']])(
    'sharpens the seventh of %s (common practice)', (_, fifths, midi, name) => expect(noteName(spell(midi, fifths))).toBe(name))

  it.each(KEYS)('writes the scales of the key with %i sharps (negative: flats) as tonal does', (fifths) => {
    const { tonic, scale, minorRelative } = Key.majorKey(tonicOf(fifths))
    expect(tonic).not.toBe('')
    const minor = Key.minorKey(minorRelative).natural.scale
    for (const name of [...scale, ...minor]) expect(Note.pitchClass(pitchText(spell(Note.midi(`${name}4`)!, fifths)))).toBe(name)
  })

  it('puts the octave with the letter: C♭4 sounds B3, B♯3 sounds C4 (scientific pitch notation)', () => {
    expect(pitchText(spell(59, -7))).toBe('Cb4')
    expect(pitchText(spell(60, 7))).toBe('B#3')
  })
})

/** The major tonic by fifths, out of tonal. */
const tonicOf = (fifths: number): string => Note.transposeFifths('C', fifths)
