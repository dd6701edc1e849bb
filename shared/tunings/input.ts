import { midiOf, parsePitch } from '../score/pitch'
import { OPEN_RANGE } from '../score/validate'
import type { Neck } from './board'
import { unitWeight } from './gauges'
import type { StringSet } from './sets'

/** What is wrong with an instrument, and in which field: "strings", "string 5", "capo 1", "scale length", "frets", "gauge 3". */
export interface InputProblem { readonly field: string, readonly problem: string }

function stringProblem(pitchText: string, from: number, frets: number, string: number): InputProblem | null {
  const field = `string ${string}`
  const pitch = parsePitch(pitchText)
  if (!pitch) return { field, problem: `String ${string}: “${pitchText}” is no pitch. Write a letter, # or b, and the octave: C2, F#3, Bb3.` }
  if (midiOf(pitch) < OPEN_RANGE.low) return { field, problem: `String ${string}: ${pitchText} is too low to be heard as a pitch; the lowest here is A0.` }
  if (midiOf(pitch) > OPEN_RANGE.high) return { field, problem: `String ${string}: ${pitchText} is higher than any string bears; the highest here is C7.` }
  if (!Number.isInteger(from) || from < 0 || from >= frets) return { field, problem: `String ${string} starts at fret ${from}; this neck has ${frets}.` }
  return null
}

function capoProblem({ fret, strings }: Neck['capos'][number], index: number, neck: Neck): InputProblem | null {
  const field = `capo ${index + 1}`
  if (!Number.isInteger(fret) || fret < 1) return { field, problem: `Capo ${index + 1}: fret ${fret} is none. A capo sits at fret 1 or higher.` }
  if (fret >= neck.instrument.frets) return { field, problem: `Capo ${index + 1}: fret ${fret} is beyond this neck of ${neck.instrument.frets} frets.` }
  if (strings?.length === 0) return { field, problem: `Capo ${index + 1} covers no string. Name at least one.` }
  const unknown = strings?.find(string => !Number.isInteger(string) || string < 1 || string > neck.strings.length)
  return unknown === undefined ? null : { field, problem: `Capo ${index + 1} covers string ${unknown}; this instrument has ${neck.strings.length}.` }
}

/** The first thing wrong with an instrument; null where a chart can be worked out. */
export function neckProblem(neck: Neck): InputProblem | null {
  const { strings, capos, instrument } = neck
  if (strings.length < 4 || strings.length > 10) return { field: 'strings', problem: `An instrument here has 4 to 10 strings, not ${strings.length}.` }
  if (!(instrument.scaleLength >= 300 && instrument.scaleLength <= 1000)) return { field: 'scale length', problem: `The scale length is ${instrument.scaleLength} mm; it lies between 300 and 1000.` }
  if (!Number.isInteger(instrument.frets) || instrument.frets < 5 || instrument.frets > 36) return { field: 'frets', problem: `A neck here has 5 to 36 frets, not ${instrument.frets}.` }
  return strings.map((open, index) => stringProblem(open.pitch, open.from ?? 0, instrument.frets, index + 1)).find(Boolean)
    ?? capos.map((capo, index) => capoProblem(capo, index, neck)).find(Boolean) ?? null
}

/** The first thing wrong with a set of strings for so many strings; null where loads can be reckoned. */
export function setProblem(set: StringSet, strings: number): InputProblem | null {
  if (set.gauges.length !== strings) return { field: 'gauges', problem: `The set has ${set.gauges.length} strings; this instrument has ${strings}.` }
  const unknown = set.gauges.findIndex(({ kind, inches }) => unitWeight(kind, inches) === null)
  return unknown < 0 ? null : { field: `gauge ${unknown + 1}`, problem: `String ${unknown + 1}: no weight is known for a ${set.gauges[unknown]!.kind} string of ${set.gauges[unknown]!.inches} inches.` }
}
