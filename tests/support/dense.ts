import { createScore } from '../../shared/score/create'
import type { Bar, Base, Score, ScoreEvent } from '../../shared/score/types'

/** A score of `count` full bars of 4/4 in C G D G C D: sixteen sixteenths above four quarters, for measuring. */
export function denseScore(count: number): Score {
  let ids = 0
  const newId = () => `dense-${(ids++).toString(36)}`
  const event = (base: Base, string: number, fret: number): ScoreEvent =>
    ({ id: newId(), length: { base, dots: 0 }, notes: [{ id: newId(), string, fret }] })
  const score = createScore({
    title: `Measured, ${count} bars`,
    strings: ['D4', 'C4', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch })),
    key: { fifths: 1, mode: 'major' },
  }, newId)
  const bars = Array.from({ length: count }, (_, bar): Bar => ({
    ...(bar === 0 ? score.bars[0]! : { id: newId() }),
    voices: {
      upper: { events: Array.from({ length: 16 }, (_, at) => event(16, 1 + (at + bar) % 3, [0, 2, 4, 5, 7][(at * 3 + bar) % 5]!)) },
      lower: { events: Array.from({ length: 4 }, (_, at) => event(4, 4 + (at + bar) % 3, [0, 0, 2, 5][(at + bar) % 4]!)) },
    },
  }))
  return { ...score, bars }
}
