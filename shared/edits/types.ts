import type { Bar, Head, Score, Voice, VoiceName } from '../score/types'

/**
 * Edits are plain data that say both what was there and what shall be: that makes them invertible, and lets a server
 * see that someone else changed the same place. The unit of conflict is one voice of one bar, or one field.
 */
export type Edit = ReplaceVoice | PatchBar | PatchHead | InsertBars | RemoveBars | MoveBars

/** null: the bar has no such voice. */
export interface ReplaceVoice {
  readonly kind: 'replaceVoice'
  readonly bar: string
  readonly voice: VoiceName
  readonly before: Voice | null
  readonly after: Voice | null
}

export type BarField = Exclude<keyof Bar, 'id' | 'voices'>
/** null: the bar says nothing and inherits. Both sides name the same fields. */
export type BarPatch = { readonly [field in BarField]?: Bar[field] | null }
export interface PatchBar { readonly kind: 'patchBar', readonly bar: string, readonly before: BarPatch, readonly after: BarPatch }

export type HeadPatch = Partial<Head>
export interface PatchHead { readonly kind: 'patchHead', readonly before: HeadPatch, readonly after: HeadPatch }

/** `after` is the bar that they follow; null: at the start. */
export interface InsertBars { readonly kind: 'insertBars', readonly after: string | null, readonly bars: readonly Bar[] }
/** A run of neighbours, with their content so that nothing is lost. */
export interface RemoveBars { readonly kind: 'removeBars', readonly after: string | null, readonly bars: readonly Bar[] }
export interface MoveBars { readonly kind: 'moveBars', readonly bars: readonly string[], readonly from: string | null, readonly to: string | null }

/** Why an edit can't be applied: the place is gone, holds something else by now, or the result would be no score. */
export type RefusalReason = 'missing' | 'changed' | 'invalid'
export interface Refusal { readonly reason: RefusalReason, readonly message: string, readonly edit: Edit }

export interface Applied {
  readonly score: Score
  readonly inverse: Edit
  /** Ids of the bars whose content changed; the head is named 'head'. */
  readonly touched: readonly string[]
}

export type EditResult = Applied | { readonly refused: Refusal }
export const isRefused = <T extends object>(result: T | { readonly refused: Refusal }): result is { readonly refused: Refusal } => 'refused' in result
