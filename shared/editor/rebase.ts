import { applyEdits, isRefused, type Edit, type InsertBars, type MoveBars, type PatchBar, type PatchHead, type RemoveBars, type ReplaceVoice } from '../edits'
import { isEqual } from '../score/equal'
import type { Bar, Score, Voice, VoiceName } from '../score/types'
import type { LoggedTransaction } from './saving'

/**
 * My unsent work set upon what others saved meanwhile. A voice of a bar, a field of a bar and a field of the head are the units:
 * where only one side changed one, that change holds; where both did, theirs stands in the score and mine is handed back, so
 * that both readings are there to choose from. Nothing of mine vanishes silently.
 */
export interface Rebased {
  /** Theirs, with all of mine that fits. */
  readonly score: Score
  /** Mine as they follow upon theirs; those unchanged are the same objects. Transactions of which nothing is left are gone. */
  readonly transactions: readonly LoggedTransaction[]
  readonly conflicts: readonly Conflict[]
}

export type Conflict = VoiceConflict | FieldConflict | BarsConflict

/** `theirs` null: they emptied the voice, or with `gone` took the whole bar away. */
export interface VoiceConflict { readonly kind: 'voice', readonly bar: string, readonly voice: VoiceName, readonly mine: Voice | null, readonly theirs: Voice | null, readonly gone?: true }
/** `bar` null: a field of the head. `gone`: they took the bar away. */
export interface FieldConflict { readonly kind: 'field', readonly bar: string | null, readonly field: string, readonly mine: unknown, readonly theirs: unknown, readonly gone?: true }
/** removed: I took bars away that they changed, and they stay. inserted: my bars do not fit their instrument. moved: their order changed. */
export interface BarsConflict { readonly kind: 'bars', readonly what: 'removed' | 'inserted' | 'moved', readonly mine: readonly Bar[], readonly theirs: readonly Bar[] }

/** @param theirs the arrangement as others left it
 * @param mine my transactions since the revision that both sides know, in order
 * @param base that revision; with it, bars put in behind a bar that is gone land where it stood, else at the end */
export function rebaseOnto(theirs: Score, mine: readonly LoggedTransaction[], base?: Score): Rebased {
  const rebasing = new Rebasing(theirs, base)
  const transactions = mine.flatMap((transaction): LoggedTransaction[] => {
    const edits = transaction.edits.flatMap(edit => rebasing.edit(edit))
    if (!edits.length) return []
    const same = edits.length === transaction.edits.length && edits.every((edit, index) => edit === transaction.edits[index])
    return [same ? transaction : { ...transaction, edits }]
  })
  return { score: rebasing.score, transactions, conflicts: rebasing.conflicts }
}

/** As `rebaseOnto`, from the base and the batches that were missed.
 * @throws RangeError when the batches do not follow upon the base */
export function rebase(base: Score, missed: readonly { readonly transactions: readonly LoggedTransaction[] }[], mine: readonly LoggedTransaction[]): Rebased {
  const theirs = applyEdits(base, missed.flatMap(batch => batch.transactions).flatMap(each => each.edits))
  if (isRefused(theirs)) throw new RangeError(theirs.refused.message)
  return rebaseOnto(theirs.score, mine, base)
}

class Rebasing {
  private readonly found = new Map<string, Conflict>()
  /** What I had before the first edit of mine that did not fit, by the key of the conflict. */
  private readonly known = new Map<string, unknown>()
  constructor(public score: Score, private readonly base: Score | undefined) {}

  get conflicts(): readonly Conflict[] {
    return [...this.found.values()]
  }

  /** What becomes of one edit of mine. */
  edit(edit: Edit): readonly Edit[] {
    switch (edit.kind) {
      case 'replaceVoice': return this.voice(edit)
      case 'patchBar': return this.patch(edit, edit.bar, this.bar(edit.bar))
      case 'patchHead': return this.patch(edit, null, this.score.head)
      case 'insertBars': return this.insert(edit)
      case 'removeBars': return edit.bars.flatMap(bar => this.remove(edit, bar))
      case 'moveBars': return this.move(edit)
    }
  }

  private apply(...edits: readonly Edit[]): boolean {
    const applied = applyEdits(this.score, edits)
    if (isRefused(applied)) return false
    this.score = applied.score
    return true
  }

  private bar(id: string): Bar | undefined {
    return this.score.bars.find(bar => bar.id === id)
  }

  private before(id: string): string | null {
    return this.score.bars[this.score.bars.findIndex(bar => bar.id === id) - 1]?.id ?? null
  }

  /** Whether nothing is left to choose: mine has come to what they have, or back to where I began. */
  private isOver(key: string, theirs: unknown, before: unknown, after: unknown): boolean {
    if (!this.found.has(key)) this.known.set(key, before)
    return isEqual(after, theirs) || isEqual(after, this.known.get(key))
  }

  private voice(edit: ReplaceVoice): readonly Edit[] {
    const key = `${edit.bar} ${edit.voice}`
    const bar = this.bar(edit.bar)
    const theirs = bar?.voices[edit.voice] ?? null
    if (!this.found.has(key) && this.apply(edit)) return [edit]
    if (this.isOver(key, bar ? theirs : undefined, edit.before, edit.after)) this.found.delete(key)
    else this.found.set(key, { kind: 'voice', bar: edit.bar, voice: edit.voice, mine: edit.after, theirs, ...(!bar && { gone: true as const }) })
    return []
  }

