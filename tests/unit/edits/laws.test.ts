import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { applyEdit, applyEdits, isRefused, type Applied, type Edit } from '../../../shared/edits'
import { validateScore } from '../../../shared/score/validate'
import type { Bar, Score } from '../../../shared/score/types'
import { scores } from '../../support/arbitrary'
import { parseScore, printScore } from '../../support/score'

const apply = (score: Score, edit: Edit): Applied => {
  const result = applyEdit(score, edit)
  if (isRefused(result)) throw new Error(result.refused.message)
  return result
}

const reasonOf = (score: Score, edit: Edit) => {
  const result = applyEdit(score, edit)
  return isRefused(result) ? result.refused.reason : null
}

/** Edits of every kind that fit a score: what the second score holds comes into the first. */
function edits(score: Score, other: Score, [a, b, c]: readonly [number, number, number]): readonly Edit[] {
  const at = a % score.bars.length
  const bar = score.bars[at]!
  const theirs = other.bars[b % other.bars.length]!
  const run = score.bars.slice(at, at + 1 + (c % (score.bars.length - at)))
  const before = score.bars[at - 1]?.id ?? null
  const fresh: Bar = { ...theirs, id: `fresh-${theirs.id}` }
  const rest = score.bars.filter(each => !run.includes(each))
  return [
    { kind: 'replaceVoice', bar: bar.id, voice: 'upper', before: bar.voices.upper ?? null, after: theirs.voices.lower ?? theirs.voices.upper ?? null },
    { kind: 'replaceVoice', bar: bar.id, voice: 'middle', before: null, after: theirs.voices.upper ?? null },
    { kind: 'patchBar', bar: bar.id, before: { meter: bar.meter ?? null, repeatEnd: bar.repeatEnd ?? null }, after: { meter: theirs.meter ?? null, repeatEnd: 3 } },
    { kind: 'patchHead', before: { title: score.head.title, ring: score.head.ring }, after: { title: 'Another', ring: 'let-ring' } },
    { kind: 'insertBars', after: before, bars: [fresh] },
    ...(run.length < score.bars.length ? [{ kind: 'removeBars', after: before, bars: run } as const] : []),
    { kind: 'moveBars', bars: run.map(each => each.id), from: before, to: rest[b % Math.max(1, rest.length)]?.id ?? null },
  ]
}

const cases = fc.tuple(scores, scores, fc.tuple(fc.nat(), fc.nat(), fc.nat()))

describe('every edit', () => {
  it('has an inverse that is the identity with it, both ways', () => {
    fc.assert(fc.property(cases, ([score, other, picks]) => {
      for (const edit of edits(score, other, picks)) {
        const { score: after, inverse } = apply(score, edit)
        const back = apply(after, inverse)
        expect(back.score, edit.kind).toEqual(score)
        expect(apply(back.score, back.inverse).score, edit.kind).toEqual(after)
      }
    }))
  })

  it('leaves a valid score, and the one given unchanged', () => {
    fc.assert(fc.property(cases, ([score, other, picks]) => {
      const copy = JSON.stringify(score)
      for (const edit of edits(score, other, picks)) expect(validateScore(apply(score, edit).score), edit.kind).toBeNull()
      expect(JSON.stringify(score)).toBe(copy)
    }))
  })

  it('means the same after a journey through JSON', () => {
    fc.assert(fc.property(cases, ([score, other, picks]) => {
      for (const edit of edits(score, other, picks)) {
        const { score: after, inverse } = apply(score, edit)
        expect(apply(score, JSON.parse(JSON.stringify(edit)) as Edit).score, edit.kind).toEqual(after)
        expect(apply(JSON.parse(JSON.stringify(after)) as Score, JSON.parse(JSON.stringify(inverse)) as Edit).score, edit.kind).toEqual(score)
      }
    }))
  })

  it('keeps the very objects of bars it does not touch, and names those it does', () => {
    fc.assert(fc.property(cases, ([score, other, picks]) => {
      for (const edit of edits(score, other, picks)) {
        const { score: after, touched } = apply(score, edit)
        for (const bar of after.bars) if (!touched.includes(bar.id)) expect(score.bars).toContain(bar)
        const changed = after.bars.filter(bar => !score.bars.includes(bar)).map(bar => bar.id)
        for (const id of changed) expect(touched).toContain(id)
        expect(after.head === score.head).toBe(!touched.includes('head'))
      }
    }))
  })
})

