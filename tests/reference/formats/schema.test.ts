import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it, type TestContext } from 'vitest'
import { writeMusicXml } from '../../../shared/formats/musicxml'
import { scoreArbitrary } from '../../support/arbitraries'
import { LINKED_STAVES_FILE, SKIPPED, hasStandards, schemaProblems } from './readers'
import { scores } from './scores'

// The W3C XML schema of MusicXML 4.0, read in place, by libxml2.
const needsStandards = (context: TestContext) => context.skip(!hasStandards, SKIPPED)

describe('exports are valid MusicXML 4.0 by the W3C schema', () => {
  it('every kind of score', async (context) => {
    needsStandards(context)
    expect(await schemaProblems(Object.values(scores).map(score => writeMusicXml(score, { date: '2026-03-01' })))).toEqual([])
  })

  it('thirty random scores', async (context) => {
    needsStandards(context)
    const seed = Date.now() % 2 ** 31
    console.log(`random scores for the schema: seed ${seed}`)
    const texts = fc.sample(scoreArbitrary(3), { seed, numRuns: 30 }).map(score => writeMusicXml(score))
    expect(await schemaProblems(texts)).toEqual([])
  })

  it('the check itself refuses a wrong file and accepts a right one', async (context) => {
    needsStandards(context)
    expect(await schemaProblems([readFileSync(LINKED_STAVES_FILE, 'utf8')])).toEqual([])
    const broken = writeMusicXml(Object.values(scores)[0]!).replace('<fret>2</fret>', '<fret>-2</fret>')
    expect((await schemaProblems([broken])).join('\n')).toContain('fret')
  })
})
