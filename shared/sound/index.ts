/** Sound: a score becomes a timed list, and a physical model of plucked strings plays it. */
export type { Moment, Schedule, SoundEvent, SoundNote, Touch } from './types'
export type { Place, Range } from './excerpt'
export { unroll } from './unroll'
export { momentAt, scheduleOf, soundOf } from './schedule'
export { clampRate, createEnsemble, RATE, type Ensemble } from './ensemble'
export { render, type RenderOptions } from './render'
export { CEILING } from './limiter'
