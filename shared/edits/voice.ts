import { isEqual } from '../score/equal'
import { barInWords, barLabel } from '../score/numbers'
import { validateVoice } from '../score/validate'
import type { Bar, Score, Voices } from '../score/types'
import type { EditResult, ReplaceVoice } from './types'
import { refuse, replaceBar } from './support'

export function applyReplaceVoice(score: Score, edit: ReplaceVoice): EditResult {
  const index = score.bars.findIndex(bar => bar.id === edit.bar)
  const bar = score.bars[index]
  if (!bar) return refuse(edit, 'missing', 'That bar is not in the arrangement any more.')
  if (!isEqual(bar.voices[edit.voice] ?? null, edit.before)) return refuse(edit, 'changed', `The ${edit.voice} voice of ${barInWords(score, index)} has changed meanwhile.`)
  const problem = edit.after && validateVoice(edit.after, score.head)
  if (problem) return refuse(edit, 'invalid', `${barLabel(score, index)}: ${problem}`)
  return {
    score: replaceBar(score, index, withVoice(bar, edit)),
    inverse: { ...edit, before: edit.after, after: edit.before },
    touched: [edit.bar],
  }
}

function withVoice(bar: Bar, edit: ReplaceVoice): Bar {
  const { [edit.voice]: _replaced, ...others } = bar.voices
  const voices: Voices = edit.after ? { ...others, [edit.voice]: edit.after } : others
  return { ...bar, voices }
}
