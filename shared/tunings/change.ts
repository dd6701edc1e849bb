import { STANDARD_TUNING } from '../score/create'
import { midiOfText } from '../score/pitch'
import type { Head } from '../score/types'

/** Half steps by which each string is tuned away from standard at its own place, string 1 first. Instruments without six strings have no standard here: null. */
export function changesFromStandard(head: Pick<Head, 'strings'>): readonly number[] | null {
  if (head.strings.length !== STANDARD_TUNING.length) return null
  return head.strings.map((open, index) => midiOfText(open.pitch) - midiOfText(STANDARD_TUNING[index]!.pitch))
}

/** "+1", "−4" with a true minus sign; "" where nothing changed. */
export const changeText = (halfSteps: number): string =>
  (halfSteps === 0 ? '' : halfSteps > 0 ? `+${halfSteps}` : `−${-halfSteps}`)
