import { performance } from 'node:perf_hooks'
import { writeMusicXml } from '../../shared/formats/musicxml'
import { writeSaved } from '../../shared/formats/saved'
import { denseScore } from '../support/dense'

/** Run with `npx vite-node tests/bench/export.ts`: milliseconds to export dense two-voice bars, a fresh score each time. */

const RUNS = 15

function measure(write: (bars: number) => () => string, bars: number): { first: number, median: number, kilobytes: number } {
  const times: number[] = []
  let size = 0
  for (let run = 0; run < RUNS; run++) {
    const task = write(bars)
    const start = performance.now()
    size = task().length
    times.push(performance.now() - start)
  }
  const [first = 0] = times
  return { first, median: times.sort((a, b) => a - b)[Math.floor(RUNS / 2)] ?? 0, kilobytes: size / 1000 }
}

const tasks: Readonly<Record<string, (bars: number) => () => string>> = {
  'MusicXML': (bars) => {
    const score = denseScore(bars)
    return () => writeMusicXml(score)
  },
  'own JSON': (bars) => {
    const score = denseScore(bars)
    return () => writeSaved(score)
  },
}

for (const [name, task] of Object.entries(tasks)) {
  for (const bars of [200, 400]) {
    const { first, median, kilobytes } = measure(task, bars)
    console.log(`export ${name}, ${bars} bars: median ${median.toFixed(1)} ms, first ${first.toFixed(1)} ms, ${kilobytes.toFixed(0)} kB`)
  }
}
