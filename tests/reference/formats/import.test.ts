import { readFileSync, readdirSync } from 'node:fs'
import { describe, expect, it, type TestContext } from 'vitest'
import { readMusicXml } from '../../../shared/formats/musicxml'
import { soundingMidi } from '../../../shared/score/sounding'
import type { Score } from '../../../shared/score/types'
import { EXAMPLES_FOLDER, LINKED_STAVES_FILE, SKIPPED, hasStandards } from './readers'

// Files that others wrote: the W3C examples of MusicXML 4.0 and its tutorial, read in place.
const needsStandards = (context: TestContext) => context.skip(!hasStandards, SKIPPED)
const example = (name: string) => readFileSync(`${EXAMPLES_FOLDER}/${name}`, 'utf8')

function read(text: string): { score: Score, remarks: string[] } {
  const result = readMusicXml(text)
  if ('problem' in result) throw new Error(result.problem)
  return result
}
const upperNotes = (score: Score) => score.bars.flatMap(bar => bar.voices.upper?.events.flatMap(event => event.notes) ?? [])

/** Puts a fragment where it belongs in a score, by its outermost element. */
function wrapped(fragment: string): string {
  const body = fragment.replace(/<\?xml[^>]*\?>/, '').replace(/<!DOCTYPE[^>]*>/, '').trim()
  const name = /<([\w-]+)/.exec(body.replace(/<!--[\s\S]*?-->/g, ''))?.[1] ?? ''
  const note = (inside: string) => `<note><pitch><step>C</step><octave>4</octave></pitch><duration>1</duration>${inside}</note>`
  const measure = (inside: string) => `<part id="P1"><measure number="1">${inside}</measure></part>`
  const attributes = `<attributes><divisions>1</divisions></attributes>`
  const inNote = ['notations', 'lyric', 'beam', 'stem', 'notehead-text', 'time-modification', 'accidental', 'play', 'listen']
  const inMeasure = ['note', 'backup', 'forward', 'direction', 'attributes', 'harmony', 'figured-bass', 'print', 'sound', 'listening', 'barline', 'grouping', 'link', 'bookmark']
  const inAttributes = ['staff-details', 'clef', 'key', 'time', 'transpose', 'measure-style', 'part-symbol', 'staves']
  if (name.startsWith('score-')) return body
  if (name === 'part') return `<score-partwise>${body}</score-partwise>`
  if (name === 'measure') return `<score-partwise><part id="P1">${body}</part></score-partwise>`
  if (inNote.includes(name)) return `<score-partwise>${measure(attributes + note(body))}</score-partwise>`
  if (inMeasure.includes(name)) return `<score-partwise>${measure(attributes + body + note(''))}</score-partwise>`
  if (inAttributes.includes(name)) return `<score-partwise>${measure(`<attributes><divisions>1</divisions>${body}</attributes>${note('')}`)}</score-partwise>`
  return `<score-partwise>${body}${measure(attributes + note(''))}</score-partwise>`
}

