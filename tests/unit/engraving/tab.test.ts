import { describe, expect, it } from 'vitest'
import { notationAt, surplusText } from '../../../shared/engraving'
import { fraction } from '../../../shared/score/fraction'
import { parseScore } from '../../support/score'

const bar = (text: string, index = 0) => notationAt(parseScore(text), index)
const frets = (text: string, index = 0): string[] => bar(text, index).tab.map(mark => `${mark.string}:${mark.text}`)

describe('tab (conventions: common practice)', () => {
  it('shows frets, × for a dead note, the touched place of a harmonic in angle brackets', () => {
    expect(frets('(1/0 3/12)q 4/0xq 1/12<q 6/3.2<6q')).toEqual(['1:0', '3:12', '4:×', '1:<12>', '6:<3.2>'])
  })

  it('puts a tied-over number in parentheses, across the bar line too', () => {
    expect(frets('1/3=h 1/3h')).toEqual(['1:3', '1:(3)'])
    expect(frets('1/3=w | 1/3w', 1)).toEqual(['1:(3)'])
    expect(frets('1/3=w | 1/5w', 1)).toEqual(['1:5'])
  })

  it('gives one number to two voices that pluck one string at one fret, and keeps two stems', () => {
    const { tab, events } = bar('{4/4} 3/0q 3/2q 3/0h ; 3/0h 3/0h')
    expect(tab.map(mark => mark.text)).toEqual(['0', '2', '0'])
    expect(events.filter(event => event.slice === 0).map(event => [event.stem, event.notes.length])).toEqual([[1, 1], [-1, 1]])
  })

  it('sets two frets on one string at one moment beside each other', () => {
    expect(bar('{4/4} 3/0w ; 3/2w').tab.map(mark => [mark.text, mark.beside])).toEqual([['0', false], ['2', true]])
  })
})

describe('links', () => {
  const links = (text: string, index = 0) => bar(text, index).links.map(link => `${link.kind} ${link.from ?? '·'}→${link.to ?? '·'} ${link.complete ? 'complete' : 'open'}`)

  it('aim at the next note of the string in the voice', () => {
    expect(links('1/0hq 2/0q 1/2pq 1/0q')).toEqual(['hammer-on n1→n3 complete', 'pull-off n3→n4 complete'])
  })

  it('stay open until their note is there, or where it does not fit', () => {
    expect(links('1/2hq 2/0q')).toEqual(['hammer-on n1→· open'])
    expect(links('1/2hq 1/0q')).toEqual(['hammer-on n1→n2 open'])
    expect(links('1/2=q 1/3q')).toEqual(['tie n1→n2 open'])
  })

  it('come out of the bar before, of the same voice only', () => {
    expect(links('1/3=w | 1/3w', 1)).toEqual(['tie ·→n2 complete'])
    expect(links('1/3=w | 2/0w ; 1/3w', 1)).toEqual([])
  })
})

describe('over and under', () => {
  it('is told for each voice in whole notes', () => {
    const told = (text: string) => bar(text).surplus.map(({ voice, amount }) => `${voice} ${surplusText(amount)}`)
    expect(told('{4/4} 1/0w')).toEqual([])
    expect(told('{4/4} 1/0h. 1/0h ; 6/0h.')).toEqual(['upper +¼', 'lower −¼'])
    expect(told('{6/8} {len=1/8} 1/0s | 1/0h.')).toEqual(['upper −1/16'])
    expect(told('{4/4}')).toEqual([])
  })

  it('reads as a fraction of a whole note', () => {
    expect([fraction(-1, 8), fraction(5, 4), fraction(-2), fraction(1, 12)].map(surplusText)).toEqual(['−⅛', '+1¼', '−2', '+1/12'])
  })
})

describe('memory', () => {
  it('keeps the notation of a bar whose neighbour changed, unless a tie between them did', () => {
    const score = parseScore('1/0w | 1/3w | 1/0w')
    const [first, second] = score.bars
    const edited = { ...score, bars: [{ ...first!, voices: { upper: { events: [{ ...first!.voices.upper!.events[0]!, notes: [{ id: 'new', string: 2, fret: 1 }] }] } } }, second!, score.bars[2]!] }
    const tied = { ...score, bars: [{ ...first!, voices: { upper: { events: [{ ...first!.voices.upper!.events[0]!, notes: [{ id: 'new', string: 1, fret: 3, link: 'tie' as const }] }] } } }, second!, score.bars[2]!] }
    const before = notationAt(score, 1)
    expect(notationAt(edited, 1)).toBe(before)
    expect(notationAt(tied, 1)).not.toBe(before)
    expect(notationAt({ ...score, head: { ...score.head, title: 'Another' } }, 2)).toBe(notationAt(score, 2))
  })
})
