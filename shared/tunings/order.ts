import { bestReference, referenceCost, type Reference, type Standing, type StringReference } from './references'

/** A string on its way from one pitch to another, MIDI. */
export interface Move { readonly string: number, readonly from: number, readonly to: number }

export interface OrderedMove {
  readonly move: Move
  readonly reference: Reference
  /** For a tone: a string not yet moved that gives the pitch too, to be used where no tone is at hand. */
  readonly otherwise: StringReference | null
}

/** For each move, the best that each other string can give it as it stands, worked out once: unchanged or waiting at 0, done at 1. */
type Offers = readonly (readonly [string: number, waiting: StringReference | null, done: StringReference | null])[]

function offersFor(move: Move, moves: readonly Move[], still: readonly Standing[]): Offers {
  const by = (standing: Standing) => bestReference(move.string, move.to, [standing])
  return [
    ...still.map(each => [-1, by(each), null] as const),
    ...moves.map(({ string, from, to }, index) => [index, by({ string, midi: from, trust: 'waiting' }), by({ string, midi: to, trust: 'done' })] as const),
  ]
}

const easier = (own: number) => (a: StringReference | null, b: StringReference | null): StringReference | null =>
  (a === null || (b !== null && referenceCost(b, own) < referenceCost(a, own) - 1e-9) ? b : a)

/** What one string is tuned by once those in `done` have moved (a bit for each move).
 * Where no string stays as it was, those still waiting go out of tune as the load changes: the first needs a tone to hold on to. */
function stepFor(move: Move, offers: Offers, done: number, isAdrift: boolean, name: (midi: number) => string): OrderedMove & { cost: number } {
  const found = offers.map(([index, waiting, after]) => (index >= 0 && done & (1 << index) ? after : waiting)).reduce(easier(move.string), null)
  if (!found || isAdrift) return { move, reference: { kind: 'tone', pitch: name(move.to) }, otherwise: found, cost: TONE_COST }
  return { move, reference: found, otherwise: null, cost: referenceCost(found, move.string) }
}

/** A reference tone is for where no string serves (ours). */
const TONE_COST = 6

/**
 * The order in which all references together are easiest. All loosening comes before any tightening, so that the load on the way is
 * never more than at the start or at the end. Exact, by dynamic programming over which strings are done; among equals the thickest first.
 * @param still strings that stay as they are
 * @param name writes a pitch for a reference tone
 */
export function orderMoves(moves: readonly Move[], still: readonly Standing[], name: (midi: number) => string): readonly OrderedMove[] {
  const loosening = moves.reduce((bits, move, index) => (move.to < move.from ? bits | (1 << index) : bits), 0)
  const all = (1 << moves.length) - 1
  const offers = moves.map(move => offersFor(move, moves, still))
  const known = new Map<number, { cost: number, steps: readonly OrderedMove[] }>()
  const best = (done: number): { cost: number, steps: readonly OrderedMove[] } => {
    const seen = known.get(done)
    if (seen) return seen
    const open = (loosening & ~done) || (all & ~done)
    let found: { cost: number, steps: readonly OrderedMove[] } | null = null
    for (let index = moves.length - 1; index >= 0; index -= 1) {
      if (!(open & (1 << index))) continue
      const { cost, ...step } = stepFor(moves[index]!, offers[index]!, done, still.length === 0 && done === 0, name)
      const rest = best(done | (1 << index))
      if (!found || cost + rest.cost < found.cost - 1e-9) found = { cost: cost + rest.cost, steps: [step, ...rest.steps] }
    }
    const result = found ?? { cost: 0, steps: [] }
    known.set(done, result)
    return result
  }
  return best(0).steps
}
