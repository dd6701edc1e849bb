/**
 * Law 3 without the hand: how long each note really sounds. A note ends at the first of three: intended (its written length where
 * the ring is "as written"), forced (its string is used again), free (it dies away by itself). In the order in which bars are written;
 * playback asks `ringsAt` for the order in which they are played.
 */
export type { Lane, Ring, RingEnd } from './types'
export { ringsAt, type Sequence } from './rings'
export { isHeldOver, placedNotes, strokesAt, type Placed, type Stroke } from './strokes'
export { isOpen, secondsToDie, secondsToDieOf } from './dying'
export { lanesOfBar, ringOfNote, ringsOfBar } from './memo'
export { beatsText, ringSentence } from './sentence'
