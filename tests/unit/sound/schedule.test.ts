import { describe, expect, it } from 'vitest'
import { momentAt, scheduleOf, unroll, type Range } from '../../../shared/sound'
import type { Score } from '../../../shared/score/types'
import { parseScore } from '../../support/score'

const round = (seconds: number): number => Math.round(seconds * 1000) / 1000

/** "seconds string:midi touch" of each sound. */
const sounds = (score: Score, range?: Range): string[] => scheduleOf(score, range).events.flatMap(event =>
  (event.kind === 'sound' ? `${round(event.at)} ${event.note.string}:${round(event.note.midi)} ${event.note.touch}` : []))
const damps = (score: Score): string[] => scheduleOf(score).events.flatMap(event => (event.kind === 'damp' ? `${round(event.at)} ${event.string}` : []))
const clicks = (score: Score, range?: Range): string[] => scheduleOf(score, range).events.flatMap(event =>
  (event.kind === 'click' ? `${round(event.at)}${event.accent ? '!' : ''}` : []))

describe('order of playing', () => {
  const order = (text: string) => unroll(parseScore(text).bars).map(index => index + 1)

  // Repeat signs as in any printed music (common practice).
  it('goes back to the sign, or to the beginning, or behind the repeat before', () => {
    expect(order('zw | {|:} zw | {:|} zw | zw')).toEqual([1, 2, 3, 2, 3, 4])
    expect(order('zw | {:|} zw | zw | {:|} zw')).toEqual([1, 2, 1, 2, 3, 4, 3, 4])
    expect(order('{|:} {:|3} zw | zw')).toEqual([1, 1, 1, 2])
    expect(order('zw | zw')).toEqual([1, 2])
  })
})

describe('what is heard, and when', () => {
  it('places notes by the tempo, and its changes', () => {
    expect(sounds(parseScore('{q=120} 6/0q 5/2q zh | {q=60} 1/0h 1/12h'))).toEqual(['0 6:40 pluck', '0.5 5:47 pluck', '2 1:64 pluck', '4 1:76 pluck'])
    expect(scheduleOf(parseScore('{q=120} 6/0q 5/2q zh | {q=60} 1/0h 1/12h')).length).toBe(6)
    expect(sounds(parseScore('{6/8} {q.=60} 3/0e 3/2e 3/0e 2/0q.'))).toEqual(['0 3:55 pluck', '0.333 3:57 pluck', '0.667 3:55 pluck', '1 2:59 pluck'])
  })

  it('strikes a tied note once and holds it', () => {
    const score = parseScore('{q=60} zq zh 1/3=q | 1/3q zh.')
    expect(sounds(score)).toEqual(['3 1:67 pluck'])
    expect(damps(score)).toEqual(['5 1'])
  })

  it('hammers on and pulls off, also behind a tie and over the bar line', () => {
    expect(sounds(parseScore('{q=60} 3/0hq 3/2=q 3/2ph zw'.replace(' zw', ' | 3/0w')))).toEqual(['0 3:55 pluck', '1 3:57 hammer-on', '4 3:55 pull-off'])
  })

  it('sounds dead notes, harmonics, capos and chords', () => {
    expect(sounds(parseScore('{q=60} 6/0xq 6/7<q (6/0 5/2)h', { capos: [{ fret: 2 }] })))
      .toEqual(['0 6:42 dead', `1 6:${round(42 + 12 * Math.log2(3))} pluck`, '2 5:49 pluck', '2 6:42 pluck'])
  })

  it('damps what ends as written and lets the rest ring', () => {
    expect(damps(parseScore('{q=60} 6/0q 5/0q zh'))).toEqual(['1 6', '2 5'])
    expect(damps(parseScore('{q=60} 6/0q 5/0q zh', { ring: 'let-ring' }))).toEqual([])
    expect(damps(parseScore('{q=60} 6/0!q 5/0q zh', { ring: 'let-ring' }))).toEqual(['1 6'])
  })

  it('plays a repeat as it sounds: a tie over the repeat’s end does not reach the passage again', () => {
    expect(sounds(parseScore('{q=60} {:|} 1/0w | 2/0w'))).toEqual(['0 1:64 pluck', '4 1:64 pluck', '8 2:59 pluck'])
  })

  it('gives a bar that is too full its time', () => {
    expect(sounds(parseScore('{q=60} 1/0w 1/2q | 2/0w'))).toEqual(['0 1:64 pluck', '4 1:66 pluck', '5 2:59 pluck'])
  })
})

