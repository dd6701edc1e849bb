import { midiOfText, pitchText } from '../score/pitch'
import type { OpenString } from '../score/types'
import { gaugeLabel } from './gauges'
import { CUTS, isGrave, loadOf, type Load, type StringLoad } from './load'
import { tuningLetters } from './parse'
import type { StringSet } from './sets'
import { spellTogether } from './spelling'
import { counted, numberWord, stringsWord } from './words'

export interface Caution {
  readonly kind: 'red' | 'amber' | 'slack' | 'advice'
  /** Strings it speaks of; none: all. */
  readonly strings: readonly number[]
  readonly text: string
}

const GRAVITY: Record<Caution['kind'], number> = { red: 0, amber: 1, slack: 2, advice: 3 }
const percent = (share: number): string => `${Math.round(share * 100)} percent`
/** Plain wire of any thickness breaks near the same pitch, so that a string which its steel won't bear is often past help. */
function betterText({ better, gauge, stress }: StringLoad): string {
  if (!better) return (stress ?? 0) >= CUTS.stressRed ? ' No other gauge bears it at this length.' : ''
  const kind = better.gauge.kind === 'plain' && gauge.kind !== 'plain' ? ' plain' : ''
  return ` A ${better.direction} string, ${gaugeLabel(better.gauge)}${kind}, would be at ${percent(better.share)}.`
}

function stringText({ string, share, stress, band }: StringLoad): string {
  const steel = `${percent(stress ?? 0)} of what its steel is sure to bear`
  if (band === 'slack') return `String ${string} goes slack at ${percent(share)} of its design tension: it may rattle, start sharp and drift.`
  if (band === 'red') return `String ${string} would carry ${(stress ?? 0) >= CUTS.stressRed ? steel : `${percent(share)} of its design tension`}: don’t tune this gauge there.`
  if (share < CUTS.low) return `String ${string} is loose at ${percent(share)} of its design tension: play it lightly.`
  const strain = (stress ?? 0) >= CUTS.stressAmber ? ` and ${steel}` : ''
  return `String ${string} carries ${percent(share)} of its design tension${strain}: raise it slowly, in small steps, your face turned away, since an old string can break.`
}

const stringCaution = (load: StringLoad): Caution[] =>
  (load.band === 'green' ? [] : [{ kind: load.band, strings: [load.string], text: stringText(load) + betterText(load) }])

export interface CapoAlternative { readonly capo: number, readonly strings: readonly OpenString[] }

/** The same sound from lower strings behind a capo (fret 1 to 7): the lowest with which no string is tighter than designed or
 * loose, else the lowest with which none is red or slack; null where there is none. */
export function capoAlternative(strings: readonly OpenString[], scaleLength: number, set: StringSet): CapoAlternative | null {
  const midis = strings.map(({ pitch }) => midiOfText(pitch))
  const lowered = [1, 2, 3, 4, 5, 6, 7].map((capo) => {
    const spelled = spellTogether(midis.map(midi => midi - capo))
    const lower = strings.map((open, index) => ({ ...open, pitch: pitchText(spelled[index]!) }))
    return { capo, strings: lower, load: loadOf(lower, scaleLength, set) }
  })
  const found = lowered.find(({ load }) => load.strings.every(({ band, share }) => band === 'green' && share < 1.001))
    ?? lowered.find(({ load }) => !isGrave(load) && load.strings.every(({ band }) => band !== 'slack'))
  return found ? { capo: found.capo, strings: found.strings } : null
}

/** What a person should know before they turn a peg, gravest first; empty where all is in the green. */
export function cautionsOf(strings: readonly OpenString[], scaleLength: number, load: Load): readonly Caution[] {
  const cautions = load.strings.flatMap(stringCaution)
  if (load.band === 'red') cautions.unshift({ kind: 'red', strings: [], text: `All strings together pull ${Math.round(load.pounds)} pounds, ${percent(load.share)} of what the set is made for: ask a repairer whether this instrument bears it.` })
  const lower = isGrave(load) ? capoAlternative(strings, scaleLength, load.set) : null
  if (lower) cautions.push({ kind: 'advice', strings: [], text: `${tuningLetters(lower.strings)} with a capo at fret ${lower.capo} sounds the same and spares the strings.` })
  const heavier = load.strings.filter(each => each.better?.direction === 'heavier').map(each => each.string)
  if (heavier.length) cautions.push({ kind: 'advice', strings: heavier, text: `Ask a repairer before you fit ${heavier.length === 1 ? 'a heavier' : 'heavier'} ${stringsWord(heavier)}: the slots at the nut may be too narrow and the neck feels the change.` })
  return cautions.sort((a, b) => GRAVITY[a.kind] - GRAVITY[b.kind])
}

/** One line for a list: "91 percent of the set’s tension", "112 percent of the set’s tension, two strings in the red". */
export function loadSentence(load: Load): string {
  const count = (band: string) => load.strings.filter(each => each.band === band).length
  const [red, slack] = [count('red'), count('slack')]
  return [`${percent(load.share)} of the set’s tension`, red ? `${counted(red, 'string')} in the red` : '',
    slack ? `${red ? numberWord(slack) : counted(slack, 'string')} slack` : ''].filter(Boolean).join(', ')
}
