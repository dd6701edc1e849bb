import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { applyTransaction, createIds, openEditor, redoTransaction, undoTransaction, type EditorState } from '../../../shared/editor'
import { validateScore } from '../../../shared/score/validate'
import { commandRuns, play, scores } from '../../support/arbitrary'
import { checkLaws } from '../../support/checkCommand'

/** fast-check prints the seed and the shortest counterexample of a failing run. */
const RUNS = { numRuns: 100 }

const undoAll = (state: EditorState): EditorState => {
  let current = state
  for (let undo = undoTransaction(current); undo; undo = undoTransaction(current)) {
    const before = current.history.undo.length
    current = applyTransaction(current, undo, 0)
    expect(current.history.undo.length, current.notice ?? '').toBe(before - 1)
  }
  return current
}

const redoAll = (state: EditorState): EditorState => {
  let current = state
  for (let redo = redoTransaction(current); redo; redo = redoTransaction(current)) {
    const before = current.history.redo.length
    current = applyTransaction(current, redo, 0)
    expect(current.history.redo.length, current.notice ?? '').toBe(before - 1)
  }
  return current
}

const isHistory = (id: string): boolean => id.startsWith('history.')

describe('any run of commands', { timeout: 60_000 }, () => {
  it('keeps the score valid, and every step keeps the laws', () => {
    fc.assert(fc.property(scores, commandRuns(), (score, run) => {
      const states = play(openEditor(score), run, createIds('r'))
      for (const [step, id] of run.entries()) {
        const [before, after] = [states[step]!, states[step + 1]!]
        if (isHistory(id)) expect(validateScore(after.score)).toBeNull()
        else checkLaws(before, after)
      }
    }), RUNS)
  })

  it('never refuses its own edits', () => {
    fc.assert(fc.property(scores, commandRuns(), (score, run) => {
      for (const state of play(openEditor(score), run, createIds('r'))) expect(state.notice ?? '').not.toMatch(/meanwhile|any more|by now/)
    }), RUNS)
  })

  it('leaves the cursor on something that is there', () => {
    fc.assert(fc.property(scores, commandRuns(), (score, run) => {
      for (const { score: current, selection } of play(openEditor(score), run, createIds('r'))) {
        const cursors = selection.anchor ? [selection.cursor, selection.anchor] : [selection.cursor]
        for (const cursor of cursors) {
          const bar = current.bars.find(each => each.id === cursor.barId)
          expect(bar).toBeDefined()
          if (cursor.eventId !== 'end') expect(bar?.voices[cursor.voice]?.events.some(event => event.id === cursor.eventId)).toBe(true)
          expect(cursor.string).toBeGreaterThanOrEqual(1)
          expect(cursor.string).toBeLessThanOrEqual(current.head.strings.length)
        }
      }
    }), RUNS)
  })

  it('is undone to the start and redone to the end, exactly', () => {
    fc.assert(fc.property(scores, commandRuns(), (score, run) => {
      const start = openEditor(score)
      const end = play(start, run.filter(id => !isHistory(id)), createIds('r')).at(-1)!
      const back = undoAll(end)
      expect(back.score).toEqual(score)
      expect(redoAll(back).score).toEqual(end.score)
    }), RUNS)
  })
})
