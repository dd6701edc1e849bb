import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { watchSyncEffect } from 'vue'
import { createScore } from '../../../shared/score/create'
import { useEditorStore } from '../../../stores/editor'

beforeEach(() => setActivePinia(createPinia()))

const opened = () => {
  const editor = useEditorStore()
  editor.open({ ...createScore({ title: 'Test' }, () => 'b0'), bars: [{ id: 'b0', voices: {} }, { id: 'b1', voices: {} }] })
  return editor
}

describe('the editor\'s store', () => {
  it('tells listeners of every change in the same turn, with the edits to save', () => {
    const editor = opened()
    const changed = vi.fn()
    const stop = editor.listen({ changed })
    editor.run('fret.5')
    expect(changed).toHaveBeenCalledOnce()
    expect(changed.mock.calls[0]![2].edits).toMatchObject([{ kind: 'replaceVoice', bar: 'b0', voice: 'upper', before: null }])
    stop()
    editor.run('cursor.next')
    expect(changed).toHaveBeenCalledOnce()
  })

  it('hands intents to listeners and leaves the score alone', () => {
    const editor = opened()
    const intent = vi.fn()
    editor.listen({ intent })
    const before = editor.state
    editor.run('desk.palette')
    expect(intent).toHaveBeenCalledWith({ intent: 'palette' })
    expect(editor.state).toBe(before)
  })

  it('keeps bars that were not touched the same objects, not wrapped ones', () => {
    const editor = opened()
    const untouched = editor.score!.bars[1]
    editor.run('fret.5')
    expect(editor.score!.bars[1]).toBe(untouched)
  })

  it('does not wake those who watch the score when only the cursor moves', () => {
    const editor = opened()
    let runs = 0
    watchSyncEffect(() => void (editor.score, runs++))
    editor.run('cursor.stringDown')
    expect(runs).toBe(1)
    editor.run('fret.5')
    expect(runs).toBe(2)
  })

  it('puts the cursor where its event still is when others have changed the score', () => {
    const editor = opened()
    editor.run('fret.5')
    const { eventId } = editor.selection!.cursor
    editor.replaceScore({ ...editor.score!, bars: [{ id: 'new', voices: {} }, ...editor.score!.bars] })
    expect(editor.selection!.cursor).toMatchObject({ barId: 'b0', eventId })
  })
})
