import { midiOfText, parsePitch, pitchLabel, pitchText } from '../score/pitch'
import type { OpenString } from '../score/types'
import { orderMoves, type Move } from './order'
import { bestReference, referenceCost, referenceText, type Reference, type Standing, type StringReference } from './references'
import type { StringSet } from './sets'
import { spellTogether } from './spelling'
import { tension, wholeLengthMidi } from './tension'
import { capitalised, counted } from './words'

export interface RetuneStep {
  readonly string: number
  readonly from: string
  readonly to: string
  readonly halfSteps: number
  readonly hear: Reference
  /** Where `hear` is a tone: a string that serves where no tone is at hand. */
  readonly otherwise: StringReference | null
  /** Pounds on all strings once this one is done; null without a set of strings. */
  readonly pounds: number | null
  readonly sentence: string
}

export interface Check { readonly string: number, readonly hear: Reference | null, readonly sentence: string }

export interface RetuningPlan {
  readonly steps: readonly RetuneStep[]
  /** Over all strings once more, since the neck moves: first what can be believed, each later one by those before it. */
  readonly finalPass: readonly Check[]
  /** An estimate. */
  readonly seconds: number
  /** Most that all strings pull together on the way, pounds; never above the greater of start and end. */
  readonly peakPounds: number | null
  readonly summary: string
}

/** Seconds of a calm player (ours): about a minute for three strings, as players report of a retuning (adhdguitarist.blogspot.com). */
const SECONDS = { string: 8, halfStep: 2, check: 4 } as const

const label = (pitch: string): string => {
  const spelling = parsePitch(pitch)
  return spelling ? pitchLabel(spelling) : pitch
}

function approach(halfSteps: number, to: string): string {
  if (halfSteps < 0) return `Loosen it past ${label(to)}, then come up to it.`
  const slowly = halfSteps > 1 ? 'Raise it slowly, a half step at a time' : 'Raise it slowly'
  return `${slowly}; if it goes past ${label(to)}, loosen it below and come up again.`
}

function stepSentence(string: number, from: string, to: string, halfSteps: number, hear: Reference, otherwise: StringReference | null): string {
  const move = `String ${string} ${halfSteps < 0 ? 'down' : 'up'} ${counted(Math.abs(halfSteps), 'half step')}, ${label(from)} to ${label(to)}`
  const spare = otherwise ? ` (without one: ${referenceText(otherwise)}, before that string moves)` : ''
  return `${move}: ${referenceText(hear)}${spare}. ${approach(halfSteps, to)}`
}

/** Pounds on all strings at these pitches. */
function pull(midis: readonly number[], scaleLength: number, set: StringSet): number {
  return set.gauges.reduce((sum, gauge, index) => sum + tension(gauge, scaleLength, midis[index]!)!, 0)
}

/** Checks chained from what can be believed: each string by the easiest reference among those already checked. */
function finalPass(strings: readonly OpenString[], anchors: readonly number[], firstTone: number | null): Check[] {
  const midis = strings.map(({ pitch }) => midiOfText(pitch))
  const toneOnly = firstTone === null ? [] : [firstTone]
  const checked: Standing[] = [...anchors, ...toneOnly].map(string => ({ string, midi: midis[string - 1]!, trust: 'unchanged' }))
  const checks: Check[] = checked.map(({ string }) => {
    const hear = firstTone === null ? null : { kind: 'tone' as const, pitch: strings[string - 1]!.pitch }
    return { string, hear, sentence: hear ? `String ${string}: ${referenceText(hear)}.` : `String ${string}: it was not moved; trust it, or take ${label(strings[string - 1]!.pitch)} from a tone.` }
  })
  while (checked.length < strings.length) {
    const next = strings.map((_, index) => index + 1).filter(string => !checked.some(each => each.string === string))
      .map(string => ({ string, hear: bestReference(string, midis[string - 1]!, checked) }))
      .reduce((best, each) => (cost(each) < cost(best) ? each : best))
    const hear: Reference = next.hear ?? { kind: 'tone', pitch: strings[next.string - 1]!.pitch }
    checks.push({ string: next.string, hear, sentence: `String ${next.string}: ${referenceText(hear)}.` })
    checked.push({ string: next.string, midi: midis[next.string - 1]!, trust: 'done' })
  }
  return checks
}

const cost = ({ string, hear }: { string: number, hear: StringReference | null }): number => (hear ? referenceCost(hear, string) : 100)

/**
 * How to get from one tuning to another: loosening before tightening, each string by a reference that sounds, then all once more.
 * Capos are off while tuning; fine tuning comes after fitting one.
 * @param from strings as they are, string 1 first
 * @param load what the instrument is strung with, to reckon the pull on the way
 * @throws RangeError when the tunings have different numbers of strings
 */
export function retuningPlan(from: readonly OpenString[], to: readonly OpenString[], load?: { readonly set: StringSet, readonly scaleLength: number }): RetuningPlan {
  if (from.length !== to.length) throw new RangeError(`${from.length} strings can't become ${to.length}`)
  const moves = to.map((open, index): Move => ({ string: index + 1, from: midiOfText(from[index]!.pitch), to: midiOfText(open.pitch) }))
  const changed = moves.filter(move => move.from !== move.to)
  const still = moves.filter(move => move.from === move.to).map(({ string, to: midi }): Standing => ({ string, midi, trust: 'unchanged' }))
  const ordered = orderMoves(changed, still, midi => to.find(open => midiOfText(open.pitch) === midi)?.pitch ?? pitchText(spellTogether([midi])[0]!))

  const whole = from.map(wholeLengthMidi)
  const pulls = load && load.set.gauges.length === to.length ? [pull(whole, load.scaleLength, load.set)] : null
  const steps = ordered.map(({ move, reference, otherwise }): RetuneStep => {
    whole[move.string - 1] = wholeLengthMidi(to[move.string - 1]!)
    if (pulls && load) pulls.push(pull(whole, load.scaleLength, load.set))
    const pitches = { from: from[move.string - 1]!.pitch, to: to[move.string - 1]!.pitch }
    const halfSteps = move.to - move.from
    return { string: move.string, ...pitches, halfSteps, hear: reference, otherwise, pounds: pulls?.at(-1) ?? null,
      sentence: stepSentence(move.string, pitches.from, pitches.to, halfSteps, reference, otherwise) }
  })
  const seconds = steps.length === 0 ? 0 : steps.reduce((sum, step) => sum + SECONDS.string + SECONDS.halfStep * Math.abs(step.halfSteps), SECONDS.check * to.length)
  return {
    steps, seconds, finalPass: steps.length === 0 ? [] : finalPass(to, still.map(each => each.string), still.length ? null : steps[0]!.string),
    peakPounds: pulls ? Math.max(...pulls) : null, summary: summaryOf(steps, seconds),
  }
}

function summaryOf(steps: readonly RetuneStep[], seconds: number): string {
  if (steps.length === 0) return 'Nothing to retune.'
  const time = seconds < 75 ? 'about a minute' : seconds < 105 ? 'about a minute and a half' : `about ${counted(Math.round(seconds / 60), 'minute')}`
  return `${capitalised(counted(steps.length, 'string'))} to retune, ${time}. Loosen before you tighten, end each string from below, then go over all strings once more, since the neck moves.`
}
