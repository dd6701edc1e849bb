import { describe, expect, it } from 'vitest'
import { compareReadings, tabText } from '../../../components/editor/desk/tabText'
import { createScore } from '../../../shared/score/create'
import type { Note, ScoreEvent, Voice } from '../../../shared/score/types'

const event = (...notes: readonly (readonly [number, number, Partial<Note>?])[]): ScoreEvent => ({
  id: `e${notes.length}`, length: { base: 8, dots: 0 }, notes: notes.map(([string, fret, more], index) => ({ id: `n${index}`, string, fret, ...more })),
})
const voice: Voice = { events: [event([1, 12], [4, 0]), event(), event([2, 3, { dead: true }])] }

describe('a reading as plain tab', () => {
  // Plain-text tab: string 1 on top, dashes between, numbers over each other sound together, x is a dead note (common practice).
  it('puts one event in a column', () => expect(tabText(voice, 4)).toBe([
    '|-12----------|',
    '|---------x---|',
    '|-------------|',
    '|-0-----------|',
  ].join('\n')))
})

describe('two readings side by side', () => {
  const score = { ...createScore({ title: 'Test' }, () => 'b0'), bars: [{ id: 'b0', voices: { upper: voice } }] }
  it('shows mine beside what stands in the score now', () => {
    const { what, mine, theirs } = compareReadings(score, { kind: 'voice', bar: 'b0', voice: 'upper', mine: null, theirs: null })
    expect(what).toBe('The upper voice of bar 1')
    expect(mine).toMatchObject({ tab: null, words: 'This voice is empty.' })
    expect(theirs).toMatchObject({ tab: tabText(voice, 6), words: 'eighth, eighth rest, eighth' })
  })
  it('says the values of a field', () => {
    const { what, mine, theirs } = compareReadings(score, { kind: 'field', bar: null, field: 'strings', mine: [{ pitch: 'D4' }, { pitch: 'C4' }], theirs: [] })
    expect([what, mine.words, theirs.words]).toEqual(['The tuning of the arrangement', 'D4 C4', 'none'])
  })
})
