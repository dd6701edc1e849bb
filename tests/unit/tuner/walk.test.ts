import { describe, expect, it } from 'vitest'
import { nextTick, ref } from 'vue'
import { useWalk } from '../../../composables/tuner/walk'
import { awaitPluck, levelOf, readA4, singleStages, type Quiet } from '../../../shared/sound/tuner'
import { pluck } from './pluck'

const stages = singleStages(['E4', 'B3', 'G3', 'D3'].map(pitch => ({ pitch })))
const idOf = (string: number) => stages.find(stage => stage.string === string)!.id

describe('going through the strings', () => {
  it('goes from the thickest to the thinnest and then is over', () => {
    const walk = useWalk(stages, undefined)
    const seen = stages.map(() => {
      const { string } = walk.stage.value!
      walk.finish()
      return string
    })
    expect(seen).toEqual([4, 3, 2, 1])
    expect(walk.isOver.value).toBe(true)
    walk.again()
    expect([walk.isOver.value, walk.stage.value?.string]).toEqual([false, 4])
  })

  it('comes back to what was passed over', () => {
    const walk = useWalk(stages, 2)
    expect(walk.stage.value?.string).toBe(2)
    walk.finish()
    walk.choose(idOf(3))
    walk.finish()
    expect(walk.stage.value?.string).toBe(1)
    walk.finish()
    expect(walk.stage.value?.string).toBe(4)
  })

  it('starts again when the tuning is another, and follows the string that is asked for', async () => {
    const chosen = ref(stages)
    const current = ref(4)
    const walk = useWalk(chosen, current)
    walk.finish()
    current.value = 1
    await nextTick()
    expect(walk.stage.value?.string).toBe(1)
    chosen.value = singleStages(['D4', 'B3', 'G3', 'D3'].map(pitch => ({ pitch })))
    await nextTick()
    expect([walk.done.value.size, walk.stage.value?.to]).toEqual([0, 'D4'])
  })
})

describe('waiting for a pluck', () => {
  /** Looks every 50 ms, from the start of a sound on. */
  const watch = (samples: Float32Array, from: number) => {
    let quiet: Quiet | null = null
    return Array.from({ length: Math.floor((samples.length - from) / 2400) }, (_, look) => {
      quiet = awaitPluck(quiet, levelOf(samples.subarray(0, from + look * 2400)))
      return quiet.isPlucked
    })
  }
  const first = pluck({ first: 146.8, rate: 48_000, seconds: 3, stretch: 0.0001, snr: 40, level: 0.1 })

  it('does not take a string that rings on for a new one', () => {
    expect(watch(first, 14_400)).not.toContain(true)
  })

  it('notices another at the same pitch', () => {
    const second = pluck({ first: 146.8, rate: 48_000, seconds: 1, stretch: 0.0001, before: 2, seed: 5, level: 0.1 })
    const plucked = watch(first.map((value, index) => value + (second[index] ?? 0)), 14_400)
    expect(plucked.indexOf(true)).toBeGreaterThan(33)
    expect(plucked.indexOf(true)).toBeLessThan(38)
  })

  it('waits for nothing where nothing rings', () => {
    expect(awaitPluck(null, 0.0005).isPlucked).toBe(true)
  })
})

it('keeps A4 within 430 to 450 Hz whatever was kept', () => {
  expect([430, 443.5, 450, 429, 451, Number.NaN, null, '440'].map(readA4)).toEqual([430, 443.5, 450, 440, 440, 440, 440, 440])
})
