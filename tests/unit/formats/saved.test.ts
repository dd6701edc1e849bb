import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createScore } from '../../../shared/score/create'
import { validateScore } from '../../../shared/score/validate'
import { canonical, contentHash, readSaved, writeSaved } from '../../../shared/formats/saved'
import { scoreArbitrary } from '../../support/arbitraries'

const score = createScore({ title: 'Tune', strings: ['D4', 'C4', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch })), pickup: { n: 1, d: 8 } }, (() => {
  let count = 0
  return () => `b${count++}`
})())

// eslint-disable-next-line @typescript-eslint/no-explicit-any -- broken on purpose
type Saved = any
const changed = (change: (saved: Saved) => void): string => {
  const saved = JSON.parse(writeSaved(score))
  change(saved)
  return JSON.stringify(saved)
}

describe('saved form', () => {
  it('is read back equal, whatever the score', () => {
    fc.assert(fc.property(scoreArbitrary(), (each) => {
      expect(validateScore(each)).toBeNull()
      expect(readSaved(writeSaved(each))).toEqual({ score: each })
    }), { numRuns: 60 })
  }, 60_000)
  it('states tuning and capo', () => {
    expect(JSON.parse(writeSaved(score))).toMatchObject({
      format: 'copperwound-score', version: 1, statement: 'Tuning C2 G2 D3 G3 C4 D4 (⑥ = C2, ⑤ = G2, ② = C4, ① = D4).',
    })
  })
  it('does not depend on the order in which a score was built', () => {
    const reversed = (value: unknown): unknown => {
      if (Array.isArray(value)) return value.map(reversed)
      if (typeof value !== 'object' || value === null) return value
      return Object.fromEntries(Object.entries(value).reverse().map(([key, each]) => [key, reversed(each)]))
    }
    fc.assert(fc.property(scoreArbitrary(2), each => canonical(reversed(each)) === canonical(each)), { numRuns: 30 })
  }, 60_000)
  it('hashes with SHA-256 (FIPS 180-4), as Node computes it', async () => {
    expect(await contentHash(score)).toBe(createHash('sha256').update(canonical(score)).digest('hex'))
    expect(await contentHash({ ...score, head: { ...score.head, rights: undefined as unknown as string } })).not.toBe(await contentHash(score))
  })
  it('is not written from what is no score', () => {
    expect(() => writeSaved({ ...score, bars: [] })).toThrow('score.bars')
    expect(() => writeSaved({ ...score, bars: [score.bars[0]!, score.bars[0]!] })).toThrow('used twice')
  })
})

describe('what is refused, saying what and where', () => {
  it.each([
    ['no JSON', '{"format": ', 'not JSON'],
    ['another file', '{"name":"x"}', 'should begin with "format": "copperwound-score"'],
    ['a list', '[]', 'no saved arrangement'],
    ['null', 'null', 'no saved arrangement'],
    ['a newer version', changed((saved) => { saved.version = 2 }), 'saved in form 2; this Copperwound reads forms up to 1'],
    ['a version that is none', changed((saved) => { saved.version = '1' }), 'version: '],
    ['no score', changed((saved) => { delete saved.score }), 'score: '],
    ['a wrong type', changed((saved) => { saved.score.bars[0].meter.beats = 'six' }), 'score.bars[0].meter.beats: expected number, received string'],
    ['a missing field', changed((saved) => { delete saved.score.head.capos }), 'score.head.capos: '],
    ['an unknown field', changed((saved) => { saved.score.bars[1].colour = 'red' }), 'score.bars[1]: Unrecognized key: "colour"'],
    ['a fraction not in lowest terms', changed((saved) => { saved.score.bars[0].length = { n: 2, d: 16 } }), 'score.bars[0].length: is not in lowest terms'],
    ['no pitch', changed((saved) => { saved.score.head.strings[2].pitch = 'H3' }), 'String 3: “H3” is no pitch'],
    ['music that is none, in the bar behind the pickup', changed((saved) => { saved.score.bars[1].voices = { upper: { events: [{ id: 'e', length: { base: 4, dots: 0 }, notes: [{ id: 'n', string: 1, fret: 30 }] }] } } }), 'Bar 1: string 1 has no fret 30'],
  ])('%s', (_, text, message) => {
    const result = readSaved(text)
    expect('problem' in result && result.problem).toContain(message)
  })
  it('never throws, whatever the text', () => {
    fc.assert(fc.property(fc.oneof(fc.string(), fc.json()), text => 'problem' in readSaved(text)), { numRuns: 200 })
  })
})
