/** Time as saving sees it, so that tests never sleep. */
export interface Clock {
  /** Milliseconds. */
  readonly now: () => number
  /** Calls back after `ms`; the answer takes it back. */
  readonly after: (ms: number, call: () => void) => () => void
  /** From 0 up to 1. */
  readonly random: () => number
  /** Calls back soon, when the frame in hand is on the screen and nothing more pressing is to be done. */
  readonly afterPaint: (call: () => void) => void
}
