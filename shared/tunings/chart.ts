import { capoOffset } from '../score/sounding'
import type { Key, OpenString } from '../score/types'
import { homeKey, straightBarres, type Barre } from './barres'
import { blockSentence, shapeBlocks, type ShapeBlock } from './blocks'
import { boardOf, movedKey, tonicOf, type Board, type Neck } from './board'
import { entriesFor } from './catalogue'
import { cautionsOf, loadSentence, type Caution } from './cautions'
import { changeSentence, changeText, compareTunings, likeText, usualReference, type StringChange } from './change'
import { noteInKey } from './chords'
import { SPREAD_NOTE } from './gauges'
import { chordsOfKey, type ChordWish } from './keyChords'
import { loadOf, type Load } from './load'
import { neighbours, type Neighbours } from './neighbours'
import { tuningLetters } from './parse'
import { retuningPlan, type RetuningPlan } from './retune'
import { longestRun, type Run } from './run'
import { openDegrees, placesOf, scaleDegrees, type ScaleDegree, type ScalePlace } from './scale'
import { usualSet, type StringSet } from './sets'
import { shapeSentence, type Shape } from './shape'
import { findShapes } from './shapes'
import { slugOf } from './slug'
import { respell } from './spelling'

export interface ChartRequest extends Neck {
  /** Strings to compare with and to retune from, string 1 first; absent: the usual tuning of an instrument with as many. */
  readonly reference?: readonly OpenString[]
  /** Absent: a light set for six strings; null: none. */
  readonly set?: StringSet | null
  /** As written, capo left out; absent: the tuning's own. */
  readonly key?: Key
  /** A scale of tonal's list on the key's tonic; absent: major or minor, as the key is. */
  readonly scale?: string
}

export interface ChartString extends StringChange {
  /** "−2", "" where unchanged. */
  readonly changeText: string
  /** "string 4, an octave up" */
  readonly likeText: string
}

export interface ChartChord extends ChordWish {
  readonly shapes: readonly (Shape & { readonly sentence: string })[]
}

export interface Chart {
  readonly slug: string
  /** "C G D G C D" */
  readonly letters: string
  /** Names that players have for it. */
  readonly names: readonly string[]
  /** String 1 first; where there is no tuning to compare with: null. */
  readonly strings: readonly ChartString[] | null
  /** "Three strings down, one up a half step, two as they were" */
  readonly summary: string | null
  readonly blocks: readonly (ShapeBlock & { readonly sentence: string })[]
  readonly plan: RetuningPlan | null
  readonly key: Key
  readonly soundingKey: Key
  /** Fret 0, the open strings, to 12. */
  readonly barres: readonly Barre[]
  readonly board: Board
  readonly scale: { readonly name: string, readonly degrees: readonly ScaleDegree[], readonly open: readonly (ScaleDegree | null)[], readonly places: readonly ScalePlace[] }
  readonly neighbours: readonly Neighbours[]
  readonly run: Run
  readonly chords: readonly ChartChord[]
  /** Null where no set of strings is known for the instrument. */
  readonly load: Load | null
  readonly loadSentence: string
  readonly cautions: readonly Caution[]
  /** What must be said beside the tensions. */
  readonly loadNote: string
}

/** Frets beyond the capo in which neighbours and runs are sought: one hand's work, not the whole neck. */
const SCALE_FRETS = 12

/** Shapes that move together; blocks of two strings on other strings say little and are left out. */
const MOST_BLOCKS = 6

/**
 * Everything that a tuning's page shows, worked out from its pitches alone.
 * @param request an instrument that `neckProblem` finds nothing wrong with, and a set that `setProblem` finds nothing wrong with
 * @throws RangeError otherwise
 */
export function chartOf(request: ChartRequest): Chart {
  const neck: Neck = { strings: respell(request.strings), capos: request.capos, instrument: request.instrument }
  const { strings, instrument: { scaleLength } } = neck
  const reference = request.reference ?? usualReference(strings)
  const changes = reference && reference.length === strings.length ? compareTunings(reference, strings) : null
  const set = request.set === undefined ? usualSet(strings) : request.set
  const load = set && loadOf(strings, scaleLength, set)
  const key = request.key ?? homeKey(neck)
  const soundingKey = movedKey(key, capoOffset(neck))
  const board = boardOf(neck)
  const name = request.scale ?? key.mode
  const tonic = noteInKey(tonicOf(soundingKey), soundingKey).replaceAll('♯', '#').replaceAll('♭', 'b')
  const degrees = scaleDegrees(tonic, name)
  if (!degrees) throw new RangeError(`no scale: ${name}`)
  const near = placesOf(board, degrees, Math.min(...board.stops) + SCALE_FRETS)
  return {
    slug: slugOf(strings), letters: tuningLetters(strings), names: entriesFor(strings).map(each => each.name), board, key, soundingKey,
    strings: changes && changes.map(each => ({ ...each, changeText: changeText(each.halfSteps), likeText: likeText(each) })),
    summary: changes && changeSentence(changes),
    blocks: reference ? shapeBlocks(reference, strings).slice(0, MOST_BLOCKS).map(each => ({ ...each, sentence: blockSentence(each) })) : [],
    plan: changes && reference ? retuningPlan(reference, strings, set ? { set, scaleLength } : undefined) : null,
    barres: straightBarres(neck, key),
    scale: { name: `${tonic} ${name}`, degrees, open: openDegrees(board, degrees), places: placesOf(board, degrees) },
    neighbours: neighbours(board, near), run: longestRun(board, near),
    chords: chordsOfKey(soundingKey).map(wish => ({ ...wish, shapes: findShapes(board, wish).map(shape => ({ ...shape, sentence: shapeSentence(shape) })) })),
    load, loadSentence: load ? loadSentence(load) : 'No gauges are known for this instrument; name its strings to see their load.',
    cautions: load ? cautionsOf(strings, scaleLength, load) : [], loadNote: SPREAD_NOTE,
  }
}
