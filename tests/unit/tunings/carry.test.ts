import fc from 'fast-check'
import { Note as TonalNote } from 'tonal'
import { describe, expect, it } from 'vitest'
import { retune } from '../../../shared/commands/retune'
import { applyTransaction, openEditor } from '../../../shared/editor'
import { linksOf, type Carried as CarriedLink } from '../../../shared/engraving/links'
import { add, compare } from '../../../shared/score/fraction'
import { capoFret } from '../../../shared/score/sounding'
import { lengthOf, startsOf } from '../../../shared/score/time'
import type { Bar, Head, Note, Score, VoiceName } from '../../../shared/score/types'
import { validateHead } from '../../../shared/score/validate'
import { carry, type Carried } from '../../../shared/tunings/carry'
import { soundChanges } from '../../../shared/tunings/carryNotes'
import { carrySentence, leftSentence, soundSentence } from '../../../shared/tunings/carryWords'
import { headArbitrary, scoreArbitrary } from '../../support/arbitraries'
import { checkLaws } from '../../support/checkCommand'
import { parseScore, printScore } from '../../support/score'

/** As players say a tuning, string 6 first; the score keeps string 1 first. */
const strung = (pitches: string) => pitches.split(' ').map(pitch => ({ pitch })).reverse()
const STANDARD = strung('E2 A2 D3 G3 B3 E4')

/** A piece carried from one tuning to another, as text, and what was left: "bar string/fret reason". */
function carried(text: string, from: string, to: string) {
  const score = parseScore(text, { strings: strung(from) })
  const result = carry(score, { strings: strung(to), capos: [] })
  const before = openEditor(score)
  const after = applyTransaction(before, retune(before, { strings: strung(to) }, result.voices)!, 0)
  expect(after.notice).toBeNull()
  checkLaws(before, after)
  return { text: printScore(after.score), left: result.left.map(({ bar, note, reason }) => `${bar} ${note.string}/${note.fret} ${reason}`), result }
}

const standard = 'E2 A2 D3 G3 B3 E4'
const doubleDropD = 'D2 A2 D3 G3 B3 D4'
const fourths = 'E2 A2 D3 G3 C4 F4'

