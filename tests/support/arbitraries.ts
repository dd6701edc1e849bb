import fc, { type Arbitrary } from 'fast-check'
import { fraction } from '../../shared/score/fraction'
import { capoFret } from '../../shared/score/sounding'
import { BASES, type Bar, type Base, type Capo, type Head, type Length, type Meter, type Note, type Score, type ScoreEvent, type Tuplet, type Voice } from '../../shared/score/types'

/** Random scores that are valid, for laws that hold of every score. Ids count up in the order of the score. */

const maybe = <T>(value: Arbitrary<T>): Arbitrary<T | undefined> => fc.option(value, { nil: undefined, freq: 3 })
const text = fc.oneof(fc.string({ maxLength: 12 }), fc.constantFrom('', 'Blind Mary', 'Sí Bheag & Sí Mhór <1691>', '“Tune”\n\tin \'parts\'')).map(value => value.replaceAll('\u0000', ''))
/** XML holds no control characters; whether they are dropped there is asked on its own. */
export const printable: Arbitrary<string> = text.filter(value => !/[\p{Cc}\uFFFE\uFFFF]/u.test(value.replace(/[\n\t]/g, '')))

const STRING_PITCHES = ['C2', 'C#2', 'D2', 'Eb2', 'E2', 'F#2', 'G2', 'A2', 'Bb2', 'B2', 'C3', 'D3', 'Eb3', 'F#3', 'G3', 'Ab3', 'A3', 'B3', 'C4', 'Db4', 'D4', 'E4', 'G4'] as const

export const headArbitrary: Arbitrary<Head> = fc.record({
  title: printable, composer: printable, arranger: printable, rights: printable, source: printable,
  ring: fc.constantFrom('written' as const, 'let-ring' as const),
  instrument: fc.record({ scaleLength: fc.constantFrom(647.7, 650, 628.65), frets: fc.integer({ min: 16, max: 24 }) }),
  pitches: fc.array(fc.constantFrom(...STRING_PITCHES), { minLength: 4, maxLength: 10 }),
  short: maybe(fc.record({ string: fc.nat(9), from: fc.integer({ min: 1, max: 5 }) })),
  full: maybe(fc.integer({ min: 1, max: 7 })),
  partial: maybe(fc.record({ fret: fc.integer({ min: 1, max: 7 }), strings: fc.uniqueArray(fc.integer({ min: 1, max: 4 }), { minLength: 1, maxLength: 4 }) })),
}).map(({ pitches, short, full, partial, ...head }) => {
  const capos: Capo[] = [...(full ? [{ fret: full }] : []), ...(partial ? [partial] : [])]
  const strings = pitches.map((pitch, index) => (short && short.string % pitches.length === index ? { pitch, from: short.from } : { pitch }))
  return { ...head, strings, capos }
})

type Draft<T> = Omit<T, 'id'>

function noteArbitrary(head: Head, string: number): Arbitrary<Draft<Note>> {
  const room = head.instrument.frets - capoFret(head, string)
  const plain = fc.record({ fret: fc.integer({ min: 0, max: room }) })
  const harmonic = fc.record({
    fret: fc.constantFrom(2.7, 3.2, 4, 5, 7, 9), harmonic: fc.record({ partial: fc.integer({ min: 2, max: 12 }) }),
  })
  return fc.record({
    place: fc.oneof({ weight: 5, arbitrary: plain }, { weight: 1, arbitrary: harmonic }),
    dead: maybe(fc.constant(true as const)), ring: maybe(fc.constantFrom('written' as const, 'let-ring' as const)),
    link: maybe(fc.constantFrom('tie' as const, 'hammer-on' as const, 'pull-off' as const)),
    spelling: maybe(fc.record({ step: fc.constantFrom('C', 'D', 'E', 'F', 'G', 'A', 'B'), alter: fc.integer({ min: -2, max: 2 }) })),
  }).map(({ place, ...rest }) => compact({ string, ...place, ...rest }) as Draft<Note>)
}

const compact = (value: object): object => Object.fromEntries(Object.entries(value).filter(([, each]) => each !== undefined))

