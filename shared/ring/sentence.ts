import { divide, toNumber, type Fraction } from '../score/fraction'
import { VULGAR } from '../score/text'
import { beatOf } from '../score/time'
import type { Meter } from '../score/types'
import type { Ring } from './types'

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
