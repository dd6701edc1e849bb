import { expect, it } from 'vitest'
import { changeText, changesFromStandard } from '../../../shared/tunings/change'

const strings = (text: string) => ({ strings: text.split(' ').reverse().map(pitch => ({ pitch })) })

// S. Baughman, "Orkney Tuning"; MEI Guidelines, data.COURSETUNING (open A): half steps from E A D G B E, string 6 to 1.
it.each([
  ['C2 G2 D3 G3 C4 D4', [-4, -2, 0, 0, 1, -2]],
  ['E2 A2 E3 A3 C#4 E4', [0, 0, 2, 2, 2, 0]],
  ['E2 A2 D3 G3 B3 E4', [0, 0, 0, 0, 0, 0]],
])('%s', (text, changes) => expect(changesFromStandard(strings(text))?.toReversed()).toEqual(changes))

it('has nothing to compare other instruments with', () => expect(changesFromStandard(strings('G3 D4 A4 E5'))).toBeNull())
it('writes the sign', () => expect([-4, 0, 3].map(changeText)).toEqual(['−4', '', '+3']))
