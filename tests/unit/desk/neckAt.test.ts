import { describe, expect, it } from 'vitest'
import { neckAt } from '../../../composables/neckAt'
import { openEditor, type EditorState } from '../../../shared/editor'
import { createScore, type NewScore } from '../../../shared/score/create'
import type { ScoreEvent } from '../../../shared/score/types'

const note = (id: string, string: number, fret: number, more = {}): ScoreEvent =>
  ({ id, length: { base: 4, dots: 0 }, notes: [{ id: `${id}n`, string, fret, ...more }] })

/** One bar of quarters in open G (D2 G2 D3 G3 B3 D4) with the cursor on an event. */
function at(eventId: string, string: number, events: readonly ScoreEvent[], more: Partial<NewScore> = {}): EditorState {
  const { head } = createScore({ title: 'Test', strings: ['D4', 'B3', 'G3', 'D3', 'G2', 'D2'].map(pitch => ({ pitch })), ...more }, () => 'b0')
  const state = openEditor({ head, bars: [{ id: 'b0', key: { fifths: 1, mode: 'major' }, voices: { upper: { events } } }] })
  return { ...state, selection: { cursor: { barId: 'b0', voice: 'upper', eventId, string }, anchor: null } }
}

describe('the neck at the cursor', () => {
  const events = [note('a', 5, 0), note('b', 3, 2), note('c', 3, 4)]

  it('shows the note that sounds, by its fret from the nut and its name in the sounding key', () => {
    expect(neckAt(at('b', 3, events)).sounding).toEqual({ string: 3, fret: 2, name: 'A' })
    // G major with capo 2 sounds as A major: fret 2 above the capo on G3 is B.
    expect(neckAt(at('b', 3, events, { capos: [{ fret: 2 }] }))).toMatchObject({ fifths: 3, sounding: { string: 3, fret: 4, name: 'B' } })
  })

  it('shows nothing where the cursor\'s string has no note', () => expect(neckAt(at('b', 1, events)).sounding).toBeNull())

  it('shows what was struck before and rings on, until its string is used again', () => {
    const ringing = (eventId: string) => neckAt(at(eventId, 3, events, { ring: 'let-ring' })).ringing.map(each => `${each.string}/${each.fret}`)
    expect(ringing('a')).toEqual(['5/0'])
    expect(ringing('b')).toEqual(['5/0'])
    expect(neckAt(at('c', 1, events, { ring: 'let-ring' })).ringing.map(each => `${each.string}/${each.fret}`)).toEqual(['5/0', '3/4'])
  })

  it('shows nothing ringing where notes end as written', () => expect(neckAt(at('b', 3, events)).ringing).toEqual([]))
})
