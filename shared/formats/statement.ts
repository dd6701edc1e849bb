import { fifthsOf, midiOfText, noteName, parsePitch, pitchLabel, STEPS } from '../score/pitch'
import { STANDARD_TUNING } from '../score/create'
import { capoOffset, raisedKey } from '../score/sounding'
import type { Capo, Head, Key, Score } from '../score/types'
import { contextOf } from '../score/context'

/**
 * Whatever leaves the product says how the instrument is tuned and where the capo sits. Low to high with octaves, changed
 * strings by their circled number (Aaron Shearer Foundation, "Scordatura"; circled = string is common practice).
 */

/** "⑥" for string 6, 1 to 10. */
export const circled = (string: number): string => String.fromCodePoint(0x2460 + string - 1)

const label = (pitch: string): string => {
  const spelling = parsePitch(pitch)
  return spelling ? pitchLabel(spelling) : pitch
}

/** Strings of a six-string guitar that differ from standard at their own place, lowest first: ["⑥ = C2", …]. Other instruments have no such list. */
export function changedStrings(head: Pick<Head, 'strings'>): string[] {
  if (head.strings.length !== STANDARD_TUNING.length) return []
  return head.strings.flatMap((open, index) => {
    const standard = STANDARD_TUNING[index]
    if (!standard || midiOfText(open.pitch) === midiOfText(standard.pitch)) return []
    return [`${circled(index + 1)} = ${label(open.pitch)}`]
  }).reverse()
}

/** The pitches low to high as the strings lie: "C2 G2 D3 G3 C4 D4". */
export const openPitches = (head: Pick<Head, 'strings'>): string => head.strings.map(open => label(open.pitch)).reverse().join(' ')

/** Name of a key: "E", "F♯ minor". */
export function keyName(key: Key): string {
  const position = key.fifths + (key.mode === 'minor' ? 3 : 0)
  const alter = Math.floor((position + 1) / 7)
  const step = STEPS.find(each => fifthsOf({ step: each, alter }) === position) ?? 'C'
  return noteName({ step, alter }) + (key.mode === 'minor' ? ' minor' : '')
}

function stringList(strings: readonly number[]): string {
  const sorted = [...strings].sort((a, b) => a - b)
  const low = sorted[0] ?? 0
  const high = sorted.at(-1) ?? 0
  const isRun = sorted.length > 2 && high - low === sorted.length - 1
  return isRun ? `strings ${low} to ${high}` : `${sorted.length > 1 ? 'strings' : 'string'} ${sorted.join(', ')}`
}

function capoWords(capo: Capo, head: Head, key: Key | undefined): string {
  if (capo.strings && capo.strings.length < head.strings.length) return `capo ${capo.fret} on ${stringList(capo.strings)}`
  const sounds = key && capo.fret === capoOffset(head) ? `, sounds ${keyName(raisedKey(key, capo.fret))}` : ''
  return `capo ${capo.fret}${sounds}`
}

const capitalised = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

/** "Capo 2, sounds E" or null where there is none. */
export function capoStatement(head: Head, key?: Key): string | null {
  return head.capos.length ? capitalised(head.capos.map(capo => capoWords(capo, head, key)).join('; ')) : null
}

/**
 * The whole statement in one line: "Tuning C2 G2 D3 G3 C4 D4 (⑥ = C2, ⑤ = G2, ② = C4, ① = D4). Capo 2, sounds E."
 * @param key the key as written (as if there were no capo); without it the capo says no sounding key
 */
export function tuningStatement(head: Head, key?: Key): string {
  const changes = changedStrings(head)
  const isStandard = head.strings.length === STANDARD_TUNING.length && changes.length === 0
  const tuning = `${isStandard ? 'Standard tuning' : 'Tuning'} ${openPitches(head)}${changes.length ? ` (${changes.join(', ')})` : ''}.`
  const short = head.strings.flatMap((open, index) => open.from ? [`String ${index + 1} starts at fret ${open.from}.`] : [])
  const capo = capoStatement(head, key)
  return [tuning, ...short, ...(capo ? [`${capo}.`] : [])].join(' ')
}

/** The statement of a score, the sounding key taken from its first bar. */
export const scoreStatement = (score: Score): string => tuningStatement(score.head, contextOf(score, 0).key)
