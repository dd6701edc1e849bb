import type { XmlElement } from '@rgrove/parse-xml'
import { divide, equals, fraction, type Fraction } from '../../score/fraction'
import { plainLength } from '../../score/time'
import { durationAt } from './readNote'
import { BASE_OF_TYPE } from './terms'
import { all, elements, has, numberAt, one, textAt } from './tree'

const ONE = fraction(1)

/** How many times longer a note lasts by its duration than its shape says; null where that can't be told. */
function scaleOf(note: XmlElement, divisions: number): Fraction | null {
  const base = BASE_OF_TYPE[textAt(note, 'type')?.trim() ?? '']
  if (!base || !numberAt(note, 'duration') || has(note, 'grace') || has(note, 'time-modification') || one(note, 'rest')?.attributes.measure === 'yes') return null
  return divide(durationAt(note, divisions), plainLength({ base, dots: all(note, 'dot').length }))
}

/**
 * How many times longer the durations of a part are than its note shapes, where all of its notes agree in one number; else 1.
 * MusicXML counts divisions of a quarter; a file that counted another unit still shows the right shapes.
 */
export function durationScale(part: XmlElement): Fraction {
  let divisions = 1
  const scales: Fraction[] = []
  for (const element of all(part, 'measure').flatMap(elements)) {
    if (element.name === 'attributes') divisions = numberAt(element, 'divisions') || divisions
    const scale = element.name === 'note' ? scaleOf(element, divisions) : null
    if (scale) scales.push(scale)
  }
  const [first] = scales
  return first && scales.length > 1 && scales.every(scale => equals(scale, first)) ? first : ONE
}
