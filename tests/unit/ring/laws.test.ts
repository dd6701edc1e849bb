import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { lanesOfBar, ringsAt, ringsOfBar } from '../../../shared/ring'
import { contextsOf } from '../../../shared/score/context'
import { toNumber, type Fraction } from '../../../shared/score/fraction'
import { playedLength } from '../../../shared/score/time'
import type { Bar, LinkKind, Note, RingRule, Score, ScoreEvent, Voice } from '../../../shared/score/types'
import { parseScore, TEST_HEAD } from '../../support/score'

const rule = fc.constantFrom<RingRule | undefined>(undefined, undefined, undefined, 'written', 'let-ring')
const link = fc.constantFrom<LinkKind | undefined>(undefined, undefined, 'tie', 'hammer-on', 'pull-off')
const touch = fc.record({ string: fc.integer({ min: 1, max: 6 }), fret: fc.integer({ min: 0, max: 2 }), ring: rule, link })
const chord = fc.uniqueArray(touch, { maxLength: 3, selector: each => each.string })
const event = fc.record({ base: fc.constantFrom(2, 4, 8, 16), dots: fc.integer({ min: 0, max: 1 }), notes: chord })
const voice = fc.array(event, { maxLength: 6 })
const bar = fc.record({ upper: voice, lower: voice, ring: rule, perMinute: fc.option(fc.integer({ min: 40, max: 300 }), { nil: undefined }) })
const plan = fc.array(bar, { minLength: 1, maxLength: 6 })
type Plan = typeof plan extends fc.Arbitrary<infer Value> ? Value : never

let count = 0
const id = (kind: string) => `${kind}${count++}`
const defined = <Value extends object>(value: Value): Value => JSON.parse(JSON.stringify(value))
const buildVoice = (events: Plan[number]['upper']): Voice => ({
  events: events.map((each): ScoreEvent => ({
    id: id('e'), length: { base: each.base as 4, dots: each.dots }, notes: each.notes.map(note => defined<Note>({ id: id('n'), ...note })),
  })),
})
const buildBar = (each: Plan[number]): Bar => defined<Bar>({
  id: id('b'), ring: each.ring, tempo: each.perMinute ? { base: 4, dots: 0, perMinute: each.perMinute } : undefined,
  voices: { upper: buildVoice(each.upper), lower: buildVoice(each.lower) },
})
const build = (bars: Plan, ring: RingRule): Score => ({ head: { ...TEST_HEAD, ring }, bars: bars.map(buildBar) })
const withRule = (score: Score, ring: RingRule): Score => ({ head: { ...score.head, ring }, bars: score.bars.map(each => ({ ...each })) })
const runs = { numRuns: 150 }

/** Rings with absolute times, in whole notes. */
function timeline(score: Score) {
  let at = 0
  return score.bars.flatMap((each, index) => {
    const begin = at
    at += toNumber(playedLength(each, contextsOf(score)[index]!.meter))
    return ringsOfBar(score, index).map(ring => ({ ...ring, from: begin + toNumber(ring.start), to: begin + toNumber(ring.start) + toNumber(ring.sounds) }))
  })
}

describe('laws of ring', () => {
  it('never lets a string sound two notes at once, nor a ring pass the next use of its string', () => {
    fc.assert(fc.property(plan, fc.constantFrom<RingRule>('written', 'let-ring'), (bars, ring) => {
      const all = timeline(build(bars, ring))
      expect(all.filter(one => one.to <= one.from)).toEqual([])
      const clashes = all.flatMap(one => all.filter(other => other.string === one.string && one.from < other.from - 1e-9 && one.to > other.from + 1e-9))
      expect(clashes).toEqual([])
      expect(new Set(all.map(one => `${one.string} ${one.from}`)).size).toBe(all.length)
    }), runs)
  })

  it('lets no note end later as written than it would let ring', () => {
    fc.assert(fc.property(plan, (bars) => {
      const written = build(bars, 'written')
      const long = new Map(timeline(withRule(written, 'let-ring')).map(ring => [ring.noteId, ring]))
      for (const ring of timeline(written)) expect(ring.to).toBeLessThanOrEqual(long.get(ring.noteId)!.to + 1e-9)
    }), runs)
  })

  it('draws lanes that add up to the ring', () => {
    fc.assert(fc.property(plan, (bars) => {
      const score = build(bars, 'let-ring')
      const sums = new Map<string, number>()
      const span = (from: Fraction, to: Fraction) => toNumber(to) - toNumber(from)
      score.bars.forEach((_, index) => lanesOfBar(score, index).forEach(lane => sums.set(lane.noteId, (sums.get(lane.noteId) ?? 0) + span(lane.from, lane.to))))
      for (const ring of timeline(score)) expect(sums.get(ring.noteId)).toBeCloseTo(toNumber(ring.sounds), 9)
    }), runs)
  })

  it('remembers without ever being wrong: after a change the answers are those of a fresh reckoning', () => {
    fc.assert(fc.property(plan, bar, fc.nat(), (bars, fresh, place) => {
      const before = build(bars, 'let-ring')
      before.bars.forEach((_, index) => lanesOfBar(before, index))
      const at = place % before.bars.length
      const after = { head: before.head, bars: before.bars.map((each, index) => (index === at ? buildBar(fresh) : each)) }
      const copy: Score = JSON.parse(JSON.stringify(after))
      after.bars.forEach((_, index) => {
        expect(ringsOfBar(after, index)).toEqual(ringsAt({ bars: copy.bars, contexts: contextsOf(copy) }, index).value)
        expect(lanesOfBar(after, index)).toEqual(lanesOfBar(copy, index))
      })
    }), runs)
  })
})

describe('remembering', () => {
  const long = (): Score => parseScore(Array.from({ length: 400 }, () => '6/0q 3/0q 2/1q 1/0q').join(' | '), { ring: 'let-ring' })

  it('gives the same arrays for bars out of reach of a change', () => {
    const before = long()
    const lanes = before.bars.map((_, index) => lanesOfBar(before, index))
    const changed = parseScore('{4/4} 6/3q 3/0q 2/1q 1/0q').bars[0]!
    const after = { head: before.head, bars: before.bars.map((each, index) => (index === 200 ? { ...changed, id: each.id } : each)) }
    const fresh = after.bars.flatMap((_, index) => (lanesOfBar(after, index) === lanes[index] ? [] : [index]))
    expect(fresh.every(index => Math.abs(index - 200) <= 1)).toBe(true)
    expect(fresh).toContain(200)
  })

  it('keeps the arrays of all other bars when notes change in the first bar, which states meter, key and tempo', () => {
    const first = '{4/4} {G} {q=80}'
    const before = parseScore(`${first} 6/0q zh. | 6/0q zh. | 6/0q zh. | 6/0q zh.`)
    const lanes = before.bars.map((_, index) => lanesOfBar(before, index))
    const [opening, ...rest] = before.bars
    const after = { head: before.head, bars: [{ ...opening!, voices: {} }, ...rest] }
    expect(rest.map((_, index) => lanesOfBar(after, index + 1) === lanes[index + 1])).toEqual([true, true, true])
  })

  it('looks no further than a string can sound', () => {
    const score = parseScore(Array.from({ length: 100 }, (_, index) => (index ? 'zw' : '{q=60} 6/0w')).join(' | '), { ring: 'let-ring' })
    // E2 sounds 12 s, three bars of four beats at 60.
    expect(ringsAt({ bars: score.bars, contexts: contextsOf(score) }, 0).reach).toBeLessThanOrEqual(3)
  })
})