describe('the W3C examples', () => {
  it('all 291 are read, or refused with a clear reason', (context) => {
    needsStandards(context)
    const files = ['whole', 'fragments'].flatMap(folder => readdirSync(`${EXAMPLES_FOLDER}/${folder}`).map(name => `${folder}/${name}`))
    expect(files).toHaveLength(291)
    const refused = files.flatMap((name) => {
      const result = readMusicXml(wrapped(example(name)))
      if ('problem' in result) return [`${name}: ${result.problem}`]
      expect(result.score.bars.length, name).toBeGreaterThan(0)
      return []
    })
    console.log(`W3C examples: ${files.length - refused.length} read, ${refused.length} refused\n${refused.join('\n')}`)
    // Of the whole scores all but one, which has a title and no part.
    expect(refused.filter(each => each.startsWith('whole/'))).toEqual(['whole/movement-number-and-movement-title-elements.xml: There are no notes in this file.'])
    // Refused fragments: no notes in them, or no well-formed XML as published ("Clarinets 1&2").
    expect(refused.length).toBeLessThanOrEqual(6)
    for (const each of refused) expect(each).toMatch(/: [A-Z].{20,}\.$/)
  })

  it('the tutorial on tablature: notation and tab in two parts', (context) => {
    needsStandards(context)
    const { score, remarks } = read(example('whole/tutorial-tablature.xml'))
    expect(upperNotes(score).map(note => [note.string, note.fret, note.link])).toEqual([
      [3, 5, 'hammer-on'], [3, 7, undefined], [3, 8, 'pull-off'], [3, 7, 'pull-off'], [3, 5, undefined],
    ])
    expect(score.head.strings.map(open => open.pitch)).toEqual(['E4', 'B3', 'G3', 'D3', 'A2', 'E2'])
    expect(upperNotes(score).map(note => soundingMidi(score.head, note))).toEqual([60, 62, 63, 62, 60])
    // The E flat stands on the staff; the key of C would spell it so as well.
    expect(upperNotes(score).map(note => note.spelling)).toEqual([undefined, undefined, undefined, undefined, undefined])
    expect(score.bars[0]).toMatchObject({ tempo: { base: 4, dots: 0, perMinute: 120 }, meter: { beats: 4, unit: 4 } })
    expect(remarks).toEqual([])
  })

  it('linked staves in one part with a capo: the rule that held is reported', (context) => {
    needsStandards(context)
    const { score, remarks } = read(readFileSync(LINKED_STAVES_FILE, 'utf8'))
    expect(score.head).toMatchObject({ title: 'Planxty Irwin (opening)', composer: 'Turlough O\'Carolan (1670-1738)', rights: 'Public domain', capos: [{ fret: 2 }] })
    expect(score.head.strings.map(open => open.pitch)).toEqual(['D4', 'A3', 'G3', 'D3', 'A2', 'D2'])
    // Handbook of the project: in D A D G A D the opening falls on 1/0 2/4 3/4 2/4 1/0.
    expect(upperNotes(score).map(note => [note.string, note.fret, note.ring])).toEqual([[1, 0, 'let-ring'], [2, 4, 'let-ring'], [3, 4, 'let-ring'], [2, 4, 'let-ring'], [1, 0, 'let-ring']])
    expect(upperNotes(score).map(note => soundingMidi(score.head, note))).toEqual([64, 63, 61, 63, 64])
    expect(score.bars[0]?.key).toEqual({ fifths: 2, mode: 'major' })
    expect(remarks).toContain('Pitches in the file are tuning + capo + fret, as they sound with capo 2.')
    expect(remarks).toContain('Left out: text above the staff (bar 1).')
    // The file's durations are twice its shapes, a quarter and four eighths, which are what 6/8 holds and O'Neill prints.
    expect(score.bars[0]?.voices.upper?.events.map(event => event.length)).toEqual([4, 8, 8, 8, 8].map(base => ({ base, dots: 0 })))
    expect(score.bars[0]?.length).toBeUndefined()
    expect(remarks).toContain('The durations in the file do not fit its note shapes. The shapes were followed.')
    expect(remarks).toHaveLength(3)
  })

  it('pitches that leave the capo out are recognised, and string and fret kept', (context) => {
    needsStandards(context)
    // The same file with the tab staff's pitches two half steps lower, as some programs write them.
    const lower: Record<string, string> = { 'E</step><octave>4': 'D</step><octave>4', 'D</step><alter>1</alter><octave>4': 'C</step><alter>1</alter><octave>4', 'C</step><alter>1</alter><octave>4': 'B</step><octave>3' }
    const text = readFileSync(LINKED_STAVES_FILE, 'utf8').replace(/(E<\/step><octave>4|[DC]<\/step><alter>1<\/alter><octave>4)/g, match => lower[match] ?? match)
    const { score, remarks } = read(text)
    expect(upperNotes(score).map(note => [note.string, note.fret])).toEqual([[1, 0], [2, 4], [3, 4], [2, 4], [1, 0]])
    expect(remarks.join(' ')).toContain('Pitches in the file are tuning + fret, without the capo')
  })

  it('notation alone is placed on strings, and says so', (context) => {
    needsStandards(context)
    const { score, remarks } = read(example('whole/tutorial-hello-world.xml'))
    expect(upperNotes(score).map(note => soundingMidi(score.head, note))).toEqual([60])
    expect(remarks.join(' ')).toContain('1 note had no string and fret: placed at the lowest possible fret (bar 1)')
  })
})
