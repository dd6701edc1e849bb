import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readMusicXml, writeMusicXml } from '../../../shared/formats/musicxml'
import { scoreArbitrary } from '../../support/arbitraries'
import { withPlainIds } from '../../support/plain'

describe('MusicXML out and in', () => {
  it('reads its own export back equal, string and fret exact, with nothing to remark', () => {
    fc.assert(fc.property(scoreArbitrary(), (score) => {
      const result = readMusicXml(writeMusicXml(score))
      if ('problem' in result) throw new Error(result.problem)
      expect(withPlainIds(result.score)).toEqual(withPlainIds(score))
      expect(result.remarks).toEqual([])
    }), { numRuns: 100 })
  }, 60_000)
})
