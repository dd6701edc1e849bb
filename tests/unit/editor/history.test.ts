import { describe, expect, it } from 'vitest'
import { applyTransaction, createIds, openEditor, redoTransaction, sessionPrefix, settleSelection, undoTransaction, type EditorState } from '../../../shared/editor'
import type { Edit } from '../../../shared/edits'
import { parseScore, parseState, printState } from '../../support/score'

const title = (before: string, after: string): Edit => ({ kind: 'patchHead', before: { title: before }, after: { title: after } })
const start = parseState('^3/0q')
const first = start.score.head.title

const retitled = (state: EditorState, after: string, history?: 'merge' | 'skip', time = 5) =>
  applyTransaction(state, { label: `Call it ${after}`, edits: [title(state.score.head.title, after)], ...(history && { history }) }, time)

describe('history', () => {
  it('records an undo step with its time and the selection before', () => {
    const state = retitled(start, 'One')
    expect(state.history.undo).toEqual([{ label: 'Call it One', edits: [title('One', first)], selection: start.selection, time: 5 }])
    expect(undoTransaction(start)).toBeNull()
    expect(redoTransaction(state)).toBeNull()
  })

  it('joins a merged step to the one before, and records it where there is none', () => {
    const merged = retitled(retitled(start, 'One'), 'Two', 'merge')
    expect(merged.history.undo).toHaveLength(1)
    expect(applyTransaction(merged, undoTransaction(merged)!, 0).score.head.title).toBe(first)
    expect(retitled(start, 'One', 'merge').history.undo).toHaveLength(1)
  })

  it('leaves what came from others out', () => {
    const state = retitled(retitled(start, 'One'), 'Theirs', 'skip')
    expect(state.history.undo).toHaveLength(1)
    // Undo of a field that someone else changed since is refused with a reason, not forced.
    const undone = applyTransaction(state, undoTransaction(state)!, 0)
    expect(undone.score.head.title).toBe('Theirs')
    expect(undone.notice).toBe('The head of the arrangement has changed meanwhile. This step can’t be undone any more.')
  })

  it('gets past a step that someone else’s change has made impossible, both ways', () => {
    const rung = applyTransaction(start, { label: 'Ring', edits: [{ kind: 'patchHead', before: { ring: 'written' }, after: { ring: 'let-ring' } }] }, 0)
    const state = retitled(retitled(rung, 'One'), 'Theirs', 'skip')
    const refused = applyTransaction(state, undoTransaction(state)!, 0)
    const undone = applyTransaction(refused, undoTransaction(refused)!, 0)
    expect(undone.score.head).toMatchObject({ title: 'Theirs', ring: 'written' })

    const one = retitled(rung, 'One')
    const back = [undoTransaction, undoTransaction].reduce((each, undo) => applyTransaction(each, undo(each)!, 0), one)
    const taken = applyTransaction(back, { label: 'Theirs', edits: [{ kind: 'patchHead', before: { ring: 'written' }, after: { ring: 'let-ring' } }], history: 'skip' }, 0)
    const stopped = applyTransaction(taken, redoTransaction(taken)!, 0)
    expect(stopped.notice).toMatch(/can’t be done again any more/)
    expect(applyTransaction(stopped, redoTransaction(stopped)!, 0).score.head.title).toBe('One')
  })

  it('drops what could be redone when something new is done', () => {
    const one = retitled(start, 'One')
    const undone = applyTransaction(one, undoTransaction(one)!, 0)
    expect(undone.history.redo).toHaveLength(1)
    expect(retitled(undone, 'Two').history.redo).toEqual([])
  })

  it('keeps moves out of the steps, but puts the cursor back where the step began', () => {
    const moved = applyTransaction(start, { label: 'Move', selection: { cursor: { ...start.selection.cursor, string: 5 }, anchor: null } }, 0)
    expect(moved.history).toBe(start.history)
    const one = retitled(moved, 'One')
    const away = applyTransaction(one, { label: 'Move', selection: start.selection }, 0)
    expect(applyTransaction(away, undoTransaction(away)!, 0).selection).toEqual(moved.selection)
  })

  it('forgets the fret being typed and the notice with every act', () => {
    const typing = { ...start, typed: { noteId: 'n1', digits: '1', recorded: true }, notice: 'Something' }
    expect(applyTransaction(typing, { label: 'Move' }, 0)).toMatchObject({ typed: null, notice: null })
  })
})

describe('opening', () => {
  it('puts the cursor on the first event, or the end of an empty bar', () => {
    expect(printState(openEditor(parseScore('3/0q 3/2q')))).toBe('^1:3/0q 3/2q')
    expect(printState(openEditor(parseScore('')))).toBe('^')
    expect(() => openEditor({ ...start.score, bars: [] })).toThrow(RangeError)
  })
})

describe('a selection settled on another score', () => {
  it('stays the very object where all of it is there', () => {
    expect(settleSelection(start.score, start.selection)).toBe(start.selection)
  })

  it('goes to the voice’s end, the first bar, the last string where its place is gone', () => {
    const { cursor } = start.selection
    const settled = (change: object) => settleSelection(start.score, { cursor: { ...cursor, ...change }, anchor: null }).cursor
    expect(settled({ eventId: 'gone' })).toEqual({ ...cursor, eventId: 'end' })
    expect(settled({ barId: 'gone', eventId: 'gone' })).toEqual({ ...cursor, barId: 'b1', eventId: 'end' })
    expect(settled({ string: 9 })).toEqual({ ...cursor, string: 6 })
  })
})

describe('ids', () => {
  it('count on from a prefix of the session', () => {
    const ids = createIds('abc')
    expect(Array.from({ length: 37 }, () => ids.next()).slice(-2)).toEqual(['abc-z', 'abc-10'])
    expect(sessionPrefix(size => Uint8Array.from({ length: size }, (_, index) => index * 36 + 10))).toMatch(/^[a-z0-9]{8}$/)
  })
})
