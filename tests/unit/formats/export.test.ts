import { parseXml, type XmlElement } from '@rgrove/parse-xml'
import { describe, expect, it } from 'vitest'
import { readMusicXml, writeMusicXml } from '../../../shared/formats/musicxml'
import { beamsOf } from '../../../shared/formats/musicxml/beams'
import { all, one, textAt } from '../../../shared/formats/musicxml/tree'
import { escaped } from '../../../shared/formats/musicxml/xml'
import { parseScore } from '../../support/score'
import type { Head } from '../../../shared/score/types'

const strings = (pitches: string): Head['strings'] => pitches.split(' ').reverse().map(pitch => ({ pitch }))
const exported = (text: string, head: Partial<Head> = {}): XmlElement => parseXml(writeMusicXml(parseScore(text, head))).root!
const attributesOf = (root: XmlElement) => one(root, 'part', 'measure', 'attributes')!
const notesOf = (root: XmlElement, staff: number) => all(one(root, 'part'), 'measure').flatMap(measure => all(measure, 'note')).filter(note => textAt(note, 'staff') === String(staff))
const pitchOf = (note: XmlElement) => ['step', 'alter', 'octave'].map(name => textAt(note, 'pitch', name) ?? '').join('')

// Elements and meanings: W3C MusicXML 4.0 XSD and its staff-type example.
describe('the form of the export', () => {
  it('has a tab staff that is alternate, lines counted from the lowest', () => {
    const details = one(attributesOf(exported('1/0q', { strings: strings('C2 G2 D3 G3 C4 D4'), capos: [{ fret: 2 }] })), 'staff-details')!
    expect(textAt(details, 'staff-type')).toBe('alternate')
    expect(all(details, 'staff-tuning').map(each => [each.attributes.line, textAt(each, 'tuning-step'), textAt(each, 'tuning-octave')])).toEqual([
      ['1', 'C', '2'], ['2', 'G', '2'], ['3', 'D', '3'], ['4', 'G', '3'], ['5', 'C', '4'], ['6', 'D', '4'],
    ])
    expect(textAt(details, 'capo')).toBe('2')
  })
  it('writes the notation as if there were no capo, an octave up, and the tab at sounding pitch', () => {
    // String 1 is D4; capo 2, fret 4: it sounds G♯4 and is written as F♯5 in D.
    const root = exported('{D} 1/4q', { strings: strings('C2 G2 D3 G3 C4 D4'), capos: [{ fret: 2 }] })
    expect(notesOf(root, 1).map(pitchOf)).toEqual(['F15'])
    expect(notesOf(root, 2).map(pitchOf)).toEqual(['G14'])
    const transpose = all(attributesOf(root), 'transpose').find(each => each.attributes.number === '1')!
    expect(['diatonic', 'chromatic', 'octave-change'].map(name => textAt(transpose, name))).toEqual(['1', '2', '-1'])
    expect(textAt(attributesOf(root), 'clef', 'clef-octave-change')).toBeUndefined()
  })
  it('raises the tuning of strings under a partial capo, so that tuning + capo + fret sounds right', () => {
    const root = exported('3/0q', { strings: strings('E2 A2 D3 G3 B3 E4'), capos: [{ fret: 1 }, { fret: 3, strings: [3] }] })
    const third = all(one(attributesOf(root), 'staff-details'), 'staff-tuning').find(each => each.attributes.line === '4')!
    // G3 + 3 = A♯3 = A3 (the tuning stated) + 1 (the capo stated).
    expect([textAt(third, 'tuning-step'), textAt(third, 'tuning-octave')]).toEqual(['A', '3'])
    expect(notesOf(root, 2).map(pitchOf)).toEqual(['B-13'])
  })
  it('numbers a pickup 0', () => {
    const measures = all(one(exported('{4/4} {len=1/4} 1/0q | 1/0w'), 'part'), 'measure')
    expect(measures.map(each => [each.attributes.number, each.attributes.implicit])).toEqual([['0', 'yes'], ['1', undefined]])
  })
  it('does not count the second half of a bar split by a repeat', () => {
    // XSD, measure-attributes: implicit "for pickup measures and the last half of mid-measure repeats"; numbers that are not unique "can cause problems".
    const measures = all(one(exported('{4/4} {len=1/4} 1/0q | {:|} {len=3/4} 1/0h. | {len=1/4} 1/2q | 1/0w'), 'part'), 'measure')
    expect(measures.map(each => [each.attributes.number, each.attributes.implicit])).toEqual([['0', 'yes'], ['1', undefined], ['X1', 'yes'], ['2', undefined]])
  })
  it('states tuning, capo, people, source and the day', () => {
    const score = parseScore('{D} 1/0q', { title: 'A & B', composer: 'C', arranger: 'D', rights: '©', source: 'S', strings: strings('D2 A2 D3 F#3 A3 D4'), capos: [{ fret: 2 }] })
    const root = parseXml(writeMusicXml(score, { date: '2026-03-01' })).root!
    expect(textAt(root, 'work', 'work-title')).toBe('A & B')
    expect(all(one(root, 'identification'), 'creator').map(each => [each.attributes.type, each.text])).toEqual([['composer', 'C'], ['arranger', 'D']])
    expect(['software', 'encoding-date'].map(name => textAt(root, 'identification', 'encoding', name))).toEqual(['Copperwound', '2026-03-01'])
    expect(['rights', 'source'].map(name => textAt(root, 'identification', name))).toEqual(['©', 'S'])
    const words = all(one(root, 'part', 'measure'), 'direction').map(each => textAt(each, 'direction-type', 'words')).filter(Boolean)
    expect(words).toEqual(['Tuning D2 A2 D3 F♯3 A3 D4 (⑥ = D2, ③ = F♯3, ② = A3, ① = D4). Capo 2, sounds E.'])
  })
  it('lets a middle note of slurs stop, then start', () => {
    // W3C tutorial on tablature: "stop" before "start".
    const [, middle] = notesOf(exported('1/0he 1/2pe 1/0q'), 2)
    const technical = one(middle, 'notations', 'technical')!
    expect([...all(technical, 'hammer-on'), ...all(technical, 'pull-off')].map(each => [each.name, each.attributes.type])).toEqual([['hammer-on', 'stop'], ['pull-off', 'start']])
  })
  it('ties only where the same place follows at once; a tie into nothing is kept for our own reader', () => {
    for (const text of ['1/0=q 1/2q', '1/0=q 2/0q 1/0q', '1/0=q']) {
      const score = parseScore(text)
      const xml = writeMusicXml(score)
      expect(xml).not.toContain('<tie ')
      const back = readMusicXml(xml)
      expect('score' in back && back.score.bars[0]?.voices.upper?.events[0]?.notes[0]?.link).toBe('tie')
    }
  })
})

