import { applyEdits, isRefused, type Edit, type HeadPatch } from '../edits'
import type { EditorState, Transaction } from '../editor'
import { isEqual } from '../score/equal'
import type { Head, Voice, VoiceName } from '../score/types'
import { validateVoice } from '../score/validate'

/** How a voice of a bar lies in the new tuning. */
export interface RetunedVoice { readonly bar: string, readonly voice: VoiceName, readonly after: Voice }

/**
 * Changes strings or capos together with the voices that are laid out anew, as one step to undo. Without voices frets stay and the
 * sound changes. Null where nothing changes; where it can't be done, a transaction with the reason as its notice.
 */
export function retune({ score }: Pick<EditorState, 'score'>, wish: Partial<Pick<Head, 'strings' | 'capos'>>, voices: readonly RetunedVoice[] = []): Transaction | null {
  const label = voices.length ? 'Change the tuning, keep the sound' : 'Change the tuning'
  const fields = (['strings', 'capos'] as const).filter(field => wish[field] && !isEqual(wish[field], score.head[field]))
  if (!fields.length) return null
  const pick = (from: HeadPatch): HeadPatch => Object.fromEntries(fields.map(field => [field, from[field]]))
  const head: Edit = { kind: 'patchHead', before: pick(score.head), after: pick(wish) }
  const next: Head = { ...score.head, ...pick(wish) }
  const bars = new Map(score.bars.map(bar => [bar.id, bar]))
  const steps = voices.map(({ bar, voice, after }) => stepsOf(bar, voice, bars.get(bar)?.voices[voice] ?? null, after, score.head, next))
  const edits = [...steps.flatMap(step => step.first), head, ...steps.flatMap(step => step.then)]
  const applied = applyEdits(score, edits)
  return isRefused(applied) ? { label, notice: applied.refused.message } : { label, edits }
}

interface Steps { readonly first: readonly Edit[], readonly then: readonly Edit[] }

/** Every edit must leave a score that is sound: notes move to a string before it goes, or after it has come; where neither will do, they are lifted meanwhile. */
function stepsOf(bar: string, voice: VoiceName, before: Voice | null, after: Voice, old: Head, next: Head): Steps {
  const edit = (from: Voice | null, to: Voice): Edit => ({ kind: 'replaceVoice', bar, voice, before: from, after: to })
  if (!validateVoice(after, old)) return { first: [edit(before, after)], then: [] }
  if (!before || !validateVoice(before, next)) return { first: [], then: [edit(before, after)] }
  const lifted: Voice = { ...before, events: before.events.map(event => ({ ...event, notes: [] })) }
  return { first: [edit(before, lifted)], then: [edit(lifted, after)] }
}
