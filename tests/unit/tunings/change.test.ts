import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { STANDARD_TUNING } from '../../../shared/score/create'
import { midiOfText } from '../../../shared/score/pitch'
import { blockSentence, shapeBlocks } from '../../../shared/tunings/blocks'
import { changeSentence, changeText, changesFromStandard, compareTunings, likeText, usualReference } from '../../../shared/tunings/change'

const list = (text: string) => text.split(' ').reverse().map(pitch => ({ pitch }))
const strings = (text: string) => ({ strings: list(text) })
const fromStandard = (text: string) => compareTunings(STANDARD_TUNING, list(text))

// S. Baughman, "Orkney Tuning"; MEI Guidelines, data.COURSETUNING (open A): half steps from E A D G B E, string 6 to 1.
it.each([
  ['C2 G2 D3 G3 C4 D4', [-4, -2, 0, 0, 1, -2]],
  ['E2 A2 E3 A3 C#4 E4', [0, 0, 2, 2, 2, 0]],
  ['E2 A2 D3 G3 B3 E4', [0, 0, 0, 0, 0, 0]],
])('%s', (text, changes) => {
  expect(changesFromStandard(strings(text))?.toReversed()).toEqual(changes)
  expect(fromStandard(text).map(each => each.halfSteps).toReversed()).toEqual(changes)
})

it('has nothing to compare other instruments with', () => expect(changesFromStandard(strings('G3 D4 A4 E5'))).toBeNull())
it('writes the sign', () => expect([-4, 0, 3].map(changeText)).toEqual(['−4', '', '+3']))

describe('from standard to D A D G A D', () => {
  const changes = fromStandard('D2 A2 D3 G3 A3 D4')

  // Common practice: what every teacher of this tuning says first.
  it('takes strings 6, 2 and 1 down two frets and leaves 5, 4 and 3', () => {
    expect(changes.filter(each => each.halfSteps === -2).map(each => each.string)).toEqual([1, 2, 6])
    expect(changes.filter(each => each.halfSteps === 0).map(each => each.string)).toEqual([3, 4, 5])
    expect(changeSentence(changes)).toBe('Three strings down two half steps, three as they were')
  })

  it('gives strings 1 and 6 the notes of string 4 and string 2 those of string 5', () => {
    expect(changes[0]!.like).toEqual([{ string: 4, octaves: 1 }])
    expect(changes[5]!.like).toEqual([{ string: 4, octaves: -1 }])
    expect(changes[1]!.like).toEqual([{ string: 5, octaves: 1 }])
    expect(changes.map(likeText)).toEqual([
      'string 4, an octave up', 'string 5, an octave up', 'itself', 'itself', 'itself', 'string 4, an octave down'])
  })

  it('moves shapes as blocks', () => {
    expect(shapeBlocks(STANDARD_TUNING, list('D2 A2 D3 G3 A3 D4')).slice(0, 2).map(blockSentence)).toEqual([
      'Shapes on strings 1, 2 and 6 move up two frets.', 'Shapes on strings 3, 4 and 5 stay where they are.'])
  })
})

describe('the sentence of a change', () => {
  it.each([
    ['C2 G2 D3 G3 C4 D4', 'Three strings down, one up a half step, two as they were'],
    ['D2 A2 D3 G3 B3 E4', 'One string down two half steps, five as they were'],
    ['E2 A2 D3 G3 B3 E4', 'Every string as it was'],
    ['E2 B2 E3 G#3 B3 E4', 'Three strings up, three as they were'],
    ['Eb2 Ab2 Db3 Gb3 Bb3 Eb4', 'Six strings down a half step'],
  ])('%s', (text, sentence) => expect(changeSentence(fromStandard(text))).toBe(sentence))
})

describe('blocks', () => {
  // Open G to open A is the same tuning two half steps higher; open G to open D carries its five upper strings over to the next
  // lower ones, since both are a major chord stacked alike (common practice: "open D is open G moved over by one string").
  it('finds a whole tuning moved', () => {
    expect(shapeBlocks(list('D2 G2 D3 G3 B3 D4'), list('E2 A2 E3 A3 C#4 E4'))[0]).toEqual({ from: [1, 2, 3, 4, 5, 6], to: [1, 2, 3, 4, 5, 6], frets: -2, octaves: 0 })
  })

  it('finds shapes that go to other strings', () => {
    const block = shapeBlocks(list('D2 G2 D3 G3 B3 D4'), list('D2 A2 D3 F#3 A3 D4')).find(each => each.from.length === 5)!
    expect(block).toEqual({ from: [1, 2, 3, 4, 5], to: [2, 3, 4, 5, 6], frets: 5, octaves: 0 })
    expect(blockSentence(block)).toBe('Shapes on strings 1, 2, 3, 4 and 5 go to strings 2, 3, 4, 5 and 6, up five frets.')
  })

  const tuning = fc.array(fc.integer({ min: 36, max: 76 }), { minLength: 4, maxLength: 10 })
  const named = (midis: number[]) => midis.map(midi => ({ pitch: ['C', 'C#', 'D', 'D#', 'E', 'F', 'F#', 'G', 'G#', 'A', 'A#', 'B'][midi % 12]! + (Math.floor(midi / 12) - 1) }))
  it('keeps the sound of every shape it moves', () => fc.assert(fc.property(tuning, tuning, (a, b) => {
    for (const block of shapeBlocks(named(a), named(b))) {
      expect(block.frets).toBeGreaterThanOrEqual(-6)
      expect(block.frets).toBeLessThanOrEqual(6)
      block.from.forEach((string, index) =>
        expect(b[block.to[index]! - 1]! + block.frets).toBe(a[string - 1]! + 12 * block.octaves))
    }
  })))
})

describe('what a tuning is compared with', () => {
  const reference = (text: string) => usualReference(list(text))?.map(each => midiOfText(each.pitch)) ?? null
  it('is standard for six strings', () => expect(reference('C2 G2 C3 G3 C4 D4')).toEqual([64, 59, 55, 50, 45, 40]))
  it('is the nearest instrument for other numbers', () => {
    expect(reference('G3 D4 A4 D5')).toEqual([76, 69, 62, 55])
    expect(reference('G4 C4 E4 G4')).toEqual([69, 64, 60, 67])
  })
  it('is nothing where no instrument has as many', () => expect(reference('A1 B1 E2 A2 D3 G3 B3 E4 A4')).toBeNull())
  it('refuses to compare different numbers of strings', () => expect(() => compareTunings(STANDARD_TUNING, list('G3 D4 A4 E5'))).toThrow(RangeError))
})
