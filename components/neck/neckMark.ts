/** A note drawn on a neck. */
export interface NeckMark {
  readonly string: number
  /** From the nut. */
  readonly fret: number
  /** Name, degree or finger. */
  readonly text: string
  readonly tonic: boolean
  /** An open string, capo on. */
  readonly open: boolean
}

/** A place that is read. */
export interface NeckPosition { readonly string: number, readonly fret: number }