describe('keeping the sound', () => {
  it('moves notes up their string by what the string went down', () => {
    // Common practice: in double drop D strings 6 and 1 are two frets lower, so that the same notes lie two frets higher.
    expect(carried('(6/0 4/2 1/0)q 6/3q 1/5q 3/2q', standard, doubleDropD)).toMatchObject({ text: '(1/2 4/2 6/2)q 6/5q 1/7q 3/2q', left: [] })
    expect(carried('(1/2 4/2 6/2)q 6/5q 1/7q 3/2q', doubleDropD, standard)).toMatchObject({ text: '(1/0 4/2 6/0)q 6/3q 1/5q 3/2q', left: [] })
  })

  it('takes what a string no longer has to a free one, near where the hand was', () => {
    // B3 is the open second string in standard tuning, the fourth fret of the third string in all fourths.
    expect(carried('2/0q', standard, fourths)).toMatchObject({ text: '3/4q', left: [] })
    expect(carried('(2/0 3/0)q', standard, fourths), 'string 3 is in use; string 4 has B3 at fret 9').toMatchObject({ text: '(3/0 4/9)q', left: [] })
  })

  it('puts nothing on a string that another voice still holds', () => {
    expect(carried('zq 2/0q ; 3/0h', standard, fourths).text, 'the lower voice holds string 3').toBe('zq 4/9q ; 3/0h')
    expect(carried('zq 2/0q ; 3/0q', standard, fourths).text, 'it has let go of it').toBe('zq 3/4q ; 3/0q')
  })

  it('leaves a note in place where it is lower than any string, or beyond every neck', () => {
    const { left, text, result } = carried('6/0q 6/2q 5/0q', doubleDropD, standard)
    expect(left).toEqual(['1 6/0 low'])
    expect(text).toBe('6/0q 6/0q 5/0q')
    expect(result.counts).toEqual({ notes: 3, same: 1, fret: 1, string: 0 })
    // String 1 two frets lower: the 20th fret of E4 (C6) would be its 22nd, and the neck has 20.
    expect(carried('1/20q', standard, doubleDropD).left).toEqual(['1 1/20 high'])
  })

  it('leaves it where the only strings that have it are in use, or out of reach', () => {
    expect(carried('(2/0 3/0 4/0 5/0 6/0)q', standard, fourths).left).toEqual(['1 2/0 taken'])
    // String 1 at fret 12 against B3 at fret 4 of string 3: some 190 mm on a 25.5 inch scale; fret 9 of string 4 is in use.
    expect(carried('(1/13 2/0 4/0 5/0 6/0)q', standard, fourths).left).toEqual(['1 2/0 reach'])
  })

  it('takes slurred and tied notes along together, or leaves them all', () => {
    expect(carried('2/0hq 2/1q 2/3pq 2/0=q | 2/0q', standard, fourths)).toMatchObject({ text: '3/4hq 3/5q 3/7pq 3/4=q | 3/4q', left: [] })
    expect(carried('6/2pq 6/0q 6/2q', doubleDropD, standard)).toMatchObject({ text: '6/2pq 6/0q 6/0q', left: ['1 6/2 bound', '1 6/0 low'] })
  })

  it('never puts a note between two that are slurred', () => {
    // Between the hammer-on's two notes on string 3, though string 3 is free at that moment.
    expect(carried('3/2hq (2/0 4/0 5/0 6/0)q 3/4q', standard, fourths).left).toEqual(['1 2/0 slur'])
    // Nor where a slur that has no note yet would take it for its own.
    expect(carried('3/2hq | (2/0 4/0 5/0 6/0)q', standard, fourths).left).toEqual(['2 2/0 slur'])
  })

  it('takes two stems on one plucked note along together', () => {
    expect(carried('2/0q ; 2/0h', standard, fourths)).toMatchObject({ text: '3/4q ; 3/4h', left: [] })
  })

  it('moves a natural harmonic only to a string that sounds it', () => {
    // Partial n of a string is n times its frequency: the 4th (touched at fret 5) of D2 is D4, which is the 2nd (fret 12) of D3.
    expect(carried('6/5<q', doubleDropD, standard)).toMatchObject({ text: '4/12<q', left: [] })
    expect(carried('6/12<q 4/12<q', doubleDropD, standard)).toMatchObject({ text: '6/12<q 4/12<q', left: ['1 6/12 harmonic'] })
  })

  it('leaves dead notes on their string and fret, and takes them along in a slur', () => {
    expect(carried('6/3xq', standard, doubleDropD)).toMatchObject({ text: '6/3xq', left: [] })
    expect(carried('6/3xq', standard, doubleDropD).result.counts.notes).toBe(0)
  })

  it('says which bars come to need a wider grip than a hand opens', () => {
    // Strings 6 and 1 at the first fret; one goes down seven half steps: frets 8 and 1 are some 204 mm apart.
    const { result } = carried('(6/1 1/1)q | 1/1q', standard, 'A1 A2 D3 G3 B3 E4')
    expect(result.wide).toEqual([1])
  })

  it('carries on to an instrument with more strings or fewer', () => {
    expect(carried('6/0q 1/0q', standard, 'B1 E2 A2 D3 G3 B3 E4')).toMatchObject({ text: '6/0q 1/0q', left: [] })
    expect(carried('7/0q 6/0q', 'B1 E2 A2 D3 G3 B3 E4', 'B1 A2 D3 G3 B3 E4')).toMatchObject({ text: '6/0q 6/5q', left: [] })
  })

  it('refuses, with the place, where a note’s string goes and no other has the note', () => {
    const state = openEditor(parseScore('6/0q | 7/0q', { strings: strung('B1 E2 A2 D3 G3 B3 E4') }))
    const result = carry(state.score, { strings: STANDARD, capos: [] })
    expect(result.left.map(({ note, reason }) => [note.string, reason])).toEqual([[7, 'low']])
    expect(retune(state, { strings: STANDARD }, result.voices)).toMatchObject({ notice: 'Bar 2: there is no string 7.' })
  })

  it('moves with a capo as well', () => {
    const score = parseScore('6/2q 5/0q', {})
    const { voices, left } = carry(score, { strings: STANDARD, capos: [{ fret: 2 }] })
    expect([voices.map(each => each.after.events.map(event => event.notes[0]!.fret)), left.length]).toEqual([[[0, 3]], 0])
  })
})

