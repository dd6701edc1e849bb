import { createIds } from '#shared/editor/ids'
import { createScore, type NewScore } from '#shared/score/create'
import type { Bar, Base, LinkKind, Note, OpenString, Score, ScoreEvent, Tuplet, Voice } from '#shared/score/types'

/**
 * Little pieces of our own, written as an arranger would jot them down: string/fret, a length letter, events apart by
 * spaces, bars by "|". `h p =` behind a fret: hammer-on, pull-off, tie; `*3` a harmonic's partial; `+` joins a chord;
 * `z` a rest; `.` a dot; `3` behind the length: one of an eighth-note triplet.
 */
interface Piece extends NewScore { readonly upper: string, readonly lower: string, readonly repeats?: readonly { readonly from: number, readonly to: number }[] }

const BASE_OF: Readonly<Record<string, Base>> = { w: 1, h: 2, q: 4, e: 8, s: 16 }
const LINK_OF: Readonly<Record<string, LinkKind>> = { 'h': 'hammer-on', 'p': 'pull-off', '=': 'tie' }
type NewId = () => string

function note(text: string, newId: NewId): Note {
  const [, string, fret, partial, link] = /^(\d+)\/(\d+)(?:\*(\d+))?([hp=])?$/.exec(text) ?? []
  return {
    id: newId(), string: Number(string), fret: Number(fret),
    ...(partial && { harmonic: { partial: Number(partial) } }), ...(link && { link: LINK_OF[link] }),
  }
}

function event(text: string, tuplet: string, newId: NewId): ScoreEvent {
  const [, notes = '', base = 'q', dot, triplet] = /^(.*)([whqes])(\.)?(3)?$/.exec(text) ?? []
  const length = { base: BASE_OF[base]!, dots: dot ? 1 : 0, ...(triplet && { tuplets: [tuplet] }) }
  return { id: newId(), length, notes: notes === 'z' ? [] : notes.split('+').map(each => note(each, newId)) }
}

function voice(text: string, newId: NewId): Voice {
  const tuplet: Tuplet = { id: newId(), actual: 3, normal: 2, base: 8 }
  const events = text.trim().split(/\s+/).map(each => event(each, tuplet.id, newId))
  return { events, ...(events.some(each => each.length.tuplets) && { tuplets: [tuplet] }) }
}

/** @throws nothing: the pieces below are checked by a test */
function build({ upper, lower, repeats = [], ...wish }: Piece, name: string): Score {
  const newId = createIds(name).next
  const opening = createScore(wish, newId)
  const below = lower.split('|')
  const bars = upper.split('|').map((text, index): Bar => ({
    ...(opening.bars[index] ?? { id: newId() }),
    ...(repeats.some(({ from }) => from === index + 1 && from > 1) && { repeatStart: true as const }),
    ...(repeats.some(({ to }) => to === index + 1) && { repeatEnd: 2 }),
    voices: { upper: voice(text, newId), ...(below[index]?.trim() && { lower: voice(below[index], newId) }) },
  }))
  return { ...opening, bars }
}

/** As tunings are said: string 6 first. */
const tuned = (pitches: string): OpenString[] => pitches.split(' ').reverse().map(pitch => ({ pitch }))

const saltmarshRoad: Piece = {
  title: 'The Saltmarsh Road', composer: 'Maren Holt', arranger: 'Maren Holt', strings: tuned('C2 G2 D3 G3 C4 D4'),
  key: { fifths: 1, mode: 'major' }, tempo: { base: 4, dots: 0, perMinute: 92 }, ring: 'let-ring',
  repeats: [{ from: 1, to: 8 }, { from: 9, to: 16 }],
  upper: `
    3/0he 3/2e 3/4e 2/0e 1/0q 2/4e 1/0e | 1/5q 1/4pe 1/0e 2/4q 2/0e 1/0e | 3/4q. 2/0e 1/0q 1/2e 1/4e | 1/5h 2/4q 1/0q |
    3/0he 3/2e 3/4e 2/0e 1/0q 2/4e 1/0e | 1/2q 1/0q 2/0e 3/4e 3/2q | 2/0e3 2/2e3 2/4e3 1/0q 3/4q 3/2q | 3/0h. zq |
    1/9q. 1/7e 1/5q 1/4q | 1/5e 1/7e 1/9q 1/5h | 1/4q 1/5e 1/4e 1/2q 1/0q | 1/0=h. 1/0q |
    1/9q. 1/7e 1/5q 1/4q | 1/12*2h 2/12*2h | 1/0e 2/4e 2/0e 3/4e 3/2q 2/0e 3/4e | 3/0+1/5w`,
  lower: `
    5/0h 4/0h | 6/0h 5/0h | 5/0h 4/0h | 5/0q 4/0q 3/0h |
    5/0h 4/0h | 6/0h 4/4h | 5/0h 4/0h | 5/0q 4/0q 5/0h |
    5/0h 4/0h | 6/0h 5/0h | 4/0h 5/2h | 5/0q 4/0q 3/0q 4/0q |
    5/0h 4/0h | 6/0h 5/0h | 4/0h 4/0h | 5/0+4/0w`,
}

const lanternWaltz: Piece = {
  title: 'Lantern Waltz', composer: 'Ines Okafor', arranger: 'Ines Okafor', strings: tuned('C2 G2 C3 G3 C4 E4'), capos: [{ fret: 2 }],
  meter: { beats: 3, unit: 4 }, pickup: { n: 1, d: 4 }, tempo: { base: 4, dots: 0, perMinute: 112 }, ring: 'let-ring',
  upper: '3/0e 3/2e | 2/0q. 2/2e 1/0q | 1/3h 1/0e 2/2e | 2/0q 3/4e 3/2e 3/0q | 3/2h 3/0e 3/2e | 2/0q. 2/2e 1/0q | 1/5q 1/3q 1/1q | 1/0q 2/2e 3/4e 2/2q | 2/0h.',
  lower: 'zq | 6/0h. | 5/0h. | 4/0h. | 5/0h. | 6/0h. | 4/5h. | 5/0h. | 6/0h.',
}

const gullsOverHay: Piece = {
  title: 'Gulls over Hay Fen', composer: 'Maren Holt', arranger: 'Maren Holt', strings: tuned('D2 G2 D3 G3 B3 D4'),
  meter: { beats: 6, unit: 8 }, key: { fifths: 1, mode: 'major' }, tempo: { base: 4, dots: 1, perMinute: 72 },
  upper: '1/0e 2/0e 3/0e 2/1q 2/0e | 3/0q 3/2e 2/0q. | 1/0e 1/2e 1/4e 1/5q 1/4e | 1/2q. 1/0q. | 2/0e 3/0e 3/2e 2/0q 2/1e | 1/0h.',
  lower: '5/0h. | 4/0q. 5/0q. | 5/0h. | 4/0q. 6/0q. | 5/0h. | 5/0q. 4/0q.',
}

const lowWater: NewScore = { title: 'Low Water', arranger: 'Maren Holt', strings: tuned('C2 F2 C3 G3 A3 D4'), key: { fifths: -1, mode: 'major' } }

/** What the demo's people find in their folio; the last one is empty. */
export const demoPieces = (): { readonly saltmarshRoad: Score, readonly lanternWaltz: Score, readonly gullsOverHay: Score, readonly lowWater: Score } => ({
  saltmarshRoad: build(saltmarshRoad, 'saltmarsh'),
  lanternWaltz: build(lanternWaltz, 'lantern'),
  gullsOverHay: build(gullsOverHay, 'gulls'),
  lowWater: createScore(lowWater, createIds('lowwater').next),
})
