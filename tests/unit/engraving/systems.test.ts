import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { barNumbers, breakIntoSystems, cellAt, columnsOf, geometryOf, layOut, notationAt, roleAt } from '../../../shared/engraving'
import { denseScore } from '../../support/dense'
import { parseScore } from '../../support/score'

describe('bar numbers (common practice)', () => {
  it('count a pickup as bar 0', () => {
    expect(barNumbers(parseScore('{6/8} {len=1/8} 1/0e | 1/0h. | 1/0h.'))).toEqual([0, 1, 2])
    expect(barNumbers(parseScore('{4/4} 1/0w | 1/0w'))).toEqual([1, 2])
  })

  it('count a bar split by a repeat once: O\'Neill 677 has eight bars a strain, the last five eighths long', () => {
    const strain = '1/0h. | '.repeat(7)
    const tune = parseScore(`{6/8} {len=1/8} 1/0e | ${strain}{len=5/8} 1/0h 1/0e {:|} | {len=1/8} 1/0e | ${strain}{len=5/8} 1/0h 1/0e`)
    expect(barNumbers(tune)).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8, 8, 9, 10, 11, 12, 13, 14, 15, 16])
  })
})

describe('what stands before a bar', () => {
  it('shows a tempo where it begins to hold', () => {
    const plain = parseScore('{4/4} 1/0w | 1/0w | 1/0w')
    const tempo = { perMinute: 96, base: 4, dots: 1 } as const
    const marks = (tempos: readonly (typeof tempo | undefined)[]) => {
      const score = { ...plain, bars: plain.bars.map((bar, index) => ({ ...bar, ...(tempos[index] && { tempo: tempos[index] }) })) }
      return score.bars.map((_, index) => roleAt(score, index, index === 0).tempo?.perMinute ?? null)
    }
    expect(marks([tempo])).toEqual([96, null, null])
    expect(marks([tempo, tempo])).toEqual([96, null, null])
    expect(marks([undefined, tempo])).toEqual([null, 96, null])
  })
})

describe('line breaking', () => {
  const measure = (body: number) => ({ body, least: body * 0.6, inner: 0, opening: 40 })

  /** Every way to break, by brute force; the cost is the one the module states: squared strain, the last line may be short. */
  function cheapest(bodies: readonly number[], width: number): number {
    const cost = (from: number, to: number): number => {
      const strain = (width - 40) / bodies.slice(from, to).reduce((sum, each) => sum + each, 0)
      if (strain < 0.78 && to - from > 1) return Infinity
      if (to === bodies.length && strain > 1) return 0
      return (strain > 1 ? strain - 1 : 3 * (1 - strain)) ** 2
    }
    const best = [0]
    for (let to = 1; to <= bodies.length; to++) best[to] = Math.min(...Array.from({ length: to }, (_, from) => best[from]! + cost(from, to)))
    return best.at(-1)!
  }

  it('is never worse than any other way of breaking', () => {
    fc.assert(fc.property(fc.array(fc.integer({ min: 60, max: 400 }), { minLength: 1, maxLength: 24 }), fc.integer({ min: 300, max: 1200 }), (bodies, width) => {
      const starts = [...breakIntoSystems(bodies.map(measure), width), bodies.length]
      const cost = starts.slice(0, -1).reduce((sum, from, line) => {
        const strain = (width - 40) / bodies.slice(from, starts[line + 1]).reduce((total, each) => total + each, 0)
        return sum + (starts[line + 1] === bodies.length && strain > 1 ? 0 : (strain > 1 ? strain - 1 : 3 * (1 - strain)) ** 2)
      }, 0)
      expect(cost).toBeCloseTo(cheapest(bodies, width), 9)
    }))
  })

  it('fills every line but a short last one, in order and without a gap', () => {
    const score = denseScore(40)
    const systems = layOut(score, 900)
    expect(systems.flatMap(system => system.bars.map(bar => bar.index))).toEqual(score.bars.map((_, index) => index))
    for (const system of systems.slice(0, -1)) expect(system.width).toBeCloseTo(900, 0)
    for (const { bars } of systems) for (const [at, bar] of bars.entries()) expect(bar.x).toBeCloseTo(at ? bars[at - 1]!.x + bars[at - 1]!.width : 0, 6)
  })

  it('gives a narrow place one bar a line', () => {
    expect(layOut(denseScore(4), 360).map(system => system.bars.length)).toEqual([1, 1, 1, 1])
  })
})

describe('what stands before a bar', () => {
  it('is clef and key on every system, the meter on the first and where it changes', () => {
    const score = parseScore('{D} {4/4} 1/0w | 1/0w | {3/4} 1/0h.')
    expect(roleAt(score, 0, true)).toMatchObject({ opens: true, key: { fifths: 2 }, meter: { beats: 4 } })
    expect(roleAt(score, 1, true)).toMatchObject({ opens: true, key: { fifths: 2 }, meter: null })
    expect(roleAt(score, 1, false)).toMatchObject({ opens: false, key: null, meter: null })
    expect(roleAt(score, 2, false)).toMatchObject({ key: null, meter: { beats: 3 }, right: 'final' })
  })

  it('cancels a signature only where none follows; a double line warns of a new key (Gould, key signatures)', () => {
    const score = parseScore('{D} 1/0w | {C} 1/0w | {Bb} 1/0w | {G} 1/0w')
    expect([0, 1, 2, 3].map(index => [roleAt(score, index, false).cancels, roleAt(score, index, false).right]))
      .toEqual([[0, 'double'], [2, 'double'], [0, 'double'], [0, 'final']])
  })
})

describe('columns', () => {
  it('stand in time order with room between them, in any width', () => {
    fc.assert(fc.property(fc.integer({ min: 0, max: 15 }), fc.integer({ min: 60, max: 900 }), (index, width) => {
      const { slices, missing } = notationAt(denseScore(16), index)
      const columns = columnsOf(slices, width, missing)
      for (const [at, x] of columns.entries()) {
        expect(x).toBeGreaterThan(at ? columns[at - 1]! : 0)
        expect(x).toBeLessThan(width)
      }
    }))
  })

  it('give longer notes more room', () => {
    const { slices, missing } = notationAt(parseScore('{4/4} 1/0h 1/0q 1/0e 1/0e'), 0)
    const [a, b, c, d] = columnsOf(slices, 400, missing)
    expect(b! - a!).toBeGreaterThan(c! - b!)
    expect(c! - b!).toBeGreaterThan(d! - c!)
  })

  it('answer a click with the nearest event of the voice, or its end', () => {
    const notation = notationAt(parseScore('{4/4} 1/0q 1/0q ; 6/0h'), 0)
    const geometry = geometryOf(notation, 0, 300)
    const x = (id: string) => geometry.events.find(event => event.eventId === id)!.x
    expect(cellAt(geometry, 'upper', x('e2') + 3)).toBe('e2')
    expect(cellAt(geometry, 'lower', x('e2'))).toBe(Math.abs(x('e3') - x('e2')) <= Math.abs(geometry.ends.lower - x('e2')) ? 'e3' : 'end')
    expect(cellAt(geometry, 'upper', 299)).toBe('end')
    expect(cellAt(geometry, 'middle', 40)).toBe('end')
  })
})
