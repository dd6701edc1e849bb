import { onScopeDispose, shallowRef } from 'vue'
import { sessionPrefix } from '#shared/editor'
import type { SaveStatus } from '#shared/editor/saving'
import type { ArrangementDetail } from '#shared/schemas'
import { useEditorStore } from '~/stores/editor'
import { browserClock, connectBrowser } from './saving/browser'
import { openWithUnsent } from './saving/opening'
import { holdPresence, isPresent } from './saving/presence'
import { chosenTransaction, type Reading } from './saving/readings'
import { createSaver, type Saver } from './saving/saver'
import { createTransport } from './saving/transport'
import { createUnsentStore, type KeptQueue } from './saving/unsentStore'

/** Opens an arrangement on the desk and saves what is done to it.
 * @param user whose unsent work this is */
export function useSaving(arrangement: string, user: string) {
  const editor = useEditorStore()
  const status = shallowRef<SaveStatus>({ unsent: 0, kept: true, hindrance: null, savedAt: null })
  const readings = shallowRef<readonly Reading[]>([])
  const refused = shallowRef<readonly KeptQueue[]>([])
  const store = createUnsentStore(arrangement, user)
  const transport = createTransport(arrangement, (input, init) => fetch(input, init))
  const endings: (() => void)[] = []
  let saver: Saver | null = null

  async function fileOf(): Promise<string> {
    const { writeSaved } = await import('#shared/formats/saved')
    return editor.score ? writeSaved(editor.score) : ''
  }

  /** @throws OpeningFailed, or what `load` throws */
  async function open(load: () => Promise<ArrangementDetail>): Promise<ArrangementDetail> {
    const clientId = sessionPrefix(size => crypto.getRandomValues(new Uint8Array(size * 2)))
    endings.push(holdPresence(clientId))
    const opened = await openWithUnsent({ clientId, store, transport, load, isLive: isPresent })
    editor.open(opened.score)
    readings.value = opened.readings
    refused.value = opened.refused
    let announce = (_revision: number) => {}
    saver = createSaver({
      queue: opened.queue, saved: opened.detail.score, store, transport, clock: browserClock,
      onStatus: (next) => { status.value = next },
      onSaved: revision => announce(revision),
      onRebased(score, aside) {
        editor.replaceScore(score)
        readings.value = [...readings.value, ...aside]
      },
      copy: fileOf,
    })
    const browser = connectBrowser(arrangement, saver)
    announce = browser.announce
    const stopListening = editor.listen({
      changed(after, before, { label, edits }) {
        if (edits?.length && after.score !== before.score) saver?.record({ label, edits })
      },
    })
    endings.push(stopListening, browser.end, saver.stop)
    return opened.detail
  }

  /** Takes one of two readings of a place; the other goes. Choosing one's own is an edit like any other, and can be undone. */
  async function choose(reading: Reading, which: 'mine' | 'theirs'): Promise<void> {
    const transaction = which === 'mine' && editor.score ? chosenTransaction(editor.score, reading) : null
    if (transaction) editor.dispatch(transaction)
    readings.value = readings.value.filter(each => each.id !== reading.id)
    await store.dropReading(reading.id)
  }

  /** Gives up work that the server would not take. */
  async function discard(clientId: string): Promise<void> {
    refused.value = refused.value.filter(each => each.clientId !== clientId)
    await store.dropQueue(clientId)
  }

  onScopeDispose(() => {
    saver?.leave()
    for (const end of endings) end()
  })
  return { status, readings, refused, open, choose, discard, fileOf, saveNow: () => saver?.now() ?? Promise.resolve() }
}