describe('excerpts', () => {
  const score = parseScore('{q=60} 6/0q 5/0q 4/0q 3/0q | {:|} 2/0q 1/0q 1/2=q 1/2q | 1/5w')
  const place = (barId: string, eventId: string) => ({ barId, eventId, voice: 'upper' as const })

  it('plays from a place on, with the repeats behind it', () => {
    expect(sounds(score, { from: place('b2', 'e6') }).slice(0, 3)).toEqual(['0 1:64 pluck', '1 1:66 pluck', '3 6:40 pluck'])
    expect(scheduleOf(score, { from: place('b2', 'e6') }).length).toBe(3 + 8 + 4)
  })

  it('strikes a tied note when it begins there', () => {
    expect(sounds(score, { from: place('b2', 'e8') })[0]).toBe('0 1:66 pluck')
  })

  it('plays a selection as written and no more, whichever end came first', () => {
    const wanted = ['0 4:50 pluck', '1 3:55 pluck', '2 2:59 pluck']
    expect(sounds(score, { from: place('b1', 'e3'), through: place('b2', 'e5') })).toEqual(wanted)
    expect(sounds(score, { from: place('b2', 'e5'), through: place('b1', 'e3') })).toEqual(wanted)
    expect(scheduleOf(score, { from: place('b1', 'e3'), through: place('b2', 'e5') }).length).toBe(3)
    expect(sounds(score, { from: place('b1', 'e2'), through: place('b1', 'e2') })).toEqual(['0 5:45 pluck'])
  })

  it('takes a place that is gone for the beginning', () => {
    expect(sounds(score, { from: place('b2', 'end') })[0]).toBe('0 2:59 pluck')
  })
})

describe('clicks', () => {
  it('falls on the beats a player counts, with the first one louder', () => {
    expect(clicks(parseScore('{q=60} zw | {3/4} zh.'))).toEqual(['0!', '1', '2', '3', '4!', '5', '6'])
    expect(clicks(parseScore('{6/8} {q.=60} 3/0e 3/2e 3/0e 2/0q.'))).toEqual(['0!', '1'])
  })

  it('counts a pickup as the end of a bar, a short closing bar as its beginning', () => {
    expect(clicks(parseScore('{q=60} {len=1/4} 1/0q | zw | {len=3/4} {:|} zh.')).slice(0, 8)).toEqual(['0', '1!', '2', '3', '4', '5!', '6', '7'])
    expect(clicks(parseScore('{6/8} {q.=60} {len=1/8} 1/0e | 3/0q. 2/0q.'))).toEqual(['0.333!', '1.333'])
  })

  it('starts within the bar where playing starts there', () => {
    const score = parseScore('{q=60} 6/0q 5/0e 4/0q. 3/0q')
    expect(clicks(score, { from: { barId: 'b1', voice: 'upper', eventId: 'e3' } })).toEqual(['0.5', '1.5'])
  })
})

describe('following', () => {
  const schedule = scheduleOf(parseScore('{q=60} 1/0h 1/2h ; 6/0q 5/0q 4/0h | 1/0w'))
  const at = (seconds: number) => momentAt(schedule, seconds)

  it('says which events of which bar are under way', () => {
    expect(at(0)).toMatchObject({ barId: 'b1', eventIds: ['e1', 'e3'] })
    expect(at(1.5)).toMatchObject({ barId: 'b1', eventIds: ['e1', 'e4'] })
    expect(at(3.99)).toMatchObject({ barId: 'b1', eventIds: ['e2', 'e5'] })
    expect(at(4)).toMatchObject({ barId: 'b2', eventIds: ['e6'] })
    expect(at(-1)).toBeNull()
  })
})