describe('beams', () => {
  const beams = (text: string) => {
    const { bars } = parseScore(text)
    const { meter, voices } = bars[0]!
    const ticks: Record<number, number> = { 4: 16, 8: 8, 16: 4, 32: 2 }
    const durations = voices.upper!.events.map(event => ticks[event.length.base]! * (2 - 1 / 2 ** event.length.dots))
    const found = beamsOf(voices.upper!.events, durations, { meter: meter!, whole: 64, offset: 0 })
    return voices.upper!.events.map((_, index) => (found.get(index) ?? []).map(value => value.split(' ').map(word => word[0]).join('')).join('+'))
  }
  // By the beat; dotted quarters in 6/8 (common practice; Gould, Behind Bars, chapter 6 groups so, from memory). b begin, c continue, e end, bh backward hook.
  it('join within a beat', () => {
    expect(beams('{4/4} 1/0e 1/0e 1/0e 1/0e 1/0q 1/0e 1/0e')).toEqual(['b', 'e', 'b', 'e', '', 'b', 'e'])
    expect(beams('{6/8} 1/0e 1/0e 1/0e 1/0q 1/0e')).toEqual(['b', 'c', 'e', '', ''])
    expect(beams('{3/8} 1/0e 1/0e 1/0e')).toEqual(['b', 'c', 'e'])
  })
  it('have a level for each flag, and hooks where a neighbour has fewer', () => {
    expect(beams('{2/4} 1/0e. 1/0s 1/0s 1/0s 1/0e')).toEqual(['b', 'e+bh', 'b+b', 'c+e', 'e'])
    expect(beams('{2/4} 1/0s 1/0e.')).toEqual(['b+fh', 'e'])
  })
  it('stop at rests', () => expect(beams('{6/8} 1/0e ze 1/0e')).toEqual(['', '', '']))
})

describe('text in XML', () => {
  // XML 1.0 (W3C), 2.2 characters and 2.11 line ends.
  it('escapes what XML reads as its own, and leaves out what it can’t hold', () => {
    expect(escaped('<a & "b">')).toBe('&lt;a &amp; &quot;b&quot;&gt;')
    expect(escaped('a\u0000b\u000Bc\uFFFEd')).toBe('abcd')
    expect(escaped('x\uD800y 🎸')).toBe('xy 🎸')
  })
  it('keeps tabs and line ends, as line feeds', () => {
    expect(parseXml(`<a>${escaped('one\r\ntwo\tthree\r\n\n')}</a>`).root!.text).toBe('one\ntwo\tthree\n\n')
  })
})
