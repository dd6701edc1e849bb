import { retune } from '#shared/commands/retune'
import type { Transaction } from '#shared/editor'
import { soundingFifths } from '#shared/editor/describe'
import { contextOf } from '#shared/score/context'
import type { Head, OpenString, Score } from '#shared/score/types'
import { carry, type Carried, type LeftNote } from '#shared/tunings/carry'
import { soundChanges } from '#shared/tunings/carryNotes'
import { carrySentence, leftSentence, soundSentence } from '#shared/tunings/carryWords'
import { listed } from '#shared/tunings/words'

/** What happens to the notes: `sound`: frets change so that every note sounds as before; `frets`: they stay and the sound changes. */
export type RetuneChoice = 'sound' | 'frets'

/** Notes of one bar that would sound otherwise, each in a sentence. */
export interface LeftBar { readonly bar: number, readonly notes: readonly string[] }

export interface RetunePlan {
  /** How many notes are concerned. */
  readonly sentence: string
  /** Why it can't be done; null where it can. */
  readonly problem: string | null
  readonly left: readonly LeftBar[]
  /** Bars that come to need a wider grip; null where none does. */
  readonly wide: string | null
  readonly transaction: Transaction | null
}

function leftBars(score: Score, after: Head, left: readonly LeftNote[]): LeftBar[] {
  const bars = [...new Set(left.map(each => each.bar))]
  return bars.map(bar => ({
    bar,
    notes: left.filter(each => each.bar === bar).map(each => leftSentence(each, score.head, after, soundingFifths(contextOf(score, bar - 1).key, score.head))),
  }))
}

/** "Bar 3 comes to need …", "Bars 3, 5 and 8 come to need …"; of many the first ten. */
function wideSentence({ wide }: Carried): string | null {
  if (!wide.length) return null
  const shown = wide.slice(0, 10).map(String)
  const more = wide.length > shown.length ? [`${wide.length - shown.length} more`] : []
  return `${wide.length === 1 ? 'Bar' : 'Bars'} ${listed([...shown, ...more])} ${wide.length === 1 ? 'comes' : 'come'} to need a wider grip than a hand opens.`
}

const plan = (parts: Omit<RetunePlan, 'problem'>): RetunePlan =>
  ({ ...parts, problem: parts.transaction?.edits ? null : parts.transaction?.notice ?? null })

/** Both ways to give a score other strings, with what each does to its notes. */
export function retunePlans(score: Score, strings: readonly OpenString[]): Readonly<Record<RetuneChoice, RetunePlan>> {
  const wish = { strings, capos: score.head.capos }
  const carried = carry(score, wish)
  const changes = soundChanges(score, wish)
  return {
    sound: plan({
      sentence: carrySentence(carried), left: leftBars(score, { ...score.head, strings }, carried.left), wide: wideSentence(carried),
      transaction: retune({ score }, { strings }, carried.voices),
    }),
    frets: plan({
      sentence: changes ? soundSentence(changes) : 'Some notes are on strings that would not be there.', left: [], wide: null,
      transaction: retune({ score }, { strings }),
    }),
  }
}

/** The strings that were typed or chosen on this instrument: a short string stays short, as the text says nothing of it. */
export const onInstrument = (strings: readonly OpenString[], head: Pick<Head, 'strings'>): readonly OpenString[] => strings.map(({ pitch, from }, index) => {
  const start = from ?? (strings.length === head.strings.length ? head.strings[index]!.from : undefined)
  return start === undefined ? { pitch } : { pitch, from: start }
})
