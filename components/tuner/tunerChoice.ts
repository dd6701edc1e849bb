import type { OpenString } from '#shared/score/types'
import { catalogue, stringsOf } from '#shared/tunings/catalogue'
import { tuningLetters } from '#shared/tunings/parse'
import { readSlug, slugOf } from '#shared/tunings/slug'

/** What a tuner's address asks for. */
export type AskedTuning
  = | { readonly strings: readonly OpenString[], readonly slug: string }
    | { readonly problem: string }

/** Reads "c2-g2-d3-g3-c4-d4", however it is spelled. */
export function askedTuning(text: string): AskedTuning {
  const read = readSlug(text)
  if (read.kind === 'impossible') return { problem: read.problem }
  return read.kind === 'tuning' ? read : askedTuning(read.slug)
}

export interface TuningOption { readonly value: string, readonly label: string }

/** Tunings to choose from, by address; the one that is asked for stands among them even where no one has named it.
 * @param count how many strings; absent: any */
export function tuningOptions(asked: AskedTuning | null, count?: number): TuningOption[] {
  const named = catalogue.map(tuning => ({ name: tuning.name, strings: stringsOf(tuning) }))
    .filter(({ strings }) => count === undefined || strings.length === count)
    .map(({ name, strings }) => ({ value: slugOf(strings), label: `${name} (${tuningLetters(strings)})` }))
  if (!asked || 'problem' in asked || named.some(({ value }) => value === asked.slug)) return named
  return [{ value: asked.slug, label: tuningLetters(asked.strings) }, ...named]
}