/** Sounding pitch by another library's reading of pitch names (tonal), and the law written out: open + capo + fret, or open + capo + 12·log₂(partial). */
function pitchBy(head: Head, { string, fret, harmonic }: Note): number {
  const { pitch, from = 0 } = head.strings[string - 1]!
  const stop = Math.max(from, ...head.capos.filter(({ strings }) => !strings || strings.includes(string)).map(capo => capo.fret))
  return TonalNote.midi(pitch)! + stop - from + (harmonic ? 12 * Math.log2(harmonic.partial) : fret)
}

const notesOf = (score: Score): Map<string, Note> =>
  new Map(score.bars.flatMap(bar => Object.values(bar.voices).flatMap(voice => voice.events.flatMap(event => event.notes))).map(note => [note.id, note]))

/** Where every link leads, by the drawing's own reading of them. */
function linkPairs(score: Score): string[] {
  let carriedIn: readonly CarriedLink[] = []
  return score.bars.flatMap((bar) => {
    const { links, out } = linksOf(bar, carriedIn)
    const pairs = links.map(({ from, to, string, voice }) => `${from ?? carriedIn.find(each => each.note.string === string && each.voice === voice)?.note.id} > ${to}`)
    carriedIn = out
    return pairs
  }).sort()
}

interface Sounding { readonly note: Note, readonly start: ReturnType<typeof add>, readonly end: ReturnType<typeof add> }
const soundingIn = (bar: Bar): Sounding[] => (Object.keys(bar.voices) as VoiceName[]).flatMap((name) => {
  const voice = bar.voices[name]!
  const starts = startsOf(voice)
  return voice.events.flatMap((event, at) => event.notes.map(note => ({ note, start: starts[at]!, end: add(starts[at]!, lengthOf(event.length, voice.tuplets)) })))
})

/** Pairs of notes that are written on one string at one time. */
const collisions = (score: Score): Set<string> => new Set(score.bars.flatMap((bar) => {
  const all = soundingIn(bar)
  return all.flatMap((a, at) => all.slice(at + 1).flatMap(b =>
    (a.note.string === b.note.string && compare(a.start, b.end) < 0 && compare(b.start, a.end) < 0 ? [[a.note.id, b.note.id].sort().join(' ')] : [])))
}))

function checkCarried(before: Score, after: Score, { left, counts, voices }: Carried) {
  const [was, is] = [notesOf(before), notesOf(after)]
  const leftIds = new Set(left.map(({ note }) => note.id))
  expect([...is.keys()].sort()).toEqual([...was.keys()].sort())
  for (const [id, note] of was) {
    const now = is.get(id)!
    if (leftIds.has(id)) expect(now).toEqual(note)
    else if (!note.dead) expect(Math.abs(pitchBy(after.head, now) - pitchBy(before.head, note))).toBeLessThan(1e-6)
    expect({ ...now, string: 0, fret: 0, harmonic: null }).toEqual({ ...note, string: 0, fret: 0, harmonic: null })
  }
  const pitched = [...was.values()].filter(note => !note.dead)
  expect(counts.notes).toBe(pitched.length)
  expect(counts.same + counts.fret + counts.string + left.length).toBe(pitched.length)
  expect(counts.string).toBe(pitched.filter(note => is.get(note.id)!.string !== note.string).length)
  expect(linkPairs(after)).toEqual(linkPairs(before))
  const known = collisions(before)
  for (const pair of collisions(after)) expect(known, 'two notes come to be on one string at one time').toContain(pair)
  for (const { bar, voice, after: laid } of voices) expect(laid).not.toEqual(before.bars.find(each => each.id === bar)!.voices[voice])
}

