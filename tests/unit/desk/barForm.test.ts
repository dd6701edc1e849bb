import { describe, expect, it } from 'vitest'
import { barChecks, barForm, barPatch } from '../../../components/editor/dialogs/barForm'
import { fraction } from '../../../shared/score/fraction'
import { createScore } from '../../../shared/score/create'

let count = 0
const newId = () => `b${count++}`
const score = (() => {
  const made = createScore({ title: 'Test', meter: { beats: 6, unit: 8 }, key: { fifths: 2, mode: 'major' }, pickup: fraction(1, 8) }, newId)
  return { ...made, bars: [...made.bars, { id: newId(), repeatEnd: 2, voices: {} }] }
})()

describe('the form of a bar', () => {
  it('shows what holds in the bar, stated there or not', () => {
    expect(barForm(score, 0)).toMatchObject({ meter: '6/8', key: '2 major', length: '1/8', times: 1 })
    expect(barForm(score, 2)).toMatchObject({ meter: '6/8', key: '2 major', length: '', times: 2 })
  })

  it('asks for nothing while nothing was changed', () => {
    for (const index of [0, 1, 2]) expect(barPatch(score, index, barForm(score, index))).toEqual({})
  })

  it('names only what changes', () => {
    expect(barPatch(score, 1, { ...barForm(score, 1), meter: '9/8', repeatStart: true })).toEqual({ meter: { beats: 9, unit: 8 }, repeatStart: true })
    expect(barPatch(score, 2, { ...barForm(score, 2), times: '1', length: '5/8' })).toEqual({ repeatEnd: null, length: { n: 5, d: 8 } })
  })

  it('takes a statement away that says what holds anyway, but never that of the first bar', () => {
    const changed = { ...score, bars: score.bars.map((bar, index) => (index === 1 ? { ...bar, meter: { beats: 9, unit: 8 as const } } : bar)) }
    expect(barPatch(changed, 1, { ...barForm(changed, 1), meter: '6/8' })).toEqual({ meter: null })
    expect(barPatch(score, 0, { ...barForm(score, 0), beat: '4.', perMinute: '96' })).toEqual({ tempo: { base: 4, dots: 1, perMinute: 96 } })
  })

  it('says what can not be', () => {
    expect(barChecks({ ...barForm(score, 0), perMinute: '', times: 0 })).toMatchObject({ perMinute: expect.stringContaining('10 and 400'), times: expect.stringContaining('1 to 16') })
    expect(barChecks(barForm(score, 0))).toEqual({})
  })
})
