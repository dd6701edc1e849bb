import { isEqual } from '../score/equal'
import type { HeadPatch } from '../edits'
import type { EditorState, Transaction } from '../editor'
import type { Head } from '../score/types'
import { scoreCommand, type Command } from './command'

/** Sets fields of the head; null where they are so already. Title, people, rights, source, strings, capos, ring rule, instrument. */
export function setHead({ score }: EditorState, patch: HeadPatch, label: string): Transaction | null {
  const fields = (Object.keys(patch) as (keyof Head)[]).filter(field => !isEqual(patch[field], score.head[field]))
  if (!fields.length) return null
  const pick = (from: HeadPatch): HeadPatch => Object.fromEntries(fields.map(field => [field, from[field]]))
  return { label, edits: [{ kind: 'patchHead', before: pick(score.head), after: pick(patch) }] }
}

/** Frets stay as they are: the sound changes. */
export const setTuning = (state: EditorState, strings: Head['strings']): Transaction | null => setHead(state, { strings }, 'Change the tuning')
export const setCapos = (state: EditorState, capos: Head['capos']): Transaction | null => setHead(state, { capos }, 'Set capos')

export const headCommands: readonly Command[] = [
  scoreCommand({
    id: 'head.ring', title: 'Let everything ring, or end as written', group: 'Arrangement', keys: [],
    run: state => (state.score.head.ring === 'written'
      ? setHead(state, { ring: 'let-ring' }, 'Let everything ring')
      : setHead(state, { ring: 'written' }, 'End notes as written')),
    help: 'Bars and notes that say otherwise keep what they say.', example: { before: '^3/0q', first: ['head.ring'], after: '^3/0q' },
  }),
]
