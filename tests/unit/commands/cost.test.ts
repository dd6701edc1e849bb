import { describe, expect, it } from 'vitest'
import { applyTransaction, createIds, openEditor, type EditorState } from '../../../shared/editor'
import { describeCursor } from '../../../shared/editor/describe'
import { isIntent, runCommand } from '../../../shared/commands/registry'
import type { Bar, Score } from '../../../shared/score/types'
import { parseScore } from '../../support/score'

/** A long score whose bars note when their voices are looked at. */
function watched(count: number): { score: Score, looked: Set<string> } {
  const looked = new Set<string>()
  const { head, bars } = parseScore(Array.from({ length: count }, () => '3/0e 2/1e 1/0e 2/1e 3/0e 2/1e 1/0e 2/1e ; 6/0h 4/0h').join(' | '))
  const spied = bars.map(({ voices, ...bar }): Bar => Object.defineProperty({ ...bar } as Bar, 'voices', {
    enumerable: true,
    get: () => {
      looked.add(bar.id)
      return voices
    },
  }))
  return { score: { head, bars: spied }, looked }
}

function type(state: EditorState, run: readonly string[]): EditorState {
  const ids = createIds('new')
  return run.reduce((current, id) => {
    const result = runCommand(id, current, ids)
    return result && !isIntent(result) ? applyTransaction(current, result, 0) : current
  }, state)
}

/** A key costs the same in a short piece and a long one: it looks at its own bar, and its neighbours where it moves there. */
describe('the work of a key on 400 bars', () => {
  it.each([
    [['fret.1', 'fret.2'], 1], [['length.quarter'], 1], [['note.delete'], 1], [['note.tie'], 1], [['cursor.otherVoice', 'fret.3'], 1],
    [['cursor.next', 'cursor.previous'], 1], [['cursor.advance', 'fret.5'], 1], [['length.triplet'], 1], [['fret.4', 'history.undo', 'history.redo'], 1],
    [['cursor.nextBar', 'fret.4', 'cursor.previousBar'], 3],
  ])('%s', (run, most) => {
    const { score, looked } = watched(400)
    const opened = openEditor(score)
    const bar = score.bars[200]!
    const start: EditorState = { ...opened, selection: { cursor: { barId: bar.id, voice: 'upper', eventId: bar.voices.upper!.events[0]!.id, string: 3 }, anchor: null } }
    looked.clear()
    describeCursor(type(start, run))
    expect([...looked].length).toBeLessThanOrEqual(most)
    expect(looked.has(bar.id)).toBe(true)
  })
})
