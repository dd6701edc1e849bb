import type { LoggedBatch } from './edit'

/** What every refusal of the server carries as `data`. */
export interface Problem {
  readonly code: ProblemCode
  /** One sentence for people: what, where, what to do. */
  readonly message: string
  /** The part of the body that is meant: "email", "transactions.0.edits.2.bar". */
  readonly field?: string
  /** What to do about it, where there is more to say. */
  readonly help?: string
}

export type ProblemCode
  = 'bad-request' | 'too-large' | 'unsupported' | 'foreign-origin' | 'signed-out' | 'forbidden' | 'not-found'
    | 'wrong-credentials' | 'unconfirmed' | 'bad-token' | 'too-many' | 'stale' | 'refused' | 'starting' | 'failed'

/** Answer 409 to a save: what was saved by others since its base. */
export interface StaleProblem extends Problem { readonly code: 'stale', readonly revision: number, readonly missed: readonly LoggedBatch[] }
