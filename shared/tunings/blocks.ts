import { midiOfText } from '../score/pitch'
import type { OpenString } from '../score/types'
import { capitalised, counted, octavesWord, stringsWord } from './words'

/** Strings on which a shape known in one tuning holds in another when all its frets move by the same amount. */
export interface ShapeBlock {
  /** Strings of the tuning where the shape is known, and those of the new one that take it, in the same order. */
  readonly from: readonly number[]
  readonly to: readonly number[]
  /** Frets to add to the shape, −6 to 5; its octave may change with them. */
  readonly frets: number
  /** Octaves by which it then sounds higher. */
  readonly octaves: number
}

/** A move in half steps as frets to add within half an octave, and the octaves that are left. */
function asFrets(halfSteps: number): { frets: number, octaves: number } {
  const octaves = Math.ceil((halfSteps - 6) / 12)
  // Strings that rose need lower frets for the same sound.
  return { frets: -(halfSteps - 12 * octaves) + 0, octaves: octaves + 0 }
}

/** Strings of `known` against those `shift` places further along in `wanted`, by what they moved. */
function movesAt(known: readonly number[], wanted: readonly number[], shift: number): Map<number, number[]> {
  const groups = new Map<number, number[]>()
  known.forEach((midi, index) => {
    const target = wanted[index + shift]
    if (target !== undefined) groups.set(target - midi, [...groups.get(target - midi) ?? [], index + 1])
  })
  return groups
}

/** Neighbouring strings together, lowest number first: [5, 1, 2] → [1, 2], [5]. */
export const neighbourRuns = (strings: readonly number[]): number[][] => strings.toSorted((a, b) => a - b).reduce<number[][]>((all, string) => {
  const last = all.at(-1)
  return last && last.at(-1) === string - 1 ? [...all.slice(0, -1), [...last, string]] : [...all, [string]]
}, [])

/**
 * Which shapes move as a block from one tuning to another: on the same strings (any two or more that moved alike, neighbours or not),
 * and on other strings (three neighbours or more, whose steps from string to string are the same). Largest blocks first, the same
 * strings before others.
 * @param known strings of the tuning where the shapes are known, string 1 first
 */
export function shapeBlocks(known: readonly OpenString[], wanted: readonly OpenString[]): readonly ShapeBlock[] {
  const [from, to] = [known, wanted].map(strings => strings.map(({ pitch }) => midiOfText(pitch)))
  const shifts = Array.from({ length: 2 * Math.max(from!.length, to!.length) - 1 }, (_, index) => index - from!.length + 1)
  return shifts.flatMap(shift => [...movesAt(from!, to!, shift)].flatMap(([halfSteps, strings]) =>
    (shift === 0 ? [strings].filter(each => each.length > 1) : neighbourRuns(strings).filter(each => each.length > 2))
      .map(own => ({ from: own, to: own.map(string => string + shift), ...asFrets(halfSteps) }))))
    .sort((a, b) => b.from.length - a.from.length || distance(a) - distance(b))
}

const distance = ({ from, to }: ShapeBlock): number => Math.abs(to[0]! - from[0]!)

/** "Shapes on strings 3, 4 and 5 stay where they are." "Shapes on strings 1, 2 and 6 move up two frets." */
export function blockSentence({ from, to, frets, octaves }: ShapeBlock): string {
  const place = from[0] === to[0] ? '' : `go to ${stringsWord(to)}`
  const move = frets === 0 ? '' : `${place ? '' : 'move '}${frets > 0 ? 'up' : 'down'} ${counted(Math.abs(frets), 'fret')}`
  const action = [place, move].filter(Boolean).join(', ') || 'stay where they are'
  return `${capitalised(`shapes on ${stringsWord(from)}`)} ${action}${octaves ? ` and sound ${octavesWord(octaves)}` : ''}.`
}
