import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { openEditor } from '../../../shared/editor'
import { beatLabel, cursorSentence, describeCursor, fillSentence, readBar, soundingFifths, spanLabel } from '../../../shared/editor/describe'
import { fraction } from '../../../shared/score/fraction'
import { scores } from '../../support/arbitrary'
import { parseState, parseScore, TEST_HEAD } from '../../support/score'

const OPEN_G = { strings: ['D4', 'B3', 'G3', 'D3', 'G2', 'D2'].map(pitch => ({ pitch })) }

describe('the cursor in words', () => {
  it('says where it is, what sounds there and how long it is written', () => {
    expect(describeCursor(parseState('{6/8} 3/0q 3/0e 3/0q 3/0e | 3/0e ^3/4q.', OPEN_G))).toEqual({
      bar: 'Bar 2', bars: 2, beat: 'beat 1⅓', string: 3, open: 'G3', fret: 4, pitch: 'B3', marks: [], voice: 'upper voice',
      length: 'dotted quarter', at: 'note', fill: 'This bar is a quarter short',
    })
  })

  it.each([
    ['^3/4q', 'String 3, fret 4, B3, quarter. Bar 1, beat 1, upper voice. This bar is a dotted half note short.'],
    ['3/0h ^2:3/0h', 'String 2, B3, nothing here, half. Bar 1, beat 3, upper voice.'],
    ['3/0h. ^6:zq', 'Rest, quarter, string 6. Bar 1, beat 4, upper voice.'],
    ['3/0w ; 6/0h. ^4:e', 'End of the voice, string 4, D3, eighth next. Bar 1, beat 4, lower voice. This bar is a quarter short.'],
    ['3/0w ^3:q', 'End of the voice, string 3, G3, quarter next. Bar 1, end, upper voice.'],
    ['3/0w ^3/2q', 'String 3, fret 2, A3, quarter. Bar 1, beat 5, upper voice. This bar is over by a quarter.'],
    ['^3/0xhw', 'String 3, fret 0, dead note, hammer-on, whole. Bar 1, beat 1, upper voice.'],
    ['^3/12<lw', 'String 3, fret 12, G4, harmonic, partial 2, let ring, whole. Bar 1, beat 1, upper voice.'],
  ])('%s: %s', (text, sentence) => expect(cursorSentence(parseState(text))).toBe(sentence))

  it('counts bars as they are printed: a pickup is none of them and is counted from its end (common practice)', () => {
    const jig = (cursor: string) => `{6/8} {len=1/8} ${cursor === 'pickup' ? '^' : ''}3/0e | ${cursor === 'bar' ? '^' : ''}3/2h.`
    expect(cursorSentence(parseState(jig('pickup')))).toBe('String 3, fret 0, G3, eighth. Pickup, beat 2⅔, upper voice.')
    expect(cursorSentence(parseState(jig('bar')))).toBe('String 3, fret 2, A3, dotted half. Bar 1, beat 1, upper voice.')
    expect(readBar(parseScore(jig('none')), 0)).toBe('Pickup, 6/8. Upper voice: beat 2⅔, eighth, string 3 fret 0, G3.')
    // A strain that ends short and takes the rest with the next one's pickup: both are bar 2.
    const strain = parseScore('{6/8} 3/0h. | {len=5/8} {:|} 3/0q. 3/0q | {len=1/8} 3/0e | 3/0h.')
    expect([0, 1, 2, 3].map(index => readBar(strain, index).replace(/\. .*eat /, ' … ').replace(/, .*/, ''))).toEqual(['Bar 1', 'Bar 2', 'Bar 2 … 2⅔', 'Bar 3 … 1'])
  })

  it('spells in the key, and with a capo in the key that sounds: fingered in G with a capo at 2 is A', () => {
    expect(describeCursor(parseState('{Eb} ^3/1q')).pitch).toBe('A♭3')
    expect(describeCursor(parseState('{G} ^2:2/5q', { capos: [{ fret: 2 }] })).pitch).toBe('F♯4')
    expect(soundingFifths({ fifths: 1, mode: 'major' }, { ...TEST_HEAD, capos: [{ fret: 2 }] })).toBe(3)
    expect(soundingFifths({ fifths: 1, mode: 'major' }, { ...TEST_HEAD, capos: [{ fret: 3 }] })).toBe(-2)
    expect(soundingFifths({ fifths: -6, mode: 'major' }, TEST_HEAD)).toBe(-6)
    // A partial capo changes strings, not the key.
    expect(soundingFifths({ fifths: 1, mode: 'major' }, { ...TEST_HEAD, capos: [{ fret: 2, strings: [3, 4, 5] }] })).toBe(1)
  })
})

