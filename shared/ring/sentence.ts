import { divide, toNumber, type Fraction } from '../score/fraction'
import { beatOf } from '../score/time'
import type { Meter } from '../score/types'
import type { Ring } from './types'

/** The fractions that Unicode has as one character (block Number Forms and Latin-1). */
const VULGAR: Readonly<Record<string, string>> = {
  '1/2': '½', '1/3': '⅓', '2/3': '⅔', '1/4': '¼', '3/4': '¾', '1/5': '⅕', '2/5': '⅖', '3/5': '⅗', '4/5': '⅘',
  '1/6': '⅙', '5/6': '⅚', '1/7': '⅐', '1/8': '⅛', '3/8': '⅜', '5/8': '⅝', '7/8': '⅞', '1/9': '⅑', '1/10': '⅒',
}

/** "1½ beats", "¾ beat", "2 beats" of a span in whole notes; the beat is the one a player counts in the meter. */
export function beatsText(span: Fraction, meter: Meter): string {
  const beats = divide(span, beatOf(meter))
  const whole = Math.floor(toNumber(beats))
  const rest = `${beats.n - whole * beats.d}/${beats.d}`
  const part = beats.d === 1 ? '' : VULGAR[rest] ?? rest.replace('/', '⁄')
  // A fraction built of digits needs a space to stand off from the whole number.
  const number = whole === 0 ? part || '0' : `${whole}${part && !VULGAR[rest] ? ' ' : ''}${part}`
  return `${number} ${beats.n > beats.d || beats.n === 0 ? 'beats' : 'beat'}`
}

/** To the nearest half beat, as dying away has no edge. */
function roughly(span: Fraction, meter: Meter): string {
  const halves = Math.max(1, Math.round(2 * toNumber(divide(span, beatOf(meter)))))
  const beat = beatOf(meter)
  return beatsText({ n: beat.n * halves, d: beat.d * 2 }, meter)
}

/** What a note does, for the status line: "rings 1½ beats, until string 3 is played again". */
export function ringSentence(ring: Ring, meter: Meter): string {
  const beats = beatsText(ring.sounds, meter)
  if (ring.sounds.n === 0) return `is not heard: string ${ring.string} is stopped nearer the bridge at the same moment`
  switch (ring.ends) {
    case 'written': return `sounds ${beats}, as written`
    case 'damp': return `sounds ${beats}, then it is damped`
    case 'string': return `rings ${beats}, until string ${ring.string} is played again`
    case 'dies': return `rings about ${roughly(ring.sounds, meter)}, until it dies away`
    case 'end': return `rings ${beats}, to the end of the piece`
  }
}