describe('edits in a row', () => {
  it('apply all or none', () => {
    fc.assert(fc.property(cases, ([score, other, picks]) => {
      const all = edits(score, other, picks)
      const result = applyEdits(score, all)
      if (isRefused(result)) {
        // A later edit no longer met what it expected; nothing before it may have stayed.
        expect(result.refused.reason).not.toBe('invalid')
        return
      }
      expect(validateScore(result.score)).toBeNull()
      const back = applyEdits(result.score, result.inverses)
      expect(isRefused(back) ? back.refused.message : back.score).toEqual(score)
    }))
  })
})

describe('an edit is refused', () => {
  const score = parseScore('3/0w | 3/2w')
  const voice = score.bars[0]!.voices.upper!

  it('where the place is gone', () => {
    expect(reasonOf(score, { kind: 'replaceVoice', bar: 'gone', voice: 'upper', before: null, after: null })).toBe('missing')
    expect(reasonOf(score, { kind: 'patchBar', bar: 'gone', before: { length: null }, after: { length: null } })).toBe('missing')
    expect(reasonOf(score, { kind: 'insertBars', after: 'gone', bars: [{ id: 'new', voices: {} }] })).toBe('missing')
    expect(reasonOf(score, { kind: 'removeBars', after: 'gone', bars: [] })).toBe('missing')
    expect(reasonOf(score, { kind: 'moveBars', bars: ['b1'], from: null, to: 'gone' })).toBe('missing')
  })

  it('where something else stands by now', () => {
    expect(reasonOf(score, { kind: 'replaceVoice', bar: 'b1', voice: 'upper', before: null, after: voice })).toBe('changed')
    expect(reasonOf(score, { kind: 'patchHead', before: { title: 'Other' }, after: { title: 'New' } })).toBe('changed')
    expect(reasonOf(score, { kind: 'removeBars', after: null, bars: [{ id: 'b1', voices: {} }] })).toBe('changed')
    expect(reasonOf(score, { kind: 'moveBars', bars: ['b2'], from: null, to: null })).toBe('changed')
  })

  it('in words that name the bar as it is printed', () => {
    const tune = parseScore('{4/4} {len=1/4} 3/0q | 3/2w')
    const [pickup, first] = tune.bars
    const message = (edit: Edit) => {
      const result = applyEdit(tune, edit)
      return isRefused(result) ? result.refused.message : null
    }
    const gone = { ...voice, events: [{ ...voice.events[0]!, notes: [{ id: 'x', string: 7, fret: 1 }] }] }
    expect([
      message({ kind: 'replaceVoice', bar: pickup!.id, voice: 'upper', before: null, after: null }), message({ kind: 'replaceVoice', bar: first!.id, voice: 'upper', before: null, after: null }),
      message({ kind: 'patchBar', bar: first!.id, before: { length: { n: 1, d: 2 } }, after: { length: null } }),
      message({ kind: 'replaceVoice', bar: first!.id, voice: 'lower', before: null, after: gone }),
    ]).toEqual(['The upper voice of the pickup has changed meanwhile.', 'The upper voice of bar 1 has changed meanwhile.', 'Bar 1 has changed meanwhile.', 'Bar 1: there is no string 7.'])
  })

  it('where no arrangement would be left, or no sound music', () => {
    const twice = { ...voice, events: [{ ...voice.events[0]!, notes: [{ id: 'x', string: 3, fret: 1 }, { id: 'y', string: 3, fret: 2 }] }] }
    const replace = (after: typeof voice): Edit => ({ kind: 'replaceVoice', bar: 'b1', voice: 'upper', before: voice, after })
    const refused = applyEdit(score, replace(twice))
    expect(isRefused(refused) && refused.refused.message).toBe('Bar 1: string 3 can sound one note at a time.')
    expect(reasonOf(score, replace({ events: [{ ...voice.events[0]!, notes: [{ id: 'x', string: 7, fret: 1 }] }] }))).toBe('invalid')
    expect(reasonOf(score, replace({ events: [{ ...voice.events[0]!, notes: [{ id: 'x', string: 1, fret: 21 }] }] }))).toBe('invalid')
    expect(reasonOf(score, { kind: 'removeBars', after: null, bars: score.bars })).toBe('invalid')
    expect(reasonOf(score, { kind: 'insertBars', after: null, bars: [{ id: 'b2', voices: {} }] })).toBe('invalid')
    expect(reasonOf(score, { kind: 'patchHead', before: { strings: score.head.strings }, after: { strings: score.head.strings.slice(0, 3) } })).toBe('invalid')
    expect(printScore(score)).toBe('3/0w | 3/2w')
  })
})
