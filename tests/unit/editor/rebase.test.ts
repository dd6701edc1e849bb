import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { commands, isIntent, runCommand } from '../../../shared/commands/registry'
import { applyEdits, isRefused } from '../../../shared/edits'
import { applyTransaction, createIds, openEditor, type EditorState } from '../../../shared/editor'
import { rebase, rebaseOnto, takeMine, type Conflict } from '../../../shared/editor/rebase'
import type { LoggedTransaction } from '../../../shared/editor/saving'
import { isEqual } from '../../../shared/score/equal'
import { validateScore } from '../../../shared/score/validate'
import { VOICE_NAMES, type Score, type Voice, type VoiceName } from '../../../shared/score/types'
import { commandRuns, scores } from '../../support/arbitrary'
import { parseScore, parseState, printScore } from '../../support/score'

interface Work { readonly state: EditorState, readonly sent: readonly LoggedTransaction[] }

/** What one person's commands become, and what they would send. */
function work(start: EditorState, run: readonly string[], prefix: string): Work {
  const ids = createIds(prefix)
  return run.reduce(({ state, sent }: Work, id) => {
    const result = runCommand(id, state, ids)
    if (!result || isIntent(result)) return { state, sent }
    const after = applyTransaction(state, result, 0)
    const edits = after.score === state.score ? [] : result.edits ?? []
    return { state: after, sent: edits.length ? [...sent, { label: result.label, edits }] : sent }
  }, { state: start, sent: [] })
}

const replay = (score: Score, sent: readonly LoggedTransaction[]): Score => {
  const applied = applyEdits(score, sent.flatMap(each => each.edits))
  if (isRefused(applied)) throw new Error(applied.refused.message)
  return applied.score
}

const voiceIn = (score: Score, bar: string, voice: VoiceName): Voice | null => score.bars.find(each => each.id === bar)?.voices[voice] ?? null

/** Commands that stay in their bar, for work on different bars. */
const LOCAL = commands.map(command => command.id).filter(id => /^(fret|length|note\.(dead|tie|rest|delete$|letRing)|bar\.(pad|meant|repeat))/.test(id))
const localRuns = fc.array(fc.constantFrom(...LOCAL), { minLength: 1, maxLength: 12 })

const onBar = (score: Score, index: number): EditorState => {
  const bar = score.bars[index]!
  return { ...openEditor(score), selection: { cursor: { barId: bar.id, voice: 'upper', eventId: bar.voices.upper?.events[0]?.id ?? 'end', string: 2 }, anchor: null } }
}

describe('two people at work', { timeout: 60_000 }, () => {
  it('on different bars: everything of both is there, without a question', () => {
    fc.assert(fc.property(scores.filter(score => score.bars.length > 1), localRuns, localRuns, (base, one, other) => {
      const theirs = work(onBar(base, 0), one, 'a')
      const mine = work(onBar(base, 1), other, 'b')
      const { score, transactions, conflicts } = rebase(base, [{ transactions: theirs.sent }], mine.sent)
      expect(conflicts).toEqual([])
      // Edits on voices that others did not touch go through unchanged.
      expect(transactions).toEqual(mine.sent)
      expect(score.bars[0]).toEqual(theirs.state.score.bars[0])
      expect(score.bars[1]).toEqual(mine.state.score.bars[1])
      // In the other order the same comes out.
      expect(rebase(base, [{ transactions: mine.sent }], theirs.sent).score).toEqual(score)
    }), { numRuns: 100 })
  })

  it('anywhere: what comes out is valid and is what the server gets', () => {
    fc.assert(fc.property(scores, commandRuns(25), commandRuns(25), (base, one, other) => {
      const theirs = work(openEditor(base), one, 'a')
      const mine = work(openEditor(base), other, 'b')
      const rebased = rebase(base, [{ transactions: theirs.sent }], mine.sent)
      expect(validateScore(rebased.score)).toBeNull()
      expect(replay(theirs.state.score, rebased.transactions)).toEqual(rebased.score)
      expect(JSON.parse(JSON.stringify(rebased))).toEqual(rebased)
    }), { numRuns: 100 })
  })

  it('anywhere: no voice of either is lost, it stands in the score or is handed back', () => {
    fc.assert(fc.property(scores, commandRuns(25), commandRuns(25), (base, one, other) => {
      const theirs = work(openEditor(base), one, 'a')
      const mine = work(openEditor(base), other, 'b')
      const { score, conflicts } = rebase(base, [{ transactions: theirs.sent }], mine.sent)
      for (const bar of mine.state.score.bars) {
        for (const name of VOICE_NAMES) {
          const reading = bar.voices[name]
          if (!reading || isEqual(reading, voiceIn(base, bar.id, name))) continue
          const kept = isEqual(voiceIn(score, bar.id, name), reading) || conflicts.some(conflict => holds(conflict, bar.id, name, reading))
          expect(kept, `mine: ${bar.id} ${name}`).toBe(true)
        }
      }
      for (const bar of theirs.state.score.bars) {
        for (const name of VOICE_NAMES) {
          const reading = bar.voices[name]
          if (!reading || isEqual(reading, voiceIn(base, bar.id, name))) continue
          // Theirs stands in the score; only what I did upon the same reading may have followed.
          const follows = mine.sent.some(each => each.edits.some(edit => edit.kind === 'replaceVoice' && edit.bar === bar.id && edit.voice === name && isEqual(edit.before, reading)))
          expect(isEqual(voiceIn(score, bar.id, name), reading) || follows, `theirs: ${bar.id} ${name}`).toBe(true)
        }
      }
    }), { numRuns: 100 })
  })

  it('with nothing missed: mine are the very same objects', () => {
    fc.assert(fc.property(scores, commandRuns(25), (base, run) => {
      const mine = work(openEditor(base), run, 'b')
      const rebased = rebaseOnto(base, mine.sent, base)
      expect(rebased.conflicts).toEqual([])
      // Bars taken away together may go one by one; all else is untouched.
      rebased.transactions.forEach((transaction, index) => {
        if (!mine.sent[index]!.edits.some(edit => edit.kind === 'removeBars' && edit.bars.length > 1)) expect(transaction).toBe(mine.sent[index])
      })
      expect(rebased.score).toEqual(mine.state.score)
    }), { numRuns: 100 })
  })
})

