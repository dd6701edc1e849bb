import { describe, expect, it } from 'vitest'
import { createScore } from '../../../shared/score/create'
import { fingerDistance, fretDistance, nameAt, scalePlaces } from '../../../shared/tunings/neck'

const head = (more: object = {}) => ({ ...createScore({ title: 'Test' }, () => 'b').head, ...more })

describe('fret distances', () => {
  // R. M. Mottola, American Lutherie 130: distances at a scale of 647.7 mm.
  it.each([[1, 36.35], [3, 103.05], [5, 162.47], [7, 215.41], [12, 323.85]])('fret %i lies %f mm from the nut', (fret, mm) => {
    expect(fretDistance(fret) * 647.7).toBeCloseTo(mm, 2)
  })

  it('puts the finger between its fret and the one before', () => {
    expect(fingerDistance(0)).toBe(0)
    expect(fingerDistance(1) * 647.7).toBeCloseTo(36.35 / 2, 2)
  })
})

describe('notes of the key on the neck', () => {
  const onString = (string: number, fifths: number, more = {}) =>
    scalePlaces(head(more), fifths).filter(each => each.string === string).map(each => `${each.fret}${each.name}`)

  // The frets of the C major scale on the strings of standard tuning (common practice).
  it('lists C major on the first string of standard tuning', () =>
    expect(onString(1, 0).slice(0, 7)).toEqual(['1F', '3G', '5A', '7B', '8C', '10D', '12E']))

  it('spells by the key', () => {
    expect(onString(6, 2).slice(0, 3)).toEqual(['2F♯', '3G', '5A'])
    expect(onString(6, -3).slice(0, 3)).toEqual(['1F', '3G', '4A♭'])
  })

  it('counts from the nut and begins above the capo', () => {
    const capo = { capos: [{ fret: 2 }] }
    expect(onString(1, 4, capo).slice(0, 3)).toEqual(['4G♯', '5A', '7B'])
    expect(nameAt(head(capo), 1, 2, 4)).toBe('F♯')
  })

  it('leaves strings outside a partial capo as they are', () =>
    expect(onString(6, 0, { capos: [{ fret: 3, strings: [1, 2] }] })[0]).toBe('1F'))
})
