import { STEM_LENGTH, STAFF_HEIGHT, yOfPosition } from './metrics'
import type { StaffNote, Stem } from './types'

const MIDDLE = 4

/**
 * Stem of a lone voice: away from the side on which the note farthest from the middle line stands; down when both are as far
 * (Gould, Behind Bars, "Stems").
 */
export function stemByPosition(notes: readonly Pick<StaffNote, 'position'>[]): Stem {
  const highest = Math.max(...notes.map(note => note.position)) - MIDDLE
  const lowest = Math.min(...notes.map(note => note.position)) - MIDDLE
  if (!notes.length) return 1
  return highest + lowest < 0 ? 1 : -1
}

/** Highest and lowest y that a note with its stem reaches. Stems reach the middle line at the least. */
export function reach(notes: readonly Pick<StaffNote, 'position'>[], stem: Stem): { top: number, bottom: number } {
  if (!notes.length) return { top: 0, bottom: STAFF_HEIGHT }
  const high = yOfPosition(Math.max(...notes.map(note => note.position)))
  const low = yOfPosition(Math.min(...notes.map(note => note.position)))
  const middle = STAFF_HEIGHT / 2
  return stem === 1
    ? { top: Math.min(high - STEM_LENGTH, middle), bottom: low + 6 }
    : { top: high - 6, bottom: Math.max(low + STEM_LENGTH, middle) }
}

/** Highest and lowest y of a rest around its place; the longest shapes reach a space and a half either way. */
export const restReach = (position: number): { top: number, bottom: number } =>
  ({ top: yOfPosition(position) - 15, bottom: yOfPosition(position) + 15 })
