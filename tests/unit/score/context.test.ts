import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contextOf, contextsOf, DEFAULT_KEY, DEFAULT_METER, DEFAULT_TEMPO } from '../../../shared/score/context'
import { scores } from '../../support/arbitrary'
import { parseScore } from '../../support/score'

describe('the context of a bar', () => {
  it('is what was last stated', () => {
    const score = parseScore('3/0w | {3/4} 3/0h. | {G} 3/0h. | {q=60} 3/0h. | {4/4} 3/0w')
    expect(contextsOf(score).map(({ meter, key, tempo }) => `${meter.beats}/${meter.unit} ${key.fifths} ${tempo.perMinute}`))
      .toEqual(['4/4 0 80', '3/4 0 80', '3/4 1 80', '3/4 1 60', '4/4 1 60'])
    expect(contextOf(score, 99)).toBe(contextOf(score, 4))
  })

  it('is the very object of the bar before where nothing is stated', () => {
    fc.assert(fc.property(scores, (score) => {
      const contexts = contextsOf(score)
      score.bars.forEach((bar, index) => {
        if (index > 0 && !bar.meter && !bar.key && !bar.tempo) expect(contexts[index]).toBe(contexts[index - 1])
      })
      expect(contextsOf(score)).toBe(contexts)
    }))
  })

  it('stays the very object when another bar’s notes change', () => {
    fc.assert(fc.property(scores, fc.nat(), (score, pick) => {
      const at = pick % score.bars.length
      const changed = { ...score, bars: score.bars.map((bar, index) => (index === at ? { ...bar, voices: {} } : bar)) }
      const [before, after] = [contextsOf(score), contextsOf(changed)]
      // Also behind a bar that states something: what it states is the same.
      for (let index = 0; index < score.bars.length; index++) expect(after[index]).toBe(before[index])
    }))
  })

  it('has defaults before anything is stated', () => {
    const [context] = contextsOf(parseScore('^'))
    expect(context).toMatchObject({ meter: DEFAULT_METER, key: DEFAULT_KEY, tempo: DEFAULT_TEMPO })
  })
})
