import { capoFret, openMidi } from '../score/sounding'
import type { Head, Key } from '../score/types'

/** An instrument as it is tuned and capoed: all that a chart is worked out from. */
export type Neck = Pick<Head, 'strings' | 'capos' | 'instrument'>

/** The same in numbers, string 1 first. */
export interface Board {
  /** Sounding open pitches, MIDI, capo on. */
  readonly opens: readonly number[]
  /** Where each string is stopped by a capo or begins, in frets from the nut. */
  readonly stops: readonly number[]
  readonly lastFret: number
  /** Millimetres. */
  readonly scaleLength: number
}

/** @throws RangeError when a pitch is none */
export const boardOf = (neck: Neck): Board => ({
  opens: neck.strings.map((_, index) => openMidi(neck, index + 1)),
  stops: neck.strings.map((_, index) => capoFret(neck, index + 1)),
  lastFret: neck.instrument.frets,
  scaleLength: neck.instrument.scaleLength,
})

/** 0 to 11 above C, of any whole pitch or interval. */
export const chromaOf = (midi: number): number => ((midi % 12) + 12) % 12

/** Chroma of a key's tonic: seven half steps to each step on the line of fifths, the relative minor nine above its major. */
export const tonicOf = ({ fifths, mode }: Key): number => chromaOf(7 * fifths + (mode === 'minor' ? 9 : 0))

/** A key moved by half steps, five flats to six sharps; as it was where it comes to the same notes. */
export const movedKey = (key: Key, halfSteps: number): Key =>
  (chromaOf(halfSteps) === 0 ? key : { fifths: chromaOf(key.fifths + 7 * halfSteps + 5) - 5, mode: key.mode })

/** The key, five flats to six sharps, with this tonic. */
export const keyOf = (tonic: number, mode: Key['mode']): Key =>
  movedKey({ fifths: mode === 'minor' ? -3 : 0, mode }, tonic)
