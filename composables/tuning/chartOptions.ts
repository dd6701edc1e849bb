import { STEEL_STRING_GUITAR } from '#shared/score/create'
import { keyName } from '#shared/formats/statement'
import type { Capo, Key, OpenString } from '#shared/score/types'
import { keyOf, type Neck } from '#shared/tunings/board'
import { entriesFor, stringsOf } from '#shared/tunings/catalogue'
import type { ChartRequest } from '#shared/tunings/chart'
import { gaugeLabel, gaugesOf, type SoldGauge } from '#shared/tunings/gauges'
import { neckProblem } from '#shared/tunings/input'
import { SETS, usualSet, withGauge, type StringSet } from '#shared/tunings/sets'
import { readSlug } from '#shared/tunings/slug'

/** What a person chose beside the tuning itself. All of it is in the page's address, so that a chart can be shared as it is seen. */
export interface ChartOptions {
  /** Address of the tuning to compare with and to retune from; '' for the usual one. */
  readonly from: string
  /** As written, capo left out; '' for the tuning's own. */
  readonly key: string
  /** '' for major or minor, as the key is. */
  readonly scale: string
  /** Fret of a capo over all strings; 0: none. */
  readonly capo: number
  /** Fret of a capo over some strings; 0: none. */
  readonly partialFret: number
  readonly partialStrings: readonly number[]
  /** Index of the set. */
  readonly set: number
  /** Gauges exchanged in it, by string: "2:plain.014". */
  readonly gauges: Readonly<Record<number, string>>
  /** Millimetres. */
  readonly length: number
}

export const USUAL_OPTIONS: ChartOptions = {
  from: '', key: '', scale: '', capo: 0, partialFret: 0, partialStrings: [], set: 0, gauges: {}, length: STEEL_STRING_GUITAR.scaleLength,
}

export const HIGHEST_CAPO = 9
export const SCALES: readonly string[] = ['major', 'minor', 'dorian', 'phrygian', 'lydian', 'mixolydian', 'harmonic minor', 'melodic minor', 'major pentatonic', 'minor pentatonic']

/** "G", "F♯ minor" by the text that stands for it in addresses: "g", "fsm". */
export const CHART_KEYS: readonly { readonly value: string, readonly label: string, readonly key: Key }[] = (['major', 'minor'] as const).flatMap(mode =>
  Array.from({ length: 12 }, (_, tonic) => keyOf(tonic, mode)).map((key) => {
    const name = keyName(key)
    return { key, label: mode === 'major' ? `${name} major` : name, value: name.toLowerCase().replace('♯', 's').replace('♭', 'b').replace(' minor', 'm') }
  }))

const GAUGES: readonly SoldGauge[] = (['plain', 'bronze', 'nickel'] as const).flatMap(gaugesOf)
/** Every gauge sold, with the text that stands for it. */
export const GAUGE_OPTIONS: readonly { readonly value: string, readonly label: string, readonly gauge: SoldGauge }[]
  = GAUGES.map(gauge => ({ gauge, value: `${gauge.kind}${gauge.inches}`, label: `${gaugeLabel(gauge)}${gauge.kind === 'plain' ? ' plain' : ''}` }))
export const gaugeValue = ({ kind, inches }: { kind: string, inches: number }): string => `${kind}${inches}`

type Query = Readonly<Record<string, unknown>>
const text = (value: unknown): string => (typeof value === 'string' ? value : '')
const whole = (value: unknown, low: number, high: number): number => {
  const found = /^\d+$/.test(text(value)) ? Number(value) : low
  return found >= low && found <= high ? found : low
}

/** What the address says, whatever is wrong in it left at its usual value. */
export function readOptions(query: Query, strings: number): ChartOptions {
  const from = readSlug(text(query.from))
  const [fret, on = ''] = text(query.partial).split('on')
  const partialStrings = [...new Set(on.split('-').map(each => whole(each, 0, strings)).filter(Boolean))].sort((a, b) => a - b)
  const length = Number(text(query.length))
  const gauges = text(query.gauges).split('_').map(each => each.split('-')).filter(([string, value]) =>
    whole(string, 0, strings) > 0 && GAUGE_OPTIONS.some(option => option.value === value))
  return {
    from: from.kind === 'tuning' && from.strings.length === strings ? from.slug : '',
    key: CHART_KEYS.find(each => each.value === query.key)?.value ?? '',
    scale: SCALES.find(each => each === text(query.scale).replaceAll('-', ' ')) ?? '',
    capo: whole(query.capo, 0, HIGHEST_CAPO),
    partialFret: partialStrings.length ? whole(fret, 0, HIGHEST_CAPO) : 0, partialStrings,
    set: whole(query.set, 0, SETS.length - 1),
    gauges: Object.fromEntries(gauges),
    length: length >= 300 && length <= 1000 ? length : USUAL_OPTIONS.length,
  }
}

/** The address's text for these options; what is usual is left out. */
export function queryOf(options: ChartOptions): Record<string, string> {
  const gauges = Object.entries(options.gauges).map(([string, value]) => `${string}-${value}`).join('_')
  const all: Record<string, string | number> = {
    from: options.from, key: options.key, scale: options.scale.replaceAll(' ', '-'), capo: options.capo || '',
    partial: options.partialFret && options.partialStrings.length ? `${options.partialFret}on${options.partialStrings.join('-')}` : '',
    set: options.set || '', gauges, length: options.length === USUAL_OPTIONS.length ? '' : options.length,
  }
  return Object.fromEntries(Object.entries(all).filter(([, value]) => value !== '').map(([name, value]) => [name, String(value)]))
}

/** Where an instrument of the catalogue with this sound has a short string, so has this. */
export const asPlayed = (strings: readonly OpenString[]): readonly OpenString[] => {
  const short = entriesFor(strings).find(each => each.lastStringFrom)
  return short ? stringsOf(short) : strings
}

const caposOf = ({ capo, partialFret, partialStrings }: ChartOptions): Capo[] => [
  ...(capo ? [{ fret: capo }] : []), ...(partialFret && partialStrings.length ? [{ fret: partialFret, strings: partialStrings }] : []),
]

/** The set chosen with its exchanged gauges; null where no set is known for the instrument. */
export function setOf(options: ChartOptions, strings: readonly OpenString[]): StringSet | null {
  if (!usualSet(strings)) return null
  return Object.entries(options.gauges).reduce((set, [string, value]) => {
    const gauge = GAUGE_OPTIONS.find(each => each.value === value)?.gauge
    return gauge ? withGauge(set, Number(string), gauge) : set
  }, SETS[options.set]!)
}

/** What a chart is worked out from. */
export function requestOf(strings: readonly OpenString[], options: ChartOptions): ChartRequest {
  const from = readSlug(options.from)
  const neck: Neck = { strings: asPlayed(strings), capos: caposOf(options), instrument: { ...STEEL_STRING_GUITAR, scaleLength: options.length } }
  return {
    ...neck, capos: neckProblem(neck) ? [] : neck.capos, set: setOf(options, strings),
    ...(from.kind === 'tuning' && { reference: from.strings }),
    ...(options.key && { key: CHART_KEYS.find(each => each.value === options.key)?.key }),
    ...(options.scale && { scale: options.scale }),
  }
}
