import type { XmlElement } from '@rgrove/parse-xml'
import type { Spelling, Step } from '../../score/pitch'
import { BASES, type Base, type Key, type Meter } from '../../score/types'
import { all, numberAt, numberOf, textAt } from './tree'

/** What a bar's `attributes` state. */

/** What `clef` and `staff-details` say of a staff. Tunings by line, 1 the lowest. */
export interface RawStaff {
  readonly staff: number
  readonly isTab: boolean
  readonly lines: number | undefined
  readonly tunings: ReadonlyMap<number, Spelling>
  readonly capo: number | undefined
}

/** Half steps from written to sounding pitch by staff; 'all' where the file names none. */
export type Transposes = ReadonlyMap<number | 'all', number>
export const transposeOf = (transposes: Transposes, staff: number): number => transposes.get(staff) ?? transposes.get('all') ?? 0

const isBase = (value: number): value is Base => (BASES as readonly number[]).includes(value)

export function readKey(element: XmlElement): Key | null {
  const fifths = numberAt(element, 'fifths')
  if (fifths === undefined || !Number.isInteger(fifths) || Math.abs(fifths) > 7) return null
  return { fifths, mode: textAt(element, 'mode')?.trim() === 'minor' ? 'minor' : 'major' }
}

/** "3+2" eighths are five; 3/8 + 2/4 are seven eighths. */
export function readMeter(element: XmlElement): Meter | null {
  const counts = all(element, 'beats').map(each => each.text.split('+').reduce((sum, part) => sum + Number(part), 0))
  const units = all(element, 'beat-type').map(each => Number(each.text))
  const unit = Math.max(...units)
  const beats = counts.reduce((sum, count, index) => sum + count * unit / (units[index] ?? unit), 0)
  return isBase(unit) && Number.isInteger(beats) && beats >= 1 && beats <= 32 ? { beats, unit } : null
}

function readTuning(element: XmlElement): Spelling | null {
  const step = textAt(element, 'tuning-step')?.trim() ?? ''
  const octave = numberAt(element, 'tuning-octave')
  return /^[A-G]$/.test(step) && octave !== undefined ? { step: step as Step, alter: numberAt(element, 'tuning-alter') ?? 0, octave } : null
}

export function readStaves(attributes: XmlElement): RawStaff[] {
  const clefs = all(attributes, 'clef')
  const details = all(attributes, 'staff-details')
  const numbers = new Set([...clefs, ...details].map(each => numberOf(each, 'number') ?? 1))
  return [...numbers].map((staff) => {
    const mine = (each: XmlElement) => (numberOf(each, 'number') ?? 1) === staff
    const detail = details.find(mine)
    const tunings = all(detail, 'staff-tuning').flatMap((each) => {
      const tuning = readTuning(each)
      return tuning ? [[numberOf(each, 'line') ?? 1, tuning] as const] : []
    })
    return {
      staff, isTab: clefs.some(each => mine(each) && textAt(each, 'sign')?.trim() === 'TAB') || tunings.length > 0,
      lines: numberAt(detail, 'staff-lines'), tunings: new Map(tunings), capo: numberAt(detail, 'capo'),
    }
  })
}

/** The transpositions in force after these attributes. */
export function readTransposes(attributes: XmlElement, before: Transposes): Transposes {
  const result = new Map(before)
  for (const each of all(attributes, 'transpose')) {
    const octaves = numberAt(each, 'octave-change') ?? 0
    const halfSteps = (numberAt(each, 'chromatic') ?? 0) + 12 * octaves
    result.set(numberOf(each, 'number') ?? 'all', halfSteps)
  }
  return result
}
