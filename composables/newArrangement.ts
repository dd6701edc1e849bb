import type { NewArrangement } from '#shared/schemas/arrangement'
import { keyName } from '#shared/formats/statement'
import { fraction, isLess, type Fraction } from '#shared/score/fraction'
import { meterLength } from '#shared/score/time'
import type { Key, Meter, RingRule, Tempo } from '#shared/score/types'
import { parseTuning } from '#shared/tunings/parse'

/** The form as it stands, with every choice as text, the way a select keeps it. */
export interface NewArrangementForm {
  title: string
  tuning: string
  /** 0: none. An emptied number field holds "". */
  capo: number | string
  meter: string
  key: string
  perMinute: number | string
  beat: string
  /** "" for none, else "1/8". */
  pickup: string
  ring: RingRule
}

export const emptyForm = (): NewArrangementForm =>
  ({ title: '', tuning: 'E2 A2 D3 G3 B3 E4', capo: 0, meter: '4/4', key: '0 major', perMinute: 80, beat: '4', pickup: '', ring: 'written' })

export interface Option { readonly value: string, readonly label: string }

export const METERS: readonly Option[] = ['2/4', '3/4', '4/4', '5/4', '6/4', '2/2', '3/2', '3/8', '5/8', '6/8', '7/8', '9/8', '12/8'].map(value => ({ value, label: value }))

const signs = (fifths: number) => fifths === 0 ? 'no signs' : `${Math.abs(fifths)} ${fifths > 0 ? 'sharp' : 'flat'}${Math.abs(fifths) === 1 ? '' : 's'}`
export const KEYS: readonly Option[] = (['major', 'minor'] as const).flatMap(mode =>
  Array.from({ length: 15 }, (_, index) => index - 7).map(fifths => ({
    value: `${fifths} ${mode}`,
    label: `${keyName({ fifths, mode })}${mode === 'major' ? ' major' : ''} (${signs(fifths)})`,
  })))

/** Which note the tempo counts: base and dots. */
export const BEATS: readonly Option[] = [
  { value: '4', label: 'quarters a minute' }, { value: '4.', label: 'dotted quarters a minute' },
  { value: '2', label: 'halves a minute' }, { value: '8', label: 'eighths a minute' },
]

/** What a tempo counts in this meter (common practice): the dotted quarter in 6/8, 9/8 and 12/8, else the meter's own unit. */
export const naturalBeat = (meter: string): string => /^(6|9|12)\/8$/.test(meter) ? '4.' : meter.endsWith('/2') ? '2' : meter.endsWith('/8') ? '8' : '4'

const readMeter = (text: string): Meter => {
  const [beats = '4', unit = '4'] = text.split('/')
  return { beats: Number(beats), unit: Number(unit) as Meter['unit'] }
}
const readKey = (text: string): Key => {
  const [fifths = '0', mode] = text.split(' ')
  return { fifths: Number(fifths), mode: mode === 'minor' ? 'minor' : 'major' }
}
const readTempo = (form: NewArrangementForm): Tempo =>
  ({ base: Number(form.beat.replace('.', '')) as Tempo['base'], dots: form.beat.endsWith('.') ? 1 : 0, perMinute: Number(form.perMinute) })
const readPickup = (text: string): Fraction | undefined => {
  const [n, d] = text.split('/')
  return n && d ? fraction(Number(n), Number(d)) : undefined
}

const NAMES: Record<number, readonly [string, string]> = { 1: ['whole', 'wholes'], 2: ['half', 'halves'], 4: ['quarter', 'quarters'], 8: ['eighth', 'eighths'], 16: ['sixteenth', 'sixteenths'] }

/** None, then every number of sixteenths shorter than a bar. */
export function pickupOptions(meter: string): readonly Option[] {
  const bar = meterLength(readMeter(meter))
  const found: Option[] = [{ value: '', label: 'None' }]
  for (let sixteenths = 1; isLess(fraction(sixteenths, 16), bar); sixteenths++) {
    const { n, d } = fraction(sixteenths, 16)
    const [one, many] = NAMES[d] ?? [`1/${d}`, `1/${d}`]
    found.push({ value: `${n}/${d}`, label: `${n} ${n === 1 ? one : many}` })
  }
  return found
}

/** Each field's check: one sentence for what is wrong. */
export function arrangementChecks(form: NewArrangementForm) {
  const whole = (value: number | string, low: number, high: number) => value !== '' && Number.isInteger(Number(value)) && Number(value) >= low && Number(value) <= high
  return {
    title: () => form.title.trim() ? undefined : 'Give it a title; it can be changed later.',
    tuning: () => {
      const read = parseTuning(form.tuning)
      return 'problem' in read ? read.problem : undefined
    },
    capo: () => whole(form.capo, 0, 12) ? undefined : 'A capo stands at a whole fret from 1 to 12; 0 is none.',
    perMinute: () => Number(form.perMinute) >= 10 && Number(form.perMinute) <= 400 ? undefined : 'A tempo lies between 10 and 400 a minute.',
  }
}

/** What is sent.
 * @throws RangeError when the tuning can't be read; check first. */
export function newArrangement(form: NewArrangementForm): NewArrangement {
  const read = parseTuning(form.tuning)
  if ('problem' in read) throw new RangeError(read.problem)
  const pickup = readPickup(form.pickup)
  return {
    title: form.title.trim(),
    strings: [...read.strings],
    capos: Number(form.capo) ? [{ fret: Number(form.capo) }] : [],
    meter: readMeter(form.meter),
    key: readKey(form.key),
    tempo: readTempo(form),
    ...(pickup && { pickup }),
    ring: form.ring,
  }
}
