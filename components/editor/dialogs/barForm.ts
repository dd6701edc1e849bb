import { statement } from '#shared/commands/bar'
import type { BarPatch } from '#shared/edits'
import { contextOf } from '#shared/score/context'
import { isEqual } from '#shared/score/equal'
import { fraction, type Fraction } from '#shared/score/fraction'
import type { Base, Bar, Key, Meter, Score, Tempo } from '#shared/score/types'

/** What a bar states, with every choice as text, the way a select keeps it. */
export interface BarForm {
  meter: string
  /** "-1 minor": fifths and mode. */
  key: string
  perMinute: number | string
  /** "4.": base and dots of the note that the tempo counts. */
  beat: string
  /** "" as the meter says, else "1/8". */
  length: string
  repeatStart: boolean
  /** How often the passage that ends here is played; 1: no repeat ends here. */
  times: number | string
}

const written = (length: Fraction | undefined): string => (length ? `${length.n}/${length.d}` : '')
const pair = (text: string): [number, number] => text.split('/').map(Number) as [number, number]
const readMeter = (text: string): Meter => {
  const [beats, unit] = pair(text)
  return { beats, unit: unit as Base }
}
const readKey = (text: string): Key => {
  const [fifths, mode] = text.split(' ')
  return { fifths: Number(fifths), mode: mode === 'minor' ? 'minor' : 'major' }
}

export function barForm(score: Score, index: number): BarForm {
  const { meter, key, tempo } = contextOf(score, index)
  const bar = score.bars[index]
  return {
    meter: `${meter.beats}/${meter.unit}`,
    key: `${key.fifths} ${key.mode}`,
    perMinute: tempo.perMinute,
    beat: `${tempo.base}${'.'.repeat(tempo.dots)}`,
    length: written(bar?.length),
    repeatStart: Boolean(bar?.repeatStart),
    times: bar?.repeatEnd ?? 1,
  }
}

/** What the bar would have to state for the form to hold. Only what changes is named. */
export function barPatch(score: Score, index: number, form: BarForm): BarPatch {
  const bar = score.bars[index]
  if (!bar) return {}
  const tempo: Tempo = { base: Number(form.beat.replaceAll('.', '')) as Base, dots: form.beat.split('.').length - 1, perMinute: Number(form.perMinute) }
  const times = Number(form.times)
  const wanted: { readonly [field in keyof BarPatch]: BarPatch[field] } = {
    meter: statement(score, index, 'meter', readMeter(form.meter)),
    key: statement(score, index, 'key', readKey(form.key)),
    tempo: statement(score, index, 'tempo', tempo),
    length: form.length ? fraction(...pair(form.length)) : null,
    repeatStart: form.repeatStart ? true : null,
    repeatEnd: times >= 2 ? times : null,
  }
  return Object.fromEntries(Object.entries(wanted).filter(([field, value]) => !isEqual(bar[field as keyof Bar] ?? null, value)))
}

/** One sentence for each field that can't be. */
export function barChecks(form: BarForm): Readonly<Partial<Record<keyof BarForm, string>>> {
  const perMinute = Number(form.perMinute)
  const times = Number(form.times)
  return {
    ...(!(perMinute >= 10 && perMinute <= 400) && { perMinute: 'A tempo lies between 10 and 400 a minute.' }),
    ...(!(Number.isInteger(times) && times >= 1 && times <= 16) && { times: 'A passage is played 1 to 16 times.' }),
  }
}
