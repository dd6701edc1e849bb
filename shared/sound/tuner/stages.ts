import { midiOfText, parsePitch, pitchLabel } from '../../score/pitch'
import type { OpenString } from '../../score/types'
import { retuningPlan } from '../../tunings/retune'

/** One string to be tuned: on the way to a tuning, when all are gone over once more, or by itself. */
export interface Stage {
  readonly id: string
  readonly string: number
  /** As it was and as it becomes, "E2"; alike where it stays. */
  readonly from: string
  readonly to: string
  readonly pass: 'change' | 'check' | 'single'
  /** How to hear it, from the plan. */
  readonly sentence: string
  /** Up by more than a half step: where strings break. */
  readonly isRisky: boolean
}

/** "E2" as read: "F♯3" for "F#3". */
export const shown = (pitch: string): string => {
  const spelling = parsePitch(pitch)
  return spelling ? pitchLabel(spelling) : pitch
}

/** The strings one by one, thickest first as they are strung, with nothing known of how they stand. */
export const singleStages = (strings: readonly OpenString[]): readonly Stage[] => strings.map(({ pitch }, index): Stage => ({
  id: `string-${index + 1}`, string: index + 1, from: pitch, to: pitch, pass: 'single', sentence: `String ${index + 1} to ${shown(pitch)}.`, isRisky: false,
})).reverse()

/** The retuning plan's steps, then every string once more, since the neck moves.
 * @param from strings as they are, string 1 first
 * @throws RangeError when the tunings have different numbers of strings */
export function stagesOf(from: readonly OpenString[], to: readonly OpenString[]): readonly Stage[] {
  const plan = retuningPlan(from, to)
  return [
    ...plan.steps.map((step): Stage => ({
      id: `change-${step.string}`, string: step.string, from: step.from, to: step.to, pass: 'change', sentence: step.sentence, isRisky: midiOfText(step.to) - midiOfText(step.from) > 1,
    })),
    ...plan.finalPass.map((check): Stage => {
      const { pitch } = to[check.string - 1]!
      return { id: `check-${check.string}`, string: check.string, from: pitch, to: pitch, pass: 'check', sentence: check.sentence, isRisky: false }
    }),
  ]
}