function holds(conflict: Conflict, bar: string, voice: VoiceName, reading: Voice): boolean {
  if (conflict.kind === 'voice') return conflict.bar === bar && conflict.voice === voice && isEqual(conflict.mine, reading)
  return conflict.kind === 'bars' && conflict.mine.some(each => each.id === bar && isEqual(each.voices[voice], reading))
}

describe('where both changed the same', () => {
  const base = parseScore('3/0q 3/2q ; 6/0h | 3/4w | 3/5w')
  const state = (cursor: string) => parseState(cursor)
  const mine = work(state('^3/0q 3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.7'], 'b').sent

  it('a voice: theirs stands, mine is handed back and can be taken', () => {
    const theirs = work(state('3/0q ^3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.9'], 'a').sent
    const { score, transactions, conflicts } = rebase(base, [{ transactions: theirs }], mine)
    expect(printScore(score)).toBe('3/0q 3/9q ; 6/0h | 3/4w | 3/5w')
    expect(transactions).toEqual([])
    expect(conflicts).toMatchObject([{ kind: 'voice', bar: 'b1', voice: 'upper' }])
    const taken = applyEdits(score, takeMine(score, conflicts[0]!)!)
    expect(!isRefused(taken) && printScore(taken.score)).toBe('3/7q 3/2q ; 6/0h | 3/4w | 3/5w')
    const back = !isRefused(taken) && applyEdits(taken.score, taken.inverses)
    expect(back && !isRefused(back) && back.score).toEqual(score)
  })

  it('different voices of one bar are no conflict', () => {
    const theirs = work(state('3/0q 3/2q ; ^6/0h | 3/4w | 3/5w'), ['fret.3'], 'a').sent
    const { score, conflicts } = rebase(base, [{ transactions: theirs }], mine)
    expect(printScore(score)).toBe('3/7q 3/2q ; 6/3h | 3/4w | 3/5w')
    expect(conflicts).toEqual([])
  })

  it('the same change on both sides is none', () => {
    const { score, conflicts, transactions } = rebase(base, [{ transactions: mine }], mine)
    expect([conflicts, transactions]).toEqual([[], []])
    expect(printScore(score)).toBe('3/7q 3/2q ; 6/0h | 3/4w | 3/5w')
  })

  it('my whole work on that voice is handed back as it ended', () => {
    const theirs = work(state('3/0q ^3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.9'], 'a').sent
    const more = work(state('^3/0q 3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.7', 'length.eighth', 'cursor.next', 'note.dead', 'cursor.nextBar', 'fret.1'], 'b').sent
    const { score, conflicts, transactions } = rebase(base, [{ transactions: theirs }], more)
    expect(printScore(score)).toBe('3/0q 3/9q ; 6/0h | 3/1w | 3/5w')
    expect(conflicts).toHaveLength(1)
    expect(conflicts[0]).toMatchObject({ mine: { events: [{ length: { base: 8 }, notes: [{ fret: 7 }] }, { notes: [{ dead: true }] }] } })
    expect(transactions.map(each => each.label)).toEqual(['Enter fret 1'])
  })

  it('what I took back myself is no question', () => {
    const theirs = work(state('3/0q ^3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.9'], 'a').sent
    const undone = work(state('^3/0q 3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.7', 'history.undo'], 'b').sent
    expect(undone).toHaveLength(2)
    const { score, conflicts, transactions } = rebase(base, [{ transactions: theirs }], undone)
    expect(printScore(score)).toBe('3/0q 3/9q ; 6/0h | 3/4w | 3/5w')
    expect([conflicts, transactions]).toEqual([[], []])

    const again = work(state('^3/0q 3/2q ; 6/0h | 3/4w | 3/5w'), ['fret.7', 'history.undo', 'fret.5'], 'b').sent
    expect(rebase(base, [{ transactions: theirs }], again).conflicts).toMatchObject([{ kind: 'voice', mine: { events: [{ notes: [{ fret: 5 }] }, {}] } }])

    const called = (before: string, after: string): LoggedTransaction => ({ label: 'Title', edits: [{ kind: 'patchHead', before: { title: before }, after: { title: after } }] })
    const { title } = base.head
    expect(rebase(base, [{ transactions: [called(title, 'Theirs')] }], [called(title, 'Mine'), called('Mine', title)]).conflicts).toEqual([])
  })

  it('a bar they took away: what I wrote there is handed back and can return', () => {
    const theirs = work(state('^3/0q 3/2q ; 6/0h | 3/4w | 3/5w'), ['bar.remove'], 'a').sent
    const { score, conflicts } = rebase(base, [{ transactions: theirs }], mine)
    expect(conflicts).toMatchObject([{ kind: 'voice', bar: 'b1', gone: true, theirs: null }])
    const taken = applyEdits(score, takeMine(score, conflicts[0]!)!)
    expect(!isRefused(taken) && printScore(taken.score)).toContain('3/7q 3/2q')
  })

  it('a bar I took away and they changed stays, and I am asked', () => {
    const removal = work(state('^3/0q 3/2q ; 6/0h | 3/4w | 3/5w'), ['bar.remove'], 'b').sent
    const { score, conflicts } = rebase(base, [{ transactions: mine }], removal)
    expect(printScore(score)).toContain('3/7q 3/2q')
    expect(conflicts).toMatchObject([{ kind: 'bars', what: 'removed', mine: [{ id: 'b1' }] }])
    const taken = applyEdits(score, takeMine(score, conflicts[0]!)!)
    expect(!isRefused(taken) && taken.score.bars.map(bar => bar.id)).toEqual(['b2', 'b3'])
  })

  it('bars I put in behind one that is gone stay at its place', () => {
    const inserted = work(state('3/0q 3/2q ; 6/0h | ^3/4w | 3/5w'), ['bar.insertAfter', 'fret.2'], 'b').sent
    const theirs = work(state('3/0q 3/2q ; 6/0h | ^3/4w | 3/5w'), ['bar.remove'], 'a').sent
    expect(printScore(rebase(base, [{ transactions: theirs }], inserted).score)).toBe('3/0q 3/2q ; 6/0h | 3/2w | 3/5w')
  })

  it('fields of the head are units of their own', () => {
    const patch = (before: object, after: object): LoggedTransaction => ({ label: 'Head', edits: [{ kind: 'patchHead', before, after }] })
    const { title, composer } = base.head
    const theirs = [patch({ title }, { title: 'Theirs' })]
    const both = [patch({ title, composer }, { title: 'Mine', composer: 'A. Harper' })]
    const { score, conflicts, transactions } = rebase(base, [{ transactions: theirs }], both)
    expect(score.head).toMatchObject({ title: 'Theirs', composer: 'A. Harper' })
    expect(conflicts).toEqual([{ kind: 'field', bar: null, field: 'title', mine: 'Mine', theirs: 'Theirs' }])
    expect(transactions[0]?.edits).toEqual([{ kind: 'patchHead', before: { composer }, after: { composer: 'A. Harper' } }])
    const taken = applyEdits(score, takeMine(score, conflicts[0]!)!)
    expect(!isRefused(taken) && taken.score.head.title).toBe('Mine')
  })

  it('notes that no longer fit their instrument are handed back', () => {
    const strings = base.head.strings
    const four = parseScore('^').head.strings.slice(0, 5)
    const start = parseScore('3/0q')
    const theirs: LoggedTransaction[] = [{ label: 'Tuning', edits: [{ kind: 'patchHead', before: { strings }, after: { strings: four } }] }]
    const low = work(parseState('^6:3/0q'), ['fret.3'], 'b').sent
    const { score, conflicts } = rebase(start, [{ transactions: theirs }], low)
    expect(printScore(score)).toBe('3/0q')
    expect(conflicts).toMatchObject([{ kind: 'voice', bar: 'b1', voice: 'upper' }])
  })
})
