import { describe, expect, it } from 'vitest'
import { createIds } from '../../../shared/editor'
import { checkCommand, perform } from '../../support/checkCommand'
import { parseState, printState } from '../../support/score'

/** Runs commands by name, digits for frets, and prints what is there. */
function enter(before: string, run: string, head = {}) {
  const ids = createIds('new')
  const names = run.split(' ').map(name => (/^\d$/.test(name) ? `fret.${name}` : name))
  return names.reduce((state, id) => perform(state, id, ids), parseState(before, head))
}
const text = (before: string, run: string, head = {}) => printState(enter(before, run, head))

describe('typing frets', () => {
  it.each([
    ['^3:', '1 2', '^3/12q'],
    ['^3:', '1 2 3', '^3/3q'],
    ['^3:', '2 1', '^3/1q'],
    ['^3:', '0 5', '^3/5q'],
    ['^3:', '1 cursor.stringUp cursor.stringDown 2', '^3/2q'],
    ['3/1q ^3/1q', 'cursor.previous 2', '^3/2q 3/1q'],
    ['^3:', '1 length.eighth 2', '^3/2e'],
    ['^3:', '1 history.undo 2', '^3/2q'],
    ['^3/1q', '1 2', '^3/12q'],
  ])('from %s, %s gives %s', (before, run, after) => expect(text(before, run)).toBe(after))

  it('makes 12 one step of undo, and back to what was there', () => {
    expect(text('3/0q ^3:', '1 2 history.undo')).toBe('3/0q ^3:')
    expect(text('^3/7q', '1 2 history.undo')).toBe('^3/7q')
    expect(text('^3/1q', '1 2 history.undo')).toBe('^3/1q')
    expect(enter('^3:', '1 2').history.undo).toHaveLength(1)
  })

  it('does not join a step it did not make', () => {
    // The first digit names the fret that is there already, so that it is no step; undo must leave the rest before it alone.
    expect(text('^3/1q', 'length.eighth 1 2 history.undo')).toBe('^3/1e')
  })

  it('counts the capo: a neck of 20 frets with a capo at 9 ends at fret 11', () => {
    const head = { capos: [{ fret: 9 }] }
    expect(text('^3:', '1 1', head)).toBe('^3/11q')
    expect(text('^3:', '1 2', head)).toBe('^3/2q')
    expect(enter('^3:', '3', { capos: [{ fret: 18 }] }).notice).toBe('String 3 has no fret 3 on this neck.')
    expect(text('^3:', '3', { capos: [{ fret: 18 }] })).toBe('^3:')
    // A partial capo stops only its own strings.
    expect(text('^3:', '1 2', { capos: [{ fret: 9, strings: [1, 2] }] })).toBe('^3/12q')
  })

  it('builds a chord from the lowest string up', () => {
    expect(text('^6:', '3 cursor.stringUp 2 cursor.stringUp 0')).toBe('^(4/0 5/2 6/3)q')
  })
})

describe('going on', () => {
  it.each([
    ['3/0q ^3/2q', 'cursor.advance', '3/0q 3/2q ^3:'],
    ['^3/0q 3/2q', 'cursor.advance', '3/0q ^3/2q'],
    ['3/0h ^3/2h | 3/4w', 'cursor.advance', '3/0h 3/2h | ^3/4w'],
    ['3/0h ^3/2h | 3/4w', 'cursor.advance cursor.advance 7', '3/0h 3/2h | 3/4w | ^3/7h'],
    ['^3/0e 3/2q', 'cursor.next cursor.advance 5', '3/0e 3/2q ^3/5q'],
    ['{len=1/8} ^3/0e', 'cursor.advance', '{len=1/8} 3/0e | ^3:e'],
    ['^', 'cursor.advance', '^'],
    ['3/0w | ^', 'cursor.advance', '3/0w | ^'],
    ['3/0q ^3:', 'cursor.advance', '3/0q | ^3:'],
    ['3/0w 3/0w ^3:', 'cursor.advance', '3/0w 3/0w | ^3:w'],
  ])('from %s, %s gives %s', (before, run, after) => expect(text(before, run)).toBe(after))

  it('keeps a jig’s rhythm from the bar before', () => {
    const jig = '{6/8} 3/0q 3/2e 3/0q 3/2e | ^3/0q'
    expect(text(jig, 'cursor.advanceLike 2 cursor.advanceLike 0 cursor.advanceLike 2 cursor.advanceLike 0'))
      .toBe('{6/8} 3/0q 3/2e 3/0q 3/2e | 3/0q 3/2e 3/0q 3/2e | ^3/0q')
  })

  it('keeps the length where the bar before has nothing at that place', () => {
    expect(text('3/0h 3/2h | ^3/0q', 'cursor.advanceLike')).toBe('3/0h 3/2h | 3/0q ^3:')
  })

  it('never refuses to enter: a full bar takes more at its end', () => {
    expect(text('3/0w ^3:', '5')).toBe('3/0w ^3/5w')
  })
})

