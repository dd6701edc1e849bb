import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { midiOf, midiOfText, pitchText } from '../../../shared/score/pitch'
import { OPEN_RANGE } from '../../../shared/score/validate'
import { catalogue, stringsOf } from '../../../shared/tunings/catalogue'
import { readSlug, slugOf } from '../../../shared/tunings/slug'
import { spellTogether } from '../../../shared/tunings/spelling'

const strings = (text: string) => text.split(' ').reverse().map(pitch => ({ pitch }))

describe('the address of a tuning', () => {
  // How players write these tunings (common practice).
  it.each([
    ['C2 G2 D3 G3 C4 D4', 'c2-g2-d3-g3-c4-d4'],
    ['E2 B2 E3 G#3 B3 E4', 'e2-b2-e3-gs3-b3-e4'],
    ['E2 B2 E3 Ab3 B3 E4', 'e2-b2-e3-gs3-b3-e4'],
    ['D2 G2 D3 G3 A#3 D4', 'd2-g2-d3-g3-bb3-d4'],
    ['D#2 G#2 C#3 F#3 A#3 D#4', 'eb2-ab2-db3-gb3-bb3-eb4'],
    ['G4 C4 E4 A4', 'g4-c4-e4-a4'],
    ['B#1 G2 D3 G3 Cb4 D4', 'c2-g2-d3-g3-b3-d4'],
  ])('%s is at %s', (pitches, slug) => expect(slugOf(strings(pitches))).toBe(slug))

  it.each(catalogue.map(each => [each.name, each] as const))('%s is spelled as the catalogue says it', (_name, tuning) => {
    expect(slugOf(stringsOf(tuning))).toBe(tuning.pitches.join('-').toLowerCase().replaceAll('#', 's'))
    expect(readSlug(slugOf(stringsOf(tuning)))).toMatchObject({ kind: 'tuning' })
  })

  it.each(['E2-B2-E3-AB3-B3-E4', 'e2-b2-e3-g#3-b3-e4', 'e2-b2-e3-ab3-b3-e4', 'e2-b2-e3-gs3-b3-fb4'])('sends %s to the one spelling', text =>
    expect(readSlug(text)).toEqual({ kind: 'redirect', slug: 'e2-b2-e3-gs3-b3-e4' }))

  const pitches = fc.array(fc.integer({ min: OPEN_RANGE.low, max: OPEN_RANGE.high }), { minLength: 4, maxLength: 10 })
  it('has one for every possible sound, and reads it back', () => fc.assert(fc.property(pitches, (midis) => {
    const slug = slugOf(spellTogether(midis).map(pitch => ({ pitch: pitchText(pitch) })))
    const read = readSlug(slug)
    expect(read.kind === 'tuning' && read.strings.map(({ pitch }) => midiOfText(pitch))).toEqual(midis)
    expect(spellTogether(midis).map(midiOf)).toEqual(midis)
  })))

  it('leads every spelling of a sound to the same address', () => fc.assert(fc.property(pitches, fc.array(fc.constantFrom(-1, 0, 1), { minLength: 10, maxLength: 10 }), (midis, alters) => {
    const home = slugOf(spellTogether(midis).map(pitch => ({ pitch: pitchText(pitch) })))
    // Each pitch as the natural below or above it with an accidental, where there is one.
    const other = midis.map((midi, index) => {
      const alter = alters[index]!
      const [natural] = spellTogether([midi - alter])
      return natural!.alter === 0 ? pitchText({ ...natural!, alter }) : pitchText(spellTogether([midi])[0]!)
    })
    const read = readSlug([...other].reverse().join('-').toLowerCase().replaceAll('#', 's'))
    expect(read.kind === 'impossible' ? read : read.slug).toBe(home)
  })))

  it.each([
    ['e2-a2-d3', 'strings', /4 to 10 strings; the address names 3/],
    ['a2-a2-a2-a2-a2-a2-a2-a2-a2-a2-a2', 'strings', /names 11/],
    ['c2-h2-d3-g3-c4-d4', 'string 5', /String 5: “h2” is no pitch/],
    ['c2-g2-d3-g3-c4-d9', 'string 1', /String 1: D9 is higher than any string bears/],
    ['c0-g2-d3-g3-c4-d4', 'string 6', /String 6: C0 is too low/],
    ['c2--g2-d3-g3', 'strings', /no pitch/],
    ['', 'strings', /no pitch/],
  ])('says why “%s” is impossible', (text, field, problem) =>
    expect(readSlug(text)).toEqual({ kind: 'impossible', field, problem: expect.stringMatching(problem) }))
})
