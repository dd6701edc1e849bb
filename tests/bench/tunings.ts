import { performance } from 'node:perf_hooks'
import { toNumber } from '../../shared/score/fraction'
import { STANDARD_TUNING, STEEL_STRING_GUITAR } from '../../shared/score/create'
import type { Key } from '../../shared/score/types'
import { GUITAR_TUNINGS, stringsOf } from '../../shared/tunings/catalogue'
import { chartOf } from '../../shared/tunings/chart'
import { usualRoots, type Melody } from '../../shared/tunings/melody'
import { rankTunings } from '../../shared/tunings/rank'
import { LIGHT_SET } from '../../shared/tunings/sets'
import { readAbc } from '../support/abc'

/** Planxty Irwin (O'Carolan, 1670–1738), O'Neill's Music of Ireland, 1903, no. 677, both parts repeated: 32 bars. */
const PART = 'd2c Bcd|A2G FED|G2E FGA|C2D E2c|d2c Bcd|A2G FED|G2E FGA|D2C D2A|d3/2e/d d2d|e2e ecA|A2f e2d|dcB ABc|d2c Bcd|A2G FED|G2E FGA|D2C D3'
const TUNE = `M:6/8\nL:1/8\nK:D\n${PART}|${PART}|\n`

const D: Key = { fifths: 2, mode: 'major' }

function melody(): Melody {
  const { bars } = readAbc(TUNE)
  const notes = bars.flatMap(bar => bar.notes).flatMap(({ midi, length }) => (midi === null ? [] : [{ midi, length: toNumber(length) }]))
  return { notes, key: D, roots: usualRoots(D) }
}

const milliseconds = (work: () => void): number => {
  const start = performance.now()
  work()
  return performance.now() - start
}
const at = (times: readonly number[], part: number): number => [...times].sort((a, b) => a - b)[Math.floor((times.length - 1) * part)]!

/** One line for the chart of every guitar tuning, one for ranking 25 tunings × 12 keys × capo 0 to 7 for a tune of 32 bars. */
export function tuningFigures(): string[] {
  const charts = (): number[] => GUITAR_TUNINGS.map(tuning => milliseconds(() => chartOf({ strings: stringsOf(tuning), capos: [], instrument: STEEL_STRING_GUITAR })))
  const [first = 0] = charts()
  const warm = [...charts(), ...charts(), ...charts()]
  const ranking = () => milliseconds(() => {
    const steps = rankTunings({ melody: melody(), tunings: GUITAR_TUNINGS.slice(0, 25), from: STANDARD_TUNING, set: LIGHT_SET, ...STEEL_STRING_GUITAR })
    while (!steps.next().done) { /* each step is one key of one tuning */ }
  })
  const [cold, ...again] = [ranking(), ranking(), ranking()]
  return [
    `chart of a tuning: median ${at(warm, 0.5).toFixed(1)} ms, p95 ${at(warm, 0.95).toFixed(1)} ms, very first ${first.toFixed(1)} ms (wanted: 20 ms)`,
    `ranking ${melody().notes.length} notes in 32 bars, 25 tunings × 12 keys × capo 0–7: first ${cold!.toFixed(0)} ms, again ${at(again, 0).toFixed(0)} ms (wanted: 3000 ms)`,
  ]
}