const lengthArbitrary: Arbitrary<Length> = fc.record({ base: fc.constantFrom(...BASES.slice(1)), dots: fc.constantFrom(0, 0, 0, 1, 2, 3) })

function eventArbitrary(head: Head): Arbitrary<Draft<ScoreEvent>> {
  const strings = fc.uniqueArray(fc.integer({ min: 1, max: head.strings.length }), { maxLength: 3 })
  return fc.record({
    length: lengthArbitrary, hidden: fc.boolean(),
    notes: strings.chain(each => fc.tuple(...each.map(string => noteArbitrary(head, string)))),
  }).map(({ length, hidden, notes }) => ({ length, notes: notes as Note[], ...(hidden && !notes.length && { hidden: true as const }) }))
}

/** A stretch of events, within none, one or two tuplets. */
interface Cell { readonly tuplets: readonly Draft<Tuplet>[], readonly events: readonly Draft<ScoreEvent>[] }

function cellArbitrary(head: Head): Arbitrary<Cell> {
  const tuplet: Arbitrary<Draft<Tuplet>> = fc.record({
    actual: fc.constantFrom(2, 3, 3, 5, 7), normal: fc.constantFrom(2, 3, 4), base: fc.constantFrom(...BASES.slice(2, 6)),
  })
  return fc.record({
    tuplets: fc.oneof({ weight: 4, arbitrary: fc.constant([]) }, { weight: 1, arbitrary: fc.array(tuplet, { minLength: 1, maxLength: 2 }) }),
    events: fc.array(eventArbitrary(head), { minLength: 1, maxLength: 4 }),
  })
}

function voiceOf(cells: readonly Cell[], id: () => string): Voice {
  const declared: Tuplet[] = []
  const events = cells.flatMap(({ tuplets, events }) => {
    const inside = tuplets.map(tuplet => ({ id: id(), ...tuplet }))
    declared.push(...inside)
    return events.map((event): ScoreEvent => ({
      id: id(), ...event, notes: event.notes.map(note => ({ ...note, id: id() })),
      length: { ...event.length, ...(inside.length && { tuplets: inside.map(tuplet => tuplet.id) }) },
    }))
  })
  return { events, ...(declared.length && { tuplets: declared }) }
}

const meterArbitrary: Arbitrary<Meter> = fc.record({ beats: fc.integer({ min: 1, max: 12 }), unit: fc.constantFrom<Base>(2, 4, 8, 16) })

function barArbitrary(head: Head) {
  const voice = maybe(fc.array(cellArbitrary(head), { minLength: 1, maxLength: 3 }))
  return fc.record({
    meter: maybe(meterArbitrary),
    key: maybe(fc.record({ fifths: fc.integer({ min: -7, max: 7 }), mode: fc.constantFrom('major' as const, 'minor' as const) })),
    tempo: maybe(fc.record({ base: fc.constantFrom<Base>(2, 4, 8), dots: fc.constantFrom(0, 1), perMinute: fc.constantFrom(40, 72.5, 144) })),
    length: maybe(fc.constantFrom(fraction(1, 8), fraction(3, 4), fraction(5, 8), fraction(1))),
    repeatStart: maybe(fc.constant(true as const)), repeatEnd: maybe(fc.integer({ min: 2, max: 4 })),
    ring: maybe(fc.constantFrom('written' as const, 'let-ring' as const)),
    upper: voice, lower: voice, middle: maybe(voice.map(cells => cells ?? [])),
  })
}

/** A score of one to `bars` bars; every length can be written, voices may be over or under their bar. */
export function scoreArbitrary(bars = 4): Arbitrary<Score> {
  return headArbitrary.chain(head => fc.array(barArbitrary(head), { minLength: 1, maxLength: bars }).map((drafts) => {
    let count = 0
    const id = () => `r-${count++}`
    return {
      head,
      bars: drafts.map(({ upper, lower, middle, ...fields }): Bar => ({
        id: id(), ...compact(fields),
        voices: compact({ upper: upper && voiceOf(upper, id), lower: lower && voiceOf(lower, id), middle: middle?.length ? voiceOf(middle, id) : undefined }) as Bar['voices'],
      })),
    }
  }))
}
