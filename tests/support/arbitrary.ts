import fc from 'fast-check'
import { commands } from '../../shared/commands/registry'
import { createIds, type EditorState, type IdSource } from '../../shared/editor'
import { fraction } from '../../shared/score/fraction'
import { BASES, type Base, type Key, type Meter, type Note, type Score, type ScoreEvent, type Tuplet, type Voice } from '../../shared/score/types'
import { perform } from './checkCommand'
import { TEST_HEAD } from './score'

/** Fractions as they come up in scores: denominators of dotted and tuplet lengths. */
export const fractions = fc.tuple(fc.integer({ min: -500, max: 500 }), fc.constantFrom(1, 2, 3, 4, 5, 6, 7, 8, 12, 16, 24, 32, 64, 96))
  .map(([n, d]) => fraction(n, d))

export const meters: fc.Arbitrary<Meter> = fc.constantFrom(
  { beats: 4, unit: 4 }, { beats: 3, unit: 4 }, { beats: 2, unit: 2 }, { beats: 6, unit: 8 }, { beats: 9, unit: 8 }, { beats: 7, unit: 8 }, { beats: 5, unit: 4 },
)
export const keys: fc.Arbitrary<Key> = fc.record({ fifths: fc.integer({ min: -7, max: 7 }), mode: fc.constantFrom('major', 'minor') }, { noNullPrototype: true })

type Draft = Omit<Note, 'id'>
const note: fc.Arbitrary<Draft> = fc.record({
  string: fc.integer({ min: 1, max: 6 }),
  fret: fc.integer({ min: 0, max: 20 }),
  dead: fc.constantFrom(undefined, undefined, undefined, true as const),
  link: fc.constantFrom(undefined, undefined, 'tie' as const, 'hammer-on' as const, 'pull-off' as const),
  ring: fc.constantFrom(undefined, undefined, 'let-ring' as const, 'written' as const),
}, { requiredKeys: ['string', 'fret'] }).map(dense)

const event = fc.record({
  base: fc.constantFrom<Base>(...BASES.slice(1, 6)),
  dots: fc.constantFrom(0, 0, 0, 1, 2),
  notes: fc.uniqueArray(note, { maxLength: 3, selector: each => each.string }),
  triplet: fc.boolean(),
})

/** Without keys that say undefined: what is stored has none. */
function dense<T extends object>(value: T): T {
  return Object.fromEntries(Object.entries(value).filter(([, each]) => each !== undefined)) as T
}

const bar = fc.record({
  meter: fc.option(meters, { nil: undefined, freq: 3 }),
  key: fc.option(keys, { nil: undefined, freq: 3 }),
  tempo: fc.option(fc.constant({ base: 4 as const, dots: 0, perMinute: 90 }), { nil: undefined, freq: 4 }),
  length: fc.option(fc.constant(fraction(1, 8)), { nil: undefined, freq: 4 }),
  repeatStart: fc.constantFrom(undefined, undefined, true as const),
  upper: fc.array(event, { maxLength: 5 }),
  lower: fc.array(event, { maxLength: 3 }),
})

/** Valid scores of up to six bars with ids of their own: chords, rests, triplets, links, changes of meter and key, overfull and empty bars. */
export const scores: fc.Arbitrary<Score> = fc.array(bar, { minLength: 1, maxLength: 6 }).map((drafts) => {
  const ids = createIds('g')
  const bars = drafts.map(({ upper, lower, ...stated }) => dense({
    id: ids.next(), ...stated, voices: dense({ upper: voiceOf(upper, ids), lower: voiceOf(lower, ids) }),
  }))
  return { head: TEST_HEAD, bars }
})

function voiceOf(drafts: readonly { base: Base, dots: number, notes: readonly Draft[], triplet: boolean }[], ids: IdSource): Voice | undefined {
  if (!drafts.length) return undefined
  const tuplets: Tuplet[] = []
  let inside = false
  const events = drafts.map(({ base, dots, notes, triplet }): ScoreEvent => {
    if (triplet && !inside) tuplets.push({ id: ids.next(), actual: 3, normal: 2, base })
    inside = triplet
    return {
      id: ids.next(),
      length: triplet ? { base, dots, tuplets: [tuplets.at(-1)!.id] } : { base, dots },
      notes: notes.map(each => ({ ...each, id: ids.next() })),
    }
  })
  return tuplets.length ? { events, tuplets } : { events }
}

/** Names of commands in any order. */
export const commandRuns = (maxLength = 40, minLength = 1): fc.Arbitrary<readonly string[]> =>
  fc.array(fc.constantFrom(...commands.map(command => command.id)), { minLength, maxLength })

/** Runs commands one after the other and gives every state on the way, the first included. */
export function play(start: EditorState, run: readonly string[], ids: IdSource): readonly EditorState[] {
  const states = [start]
  for (const id of run) states.push(perform(states.at(-1)!, id, ids))
  return states
}