  /** A patch that no rule of music lets through on their score is a conflict in all its fields. */
  private patch(edit: PatchBar | PatchHead, bar: string | null, holder: object | undefined): readonly Edit[] {
    const fields = this.freeFields(bar, edit.before, edit.after, holder)
    if (!fields.length) return []
    const next = fields.length === Object.keys(edit.after).length ? edit : narrowed(edit, fields)
    if (this.apply(next)) return [next]
    for (const field of fields) this.fieldConflict(bar, field, edit.after, holder)
    return []
  }

  /** The fields that they left as I knew them. */
  private freeFields(bar: string | null, before: object, after: object, holder: object | undefined): readonly string[] {
    return Object.keys(after).filter((field) => {
      const key = `${bar ?? 'head'}.${field}`
      const theirs = valueOf(holder, field)
      if (holder && !this.found.has(key) && isEqual(theirs, valueOf(before, field))) return true
      if (this.isOver(key, holder ? theirs : undefined, valueOf(before, field), valueOf(after, field))) this.found.delete(key)
      else this.fieldConflict(bar, field, after, holder)
      return false
    })
  }

  private fieldConflict(bar: string | null, field: string, after: object, holder: object | undefined) {
    this.found.set(`${bar ?? 'head'}.${field}`, {
      kind: 'field', bar, field, mine: valueOf(after, field), theirs: valueOf(holder, field), ...(!holder && { gone: true as const }),
    })
  }

  private insert(edit: InsertBars): readonly Edit[] {
    const after = this.survivor(edit.after)
    const next = after === edit.after ? edit : { ...edit, after }
    if (this.apply(next)) return [next]
    // Bars that are there already came back by an undo on both sides.
    const missing = edit.bars.filter(bar => !this.bar(bar.id))
    if (missing.length) this.found.set(`insert ${edit.bars[0]!.id}`, { kind: 'bars', what: 'inserted', mine: missing, theirs: [] })
    return []
  }

  /** The bar itself, or the nearest one before it that is still there. */
  private survivor(id: string | null): string | null {
    if (id === null || this.bar(id)) return id
    const known = this.base?.bars ?? []
    const earlier = known.slice(0, Math.max(0, known.findIndex(bar => bar.id === id))).toReversed().find(bar => this.bar(bar.id))
    return known.some(bar => bar.id === id) ? earlier?.id ?? null : this.score.bars.at(-1)?.id ?? null
  }

  private remove(edit: RemoveBars, bar: Bar): readonly Edit[] {
    const there = this.bar(bar.id)
    if (!there) return []
    const alone: RemoveBars = edit.bars.length === 1 && edit.after === this.before(bar.id) ? edit : { kind: 'removeBars', after: this.before(bar.id), bars: [bar] }
    if (this.apply(alone)) return [alone]
    this.found.set(`remove ${bar.id}`, { kind: 'bars', what: 'removed', mine: [bar], theirs: [there] })
    return []
  }

  private move(edit: MoveBars): readonly Edit[] {
    const bars = edit.bars.filter(id => this.bar(id))
    if (!bars.length) return []
    const [from, to] = [this.before(bars[0]!), this.survivor(edit.to)]
    const next = bars.length === edit.bars.length && from === edit.from && to === edit.to ? edit : { ...edit, bars, from, to }
    if (this.apply(next)) return [next]
    const there = bars.map(id => this.bar(id)!)
    this.found.set(`move ${bars[0]!}`, { kind: 'bars', what: 'moved', mine: there, theirs: there })
    return []
  }
}

const valueOf = (holder: object | undefined, field: string): unknown => (holder as Record<string, unknown> | undefined)?.[field] ?? null
const pick = <T extends object>(from: T, fields: readonly string[]): T => Object.fromEntries(fields.map(field => [field, valueOf(from, field)])) as T

/** A patch of some of its fields only. */
const narrowed = (edit: PatchBar | PatchHead, fields: readonly string[]): Edit =>
  (edit.kind === 'patchBar'
    ? { ...edit, before: pick(edit.before, fields), after: pick(edit.after, fields) }
    : { ...edit, before: pick(edit.before, fields), after: pick(edit.after, fields) })

/** The edits that put my reading of a conflict in place of theirs; null where there is nothing to put. Undoing them brings theirs back. */
export function takeMine(score: Score, conflict: Conflict): readonly Edit[] | null {
  const last = score.bars.at(-1)?.id ?? null
  if (conflict.kind === 'bars') {
    const fresh = conflict.mine.filter(bar => !score.bars.some(each => each.id === bar.id))
    if (conflict.what === 'inserted') return fresh.length ? [{ kind: 'insertBars', after: last, bars: fresh }] : null
    if (conflict.what === 'moved') return null
    return conflict.mine.flatMap((bar): Edit[] => {
      const at = score.bars.findIndex(each => each.id === bar.id)
      return at < 0 ? [] : [{ kind: 'removeBars', after: score.bars[at - 1]?.id ?? null, bars: [score.bars[at]!] }]
    })
  }
  if (conflict.kind === 'field' && conflict.bar === null) {
    return [{ kind: 'patchHead', before: { [conflict.field]: valueOf(score.head, conflict.field) }, after: { [conflict.field]: conflict.mine } }]
  }
  const bar = score.bars.find(each => each.id === conflict.bar)
  if (conflict.kind === 'field') {
    return bar ? [{ kind: 'patchBar', bar: bar.id, before: { [conflict.field]: valueOf(bar, conflict.field) }, after: { [conflict.field]: conflict.mine } }] : null
  }
  if (!bar) return conflict.mine ? [{ kind: 'insertBars', after: last, bars: [{ id: conflict.bar, voices: { [conflict.voice]: conflict.mine } }] }] : null
  return [{ kind: 'replaceVoice', bar: bar.id, voice: conflict.voice, before: bar.voices[conflict.voice] ?? null, after: conflict.mine }]
}
