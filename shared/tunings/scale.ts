import { Scale } from 'tonal'
import { chromaOf, type Board } from './board'
import { chromaOfNote, shownNote } from './notes'

/** One degree of a scale. */
export interface ScaleDegree {
  readonly chroma: number
  /** "F♯" */
  readonly name: string
  /** Against the major scale: "1", "♭3", "♯4". */
  readonly label: string
}

const SIGNS: Record<string, string> = { P: '', M: '', m: '♭', d: '♭', A: '♯' }

/** "3m" → "♭3", "4A" → "♯4", "7d" → "♭♭7". */
function labelOf(interval: string): string {
  const match = /^(\d+)([PMmdA])/.exec(interval)
  if (!match) return interval
  const [, number, quality] = match
  const isDoublyFlat = quality === 'd' && [2, 3, 6, 7].includes(Number(number) % 7)
  return `${isDoublyFlat ? '♭♭' : SIGNS[quality!]}${number}`
}

/**
 * The degrees of a scale, tonic first.
 * @param tonic "D", "F#", "Bb"
 * @param name a scale of tonal's list: "major", "dorian", "minor pentatonic"
 * @returns null where there is no such scale
 */
export function scaleDegrees(tonic: string, name: string): readonly ScaleDegree[] | null {
  const scale = Scale.get(`${tonic} ${name}`)
  if (scale.empty || scale.notes.length === 0) return null
  return scale.notes.map((note, index) => ({ chroma: chromaOfNote(note), name: shownNote(note), label: labelOf(scale.intervals[index]!) }))
}

/** A place on the neck at which a degree of the scale sounds. */
export interface ScalePlace {
  readonly string: number
  /** Counted from the string's own capo; 0 open. */
  readonly fret: number
  readonly midi: number
  /** Index of the degree, 0 the tonic. */
  readonly degree: number
  readonly name: string
  readonly label: string
}

/** Every place of a scale, string 1 first, each from its open string up.
 * @param last highest fret from the nut; never beyond the neck */
export function placesOf(board: Board, degrees: readonly ScaleDegree[], last: number = board.lastFret): readonly ScalePlace[] {
  return board.opens.flatMap((open, index) => {
    const frets = Array.from({ length: Math.max(0, Math.min(last, board.lastFret) - board.stops[index]! + 1) }, (_, fret) => fret)
    return frets.flatMap((fret): ScalePlace[] => {
      const degree = degrees.findIndex(each => each.chroma === chromaOf(open + fret))
      return degree < 0 ? [] : [{ string: index + 1, fret, midi: open + fret, degree, name: degrees[degree]!.name, label: degrees[degree]!.label }]
    })
  })
}

/** What the open strings are in the scale, string 1 first; null: not in it. */
export const openDegrees = (board: Board, degrees: readonly ScaleDegree[]): readonly (ScaleDegree | null)[] =>
  board.opens.map(open => degrees.find(each => each.chroma === chromaOf(open)) ?? null)
