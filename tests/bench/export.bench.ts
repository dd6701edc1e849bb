import { performance } from 'node:perf_hooks'
import { test } from '@playwright/test'
import { writeMusicXml } from '../../shared/formats/musicxml'
import { writeSaved } from '../../shared/formats/saved'
import type { Score } from '../../shared/score/types'
import { denseScore } from '../support/dense'

const RUNS = 15

/** Milliseconds for each of `RUNS` exports, every time of a fresh score, so that nothing is remembered. */
function measure(write: (score: Score) => string, bars: number): { times: number[], kilobytes: number } {
  let kilobytes = 0
  const times = Array.from({ length: RUNS }, () => {
    const score = denseScore(bars)
    const start = performance.now()
    kilobytes = write(score).length / 1000
    return performance.now() - start
  })
  return { times, kilobytes }
}

test('export of dense two-voice bars', () => {
  for (const [name, write] of [['MusicXML', writeMusicXml], ['own JSON', writeSaved]] as const) {
    for (const bars of [200, 400]) {
      const { times: [first = 0, ...later], kilobytes } = measure(write, bars)
      const median = later.sort((a, b) => a - b)[Math.floor(later.length / 2)]!
      console.log(`export ${name}, ${bars} bars: median ${median.toFixed(1)} ms, first ${first.toFixed(1)} ms, ${kilobytes.toFixed(0)} kB`)
    }
  }
})
