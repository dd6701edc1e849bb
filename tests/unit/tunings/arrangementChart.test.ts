import { describe, expect, it } from 'vitest'
import { arrangementOptions, arrangementRequest } from '../../../composables/tuning/arrangementChart'
import { requestOf } from '../../../composables/tuning/chartOptions'
import { createScore } from '../../../shared/score/create'
import { chartOf } from '../../../shared/tunings/chart'

/** Standard with two partial capos, written in G flat: strings 5 and 4 sound B and E, string 1 F sharp. */
const strings = ['E4', 'B3', 'G3', 'D3', 'A2', 'E2'].map(pitch => ({ pitch }))
const score = createScore({ title: 'Two clamps', strings, capos: [{ fret: 2, strings: [4, 5] }, { fret: 2, strings: [1] }], key: { fifths: -6, mode: 'major' } }, () => 'b1')
const chart = (tried = {}) => chartOf({ ...requestOf(score.head.strings, { ...arrangementOptions(score), ...tried }), ...arrangementRequest(score, tried) })

describe('the chart of an arrangement', () => {
  it('has all its capos and its own key', () => {
    expect(chart().board.opens).toEqual([66, 59, 55, 52, 47, 40])
    expect(chart().scale.degrees.map(({ name }) => name)).toEqual(['G♭', 'A♭', 'B♭', 'C♭', 'D♭', 'E♭', 'F'])
  })

  it('shows what a person tries instead', () => {
    expect(chart({ capo: 0, partialFret: 0, partialStrings: [] }).board.opens).toEqual([64, 59, 55, 50, 45, 40])
    expect(chart({ key: 'd' }).scale.name).toBe('D major')
    expect(chart({ length: 640 }).board.scaleLength).toBe(640)
  })
})
