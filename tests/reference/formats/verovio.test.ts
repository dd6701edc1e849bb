import { describe, expect, it } from 'vitest'
import { contextOf } from '../../../shared/score/context'
import { fraction, toNumber } from '../../../shared/score/fraction'
import { capoFret, capoOffset, openMidi, soundingMidi } from '../../../shared/score/sounding'
import { lengthOf, playedLength, startsOf } from '../../../shared/score/time'
import { VOICE_NAMES, type Bar, type Note, type Score } from '../../../shared/score/types'
import { placeChord } from '../../../shared/formats/musicxml/place'
import { writeMusicXml } from '../../../shared/formats/musicxml'
import { PLANXTY_IRWIN_FIRST_STRAIN, readAbc, soundedNotes, type AbcBar } from '../../support/abc'
import { parseScore } from '../../support/score'
import { heardByVerovio, tabByVerovio, type HeardNote } from './readers'
import { scores } from './scores'

/** Verovio 6.3 (rism.digital) imports MusicXML on its own and plays it; what it plays is compared with law 1 note by note. */

interface Expected { readonly midi: number, readonly start: number, readonly length: number }

/** Bars in playing order; our scores here have one simple repeat at most. */
function played(score: Score): { readonly bar: Bar, readonly index: number }[] {
  const bars = score.bars.map((bar, index) => ({ bar, index }))
  const end = bars.findIndex(({ bar }) => bar.repeatEnd)
  if (end < 0) return bars
  const start = Math.max(0, bars.findIndex(({ bar }) => bar.repeatStart))
  return [...bars.slice(0, end + 1), ...bars.slice(start, end + 1), ...bars.slice(end + 1)]
}

/** Every note of the score in quarters, ties joined, by a pitch function. */
function expectedNotes(score: Score, pitch: (note: Note) => number): Expected[] {
  const notes: (Expected & { readonly voice: string, readonly string: number, readonly ties: boolean })[] = []
  let at = 0
  for (const { bar, index } of played(score)) {
    for (const voice of VOICE_NAMES) {
      const content = bar.voices[voice]
      if (!content) continue
      const starts = startsOf(content)
      content.events.forEach((event, position) => {
        const length = 4 * toNumber(lengthOf(event.length, content.tuplets))
        const start = at + 4 * toNumber(starts[position]!)
        for (const note of event.notes) {
          const from = notes.findLastIndex(each => each.voice === voice && each.string === note.string)
          const tied = notes[from]
          if (tied?.ties && Math.abs(tied.start + tied.length - start) < 1e-9) notes[from] = { ...tied, length: tied.length + length, ties: note.link === 'tie' }
          else notes.push({ midi: pitch(note), start, length, voice, string: note.string, ties: note.link === 'tie' })
        }
      })
    }
    at += 4 * toNumber(playedLength(bar, contextOf(score, index).meter))
  }
  return notes.map(({ midi, start, length }) => ({ midi, start, length })).sort((a, b) => a.start - b.start || a.midi - b.midi)
}

/** Verovio ends a note a tick or so before the next. */
const TICK = 0.02

function expectSame(heard: readonly HeardNote[], expected: readonly Expected[]): void {
  expect(heard.map(note => note.midi)).toEqual(expected.map(note => note.midi))
  heard.forEach((note, index) => {
    expect(note.start).toBeCloseTo(expected[index]!.start, 2)
    expect(Math.abs(note.length - expected[index]!.length)).toBeLessThan(TICK)
  })
}

describe('Verovio hears what sounds', () => {
  it.each(Object.entries(scores))('%s', async (_, score) => {
    const text = writeMusicXml(score)
    const [notation] = await heardByVerovio(text)
    expectSame(notation ?? [], expectedNotes(score, note => Math.round(soundingMidi(score.head, note))))
    const { head } = score
    const written = score.bars.flatMap(bar => VOICE_NAMES.flatMap(name => bar.voices[name]?.events.flatMap(event => event.notes) ?? []))
    const tab = await tabByVerovio(text)
    expect(tab.map(({ course, fret }) => [course, fret])).toEqual(written.map(note => [note.string, note.fret]))
    // Tuning + capo + fret is the pitch (XSD: staff-tuning is without the capo, which Verovio leaves out).
    expect(tab.map(({ open, fret }) => open + capoOffset(head) + fret)).toEqual(written.map(note => openMidi(head, note.string) + note.fret))
  })
})

/** The printed melody on strings, an octave below the staff pitch, as the guitar sounds. */
function arranged(bars: readonly AbcBar[], head: Score['head']): Score {
  const opening = parseScore('{6/8} {D} {q.=60} {len=1/8} {|:} | ', head).bars
  let count = 0
  const id = () => `p${count++}`
  return {
    head,
    bars: bars.map((bar, index): Bar => ({
      ...(index === 0 ? opening[0]! : { id: id() }),
      ...(index === bars.length - 1 && { length: fraction(5, 8), repeatEnd: 2 }),
      voices: {
        upper: {
          events: bar.notes.map(({ midi, length }) => {
            const place = midi === null ? null : placeChord(head, [midi - 12], new Set())[0]
            const eighths = toNumber(length) * 8
            return {
              id: id(), length: { base: eighths === 1 ? 8 as const : 4 as const, dots: eighths === 3 ? 1 : 0 },
              notes: place ? [{ id: id(), string: place.string, fret: place.fret }] : [],
            }
          }),
        },
      },
    })),
  }
}

describe('Planxty Irwin, O’Neill’s Music of Ireland (1903) no. 677', () => {
  const { bars } = readAbc(PLANXTY_IRWIN_FIRST_STRAIN)
  const melody = soundedNotes(bars)

  it.each([[0, 'without capo'], [2, 'with capo 2']])('is heard as printed, %i half steps above the octave below (%s)', async (capo) => {
    const head = { ...parseScore('zq', { strings: ['D4', 'C4', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch })), capos: capo ? [{ fret: capo }] : [] }).head }
    const score = arranged(bars, head)
    // Written pitches hold under the capo, so that the same frets sound higher.
    const withCapo = capo ? { ...score, bars: arranged(bars, { ...head, capos: [] }).bars } : score
    const [notation] = await heardByVerovio(writeMusicXml(withCapo))
    const twice = [...melody, ...melody]
    expect(notation?.map(note => note.midi)).toEqual(twice.map(note => note.midi! - 12 + capo))
    notation?.forEach((note, index) => expect(Math.abs(note.length - 4 * toNumber(twice[index]!.length))).toBeLessThan(TICK))
    expect(capoFret(head, 1)).toBe(capo)
  })
})