describe('over and under', () => {
  const fill = (text: string) => {
    const [bar] = parseScore(text).bars
    return fillSentence(bar!, 'upper', { beats: 4, unit: 4 })
  }
  it.each([
    ['3/0w', null], ['', null], ['3/0h 3/0q 3/0e', 'This bar is an eighth short'], ['3/0w 3/0q', 'This bar is over by a quarter'],
    ['3/0h', 'This bar is a half note short'], ['3/0e', 'This bar is 7 eighths short'], ['3/0q 3/0s', 'This bar is 11 sixteenths short'],
    ['3/0h. [3 3/0e]', 'This bar is ⅔ beat short'], ['{len=1/8} 3/0e', null], ['{len=1/8} 3/0q', 'This bar is over by an eighth'],
  ])('%s: %s', (text, sentence) => expect(fill(text)).toBe(sentence))

  it('names spans as written lengths where one says it', () => {
    expect([fraction(1), fraction(3, 8), fraction(3, 16), fraction(1, 32), fraction(5, 4), fraction(5, 2), fraction(5, 12), fraction(1, 20)]
      .map(span => spanLabel(span, { beats: 4, unit: 4 })))
      .toEqual(['a whole note', 'a dotted quarter', 'a dotted eighth', 'a thirty-second', '5 quarters', '5 half notes', '1⅔ beats', '⅕ beat'])
  })

  it('counts beats as players do', () => {
    const six = { beats: 6, unit: 8 } as const
    expect([fraction(0), fraction(3, 8), fraction(1, 8), fraction(5, 8)].map(moment => beatLabel(moment, six))).toEqual(['1', '2', '1⅓', '2⅔'])
    expect([fraction(1, 8), fraction(7, 16), fraction(1, 20)].map(moment => beatLabel(moment, { beats: 4, unit: 4 }))).toEqual(['1½', '2¾', '1⅕'])
  })
})

describe('a bar read aloud', () => {
  it('goes voice by voice', () => {
    const score = parseScore('{6/8} {|:} (1/0 3/2)q zq 3/0hs | {:|} ; [3 6/0e 6/2e 6/3e] | {:|3}', OPEN_G)
    expect(readBar(score, 0)).toBe('Bar 1, 6/8, repeat begins. Upper voice: beat 1, quarter, string 1 fret 0, D4 with string 3 fret 2, A3; '
      + 'beat 1⅔, quarter, rest; beat 2⅓, sixteenth, string 3 fret 0, G3, hammer-on. This bar is a dotted eighth short.')
    expect(readBar(score, 1)).toBe('Bar 2, repeat ends. Lower voice: beat 1, eighth in a tuplet, string 6 fret 0, D2; beat 1 + 2/9, eighth in a tuplet, '
      + 'string 6 fret 2, E2; beat 1 + 4/9, eighth in a tuplet, string 6 fret 3, F2. This bar is a half note short.')
    expect(readBar(score, 2)).toBe('Bar 3, repeat ends, played 3 times. Empty.')
    expect(readBar(score, 3)).toBe('')
  })

  it('says key and tempo where they are stated', () => {
    const score = parseScore('{6/8} {D} 3/0h. | {F} 3/0h. | {C} 3/0h.')
    const told = { ...score, bars: score.bars.map((bar, index) => (index ? bar : { ...bar, tempo: { perMinute: 96, base: 4, dots: 1 } as const })) }
    expect([0, 1, 2].map(index => readBar(told, index).replace(/\. .*/, ''))).toEqual(['Bar 1, 6/8, 2 sharps, dotted quarter = 96', 'Bar 2, 1 flat', 'Bar 3, no sharps or flats'])
  })

  it('has words for every score', () => {
    fc.assert(fc.property(scores, (score) => {
      expect(cursorSentence(openEditor(score))).not.toMatch(/undefined|null|NaN/)
      score.bars.forEach((_, index) => expect(readBar(score, index)).not.toMatch(/undefined|null|NaN/))
    }))
  })
})
