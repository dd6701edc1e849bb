import { onScopeDispose, watch } from 'vue'
import { placeOf, type Cursor, type EditorState } from '#shared/editor'
import { useEditorStore } from '~/stores/editor'
import { usePlayer } from './usePlayer'

/** A note is heard when it is entered or the cursor comes onto it; also when its pitch changed under the cursor. */
function isNews(after: EditorState, before: EditorState): boolean {
  const [now, then] = [after.selection.cursor, before.selection.cursor]
  if (now.eventId !== then.eventId || now.string !== then.string || now.barId !== then.barId) return true
  return after.score !== before.score && placeOf(after.score, now).note !== placeOf(before.score, then).note
}

/** Sound on the desk: notes as they are met, and playing from here with the cursor going along. */
export function useDeskSound() {
  const editor = useEditorStore()
  const player = usePlayer()
  /** Where playing began; after the last bar the cursor goes back there. */
  let start: Cursor | null = null

  const stopListening = editor.listen({
    changed(after, before) {
      if (player.playing.value || !isNews(after, before)) return
      const { note } = placeOf(after.score, after.selection.cursor)
      if (note) player.soundNote(after.score, note, after.selection.cursor.voice)
    },
    intent: ({ intent }) => void (intent === 'play' && toggle()),
  })

  function toggle(): void {
    if (player.playing.value) {
      start = null
      return player.stop()
    }
    if (!editor.state) return
    const { score, selection } = editor.state
    start = selection.anchor ? null : selection.cursor
    void player.play(score, selection)
  }

  watch(player.position, (moment) => {
    if (!moment || !editor.state || editor.state.selection.anchor) return
    const { voice, string } = editor.state.selection.cursor
    const events = editor.state.score.bars.find(bar => bar.id === moment.barId)?.voices[voice]?.events
    const event = events?.find(each => moment.eventIds.includes(each.id))
    if (event) editor.dispatch({ label: 'Play', selection: { cursor: { barId: moment.barId, voice, eventId: event.id, string }, anchor: null } })
  })
  watch(player.playing, (playing) => {
    if (!playing && start) editor.dispatch({ label: 'Play', selection: { cursor: start, anchor: null } })
    if (!playing) start = null
  })
  onScopeDispose(() => {
    stopListening()
    player.stop()
  })
  return { player, toggle }
}