describe('of any piece and any two tunings', () => {
  const tuning = headArbitrary.map(({ strings, capos }) => ({ strings, capos }))
  /** Tunings that differ in some strings by a few frets, as players retune. */
  const near = (head: Head) => fc.array(fc.integer({ min: -4, max: 4 }), { minLength: head.strings.length, maxLength: head.strings.length }).map(steps => ({
    capos: head.capos, strings: head.strings.map((open, index) => ({ ...open, pitch: TonalNote.fromMidi(TonalNote.midi(open.pitch)! + steps[index]!) })),
  }))
  const wish = (head: Head) => fc.oneof({ weight: 3, arbitrary: near(head) }, { weight: 1, arbitrary: tuning })
  const cases = scoreArbitrary(3).chain(score => wish(score.head).map(head => structuredClone({ score, head })))

  it('every note that is not listed sounds as before, those listed stay, slurs hold, undo brings all back', () => {
    let applied = 0
    fc.assert(fc.property(cases, ({ score, head }) => {
      const result = carry(score, head)
      const before = openEditor(score)
      const transaction = retune(before, head, result.voices)
      if (!transaction) {
        expect([result.voices, result.left]).toEqual([[], []])
        return
      }
      const after = applyTransaction(before, transaction, 0)
      if (transaction.notice) {
        const { left } = result
        const strung = { ...score.head, ...head }
        const hasNoRoom = (note: Note) => note.string > strung.strings.length || capoFret(strung, note.string) + note.fret > strung.instrument.frets
        const staying = [...notesOf(score).values()].filter(note => note.dead || left.some(each => each.note.id === note.id))
        expect(staying.some(hasNoRoom) || validateHead(strung) !== null, transaction.notice).toBe(true)
        expect(after.score).toBe(before.score)
        return
      }
      applied += 1
      expect(after.history.undo).toHaveLength(1)
      checkLaws(before, after)
      checkCarried(score, after.score, result)
    }), { numRuns: 150 })
    expect(applied, 'most cases can be applied, so that the check means something').toBeGreaterThan(60)
  }, 60_000)

  it('counts the notes that change their sound when frets are kept', () => {
    fc.assert(fc.property(cases, ({ score, head }) => {
      const changes = soundChanges(score, head)
      const pitched = [...notesOf(score).values()].filter(note => !note.dead)
      if (pitched.some(note => note.string > head.strings.length)) {
        expect(changes).toBeNull()
        return
      }
      const after = { ...score.head, ...head }
      expect(changes).toEqual({ notes: pitched.length, changed: pitched.filter(note => Math.abs(pitchBy(after, note) - pitchBy(score.head, note)) > 1e-6).length })
    }), { numRuns: 60 })
  }, 60_000)
})

describe('in words', () => {
  it('says what is kept, what moves and what has no place', () => {
    const { result } = carried('6/0q 6/2q 5/0q', doubleDropD, standard)
    expect(carrySentence(result)).toBe('2 of 3 notes keep their sound: 1 where they are and 1 at another fret. 1 note has no place and sounds otherwise.')
    expect(carrySentence(carried('2/0q', standard, fourths).result)).toBe('The one note keeps its sound: 1 on another string.')
    expect(carrySentence({ counts: { notes: 0, same: 0, fret: 0, string: 0 }, left: [] })).toBe('There are no notes yet.')
    expect([soundSentence({ notes: 9, changed: 4 }), soundSentence({ notes: 9, changed: 0 })]).toEqual(['4 of 9 notes would sound otherwise.', 'No note would sound otherwise.'])
  })

  it('names the place, the reason and what will be heard', () => {
    const score = parseScore('6/0q', { strings: strung(doubleDropD) })
    const { left } = carry(score, { strings: STANDARD, capos: [] })
    expect(leftSentence(left[0]!, score.head, { ...score.head, strings: STANDARD }, 0)).toBe('String 6, fret 0: D2 is lower than any string now goes. Left there, it sounds E2.')
  })
})
