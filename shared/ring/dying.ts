import { soundingMidi } from '../score/sounding'
import type { Head, Note } from '../score/types'

/**
 * Seconds until a plucked note has died away by 60 dB. A string's partials decay faster the higher it sounds (Fletcher and
 * Rossing, The Physics of Musical Instruments, 2nd ed., §2.12: damping by air, by the string itself and at its ends all grow
 * with frequency). The figures are ours, for steel strings: 12 s at E2, half of that two octaves higher, and a fretted note
 * three quarters of an open one, because flesh behind the fret takes part of it. Dead notes are a thud of 0.12 s.
 */
const E2 = 40
const SECONDS_AT_E2 = 12
const HALF_STEPS_TO_HALVE = 24
const FRETTED = 0.75
const DEAD_SECONDS = 0.12

/** No finger holds it: an open string or a natural harmonic. */
export const isOpen = (note: Pick<Note, 'fret' | 'harmonic' | 'dead'>): boolean => !note.dead && (note.fret === 0 || note.harmonic !== undefined)

/** @param midi sounding pitch */
export const secondsToDie = (midi: number, open: boolean): number =>
  SECONDS_AT_E2 * 2 ** ((E2 - midi) / HALF_STEPS_TO_HALVE) * (open ? 1 : FRETTED)

export const secondsToDieOf = (head: Head, note: Note): number =>
  note.dead ? DEAD_SECONDS : secondsToDie(soundingMidi(head, note), isOpen(note))