describe('lengths', () => {
  it.each([
    ['^3/0q', 'length.dot', '^3/0q.'],
    ['^3/0q', 'length.dot length.dot', '^3/0q..'],
    ['^3/0q', 'length.dot length.dot length.dot', '^3/0q'],
    ['^3/0q. 3/2q', 'length.eighth', '^3/0e 3/2q'],
    ['@3/0q 3/2e ^3/4h 3/5q', 'length.sixteenth', '@3/0s 3/2s ^3/4s 3/5q'],
    ['@3/0q 3/2e | ^3/4h 3/5q', 'length.half', '@3/0h 3/2h | ^3/4h 3/5q'],
    ['3/0q ^3:', 'length.eighth 2 cursor.advance 3', '3/0q 3/2e ^3/3e'],
    ['3/0q ^3:', 'length.dot', '3/0q ^3:q.'],
  ])('from %s, %s gives %s', (before, run, after) => expect(text(before, run)).toBe(after))

  it('becomes the length of what is entered next', () => {
    expect(enter('^3/0q', 'length.thirty-second').entry).toEqual({ base: 32, dots: 0 })
    expect(enter('^3/0q', 'length.eighth length.dot').entry).toEqual({ base: 8, dots: 1 })
    expect(text('^3/0q 3/2q', 'length.eighth cursor.barEnd 7')).toBe('3/0e 3/2q ^3/7e')
  })
})

describe('triplets', () => {
  it.each([
    ['3/5q ^3/0e 3/2e 3/4e 3/5e', 'length.triplet', '3/5q [3 ^3/0e 3/2e 3/4e] 3/5e'],
    ['^3/0q 3/2e 3/5e', 'length.triplet', '[3:2e ^3/0q 3/2e] 3/5e'],
    ['@3/0e 3/2e ^3/4e', 'length.triplet', '[3 @3/0e 3/2e ^3/4e]'],
    ['[3 3/0e ^3/2e 3/4e]', 'length.triplet', '3/0e ^3/2e 3/4e'],
    ['^3/0e', 'length.triplet', '[3 ^3/0e]'],
    ['^3/0e', 'length.triplet cursor.advance 2 cursor.advance 4 cursor.advance 5', '[3 3/0e 3/2e 3/4e] ^3/5e'],
    ['^3/0e', 'length.triplet length.quarter cursor.advance length.eighth 2 cursor.advance 4', '[3:2e 3/0q 3/2e] ^3/4e'],
    ['^3/0e', 'length.triplet cursor.advance note.rest cursor.advance note.dead', '[3 3/0e ze ^3/0xe]'],
    ['^3/0h 3/2e', 'length.triplet', '[3 ^3/0h 3/2e]'],
  ])('from %s, %s gives %s', (before, run, after) => expect(text(before, run)).toBe(after))

  it('says why where three don’t come out even', () => {
    expect(enter('@3/0q ^3/2q 3/4e', 'length.triplet').notice).toBe('These notes don’t come out as three of one length.')
    expect(enter('@3/0q | ^3/2q', 'length.triplet').notice).toBe('A triplet stands within one voice of one bar.')
    expect(enter('3/0q ^', 'length.triplet').notice).toBe('Write the first note of the triplet, then make it one.')
  })

  it('is undone exactly', () => {
    checkCommand('length.triplet', '^3/0e 3/2e 3/4e', '[3 ^3/0e 3/2e 3/4e]')
    checkCommand('length.triplet', '[3 3/0e ^3/2e 3/4e] ; 6/0h', '3/0e ^3/2e 3/4e ; 6/0h')
  })
})
