import { onScopeDispose, shallowRef } from 'vue'
import { sessionPrefix } from '#shared/editor'
import type { SaveStatus } from '#shared/editor/saving'
import type { ArrangementDetail } from '#shared/schemas'
import type { Score } from '#shared/score/types'
import { useEditorStore } from '~/stores/editor'
import { browserClock, connectBrowser } from './saving/browser'
import { openWithUnsent, type Opened } from './saving/opening'
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
  let session: { readonly saver: Saver, readonly end: () => Promise<void> } | null = null
  let isLeft = false
  /** The arrangement as it stands here; the editor may have turned to another by the time it is asked for. */
  let score: Score | null = null

  async function fileOf(): Promise<string> {
    const { writeSaved } = await import('#shared/formats/saved')
    return score ? writeSaved(score) : ''
  }

  function begin({ detail, queue, ...opened }: Opened, release: () => void): void {
    score = opened.score
    editor.open(opened.score)
    readings.value = opened.readings
    refused.value = opened.refused
    let announce = (_revision: number) => {}
    const saver = createSaver({
      queue, saved: detail.score, store, transport, clock: browserClock,
      onStatus: (next) => { status.value = next },
      onSaved: revision => announce(revision),
      onRebased(rebased, aside) {
        score = rebased
        editor.replaceScore(rebased)
        readings.value = [...readings.value, ...aside]
      },
      copy: fileOf,
    })
    const browser = connectBrowser(arrangement, saver)
    announce = browser.announce
    const stopListening = editor.listen({
      changed(after, before, { label, edits }) {
        score = after.score
        if (edits?.length && after.score !== before.score) saver.record({ label, edits })
      },
    })
    session = {
      saver,
      async end() {
        const kept = saver.leave()
        stopListening()
        browser.end()
        saver.stop()
        // Until then an opening that follows at once would read the work without its last write.
        await kept
        release()
      },
    }
  }

  /** When the page is left before the answer has come, nothing is put on the desk.
   * @throws OpeningFailed, or what `load` throws */
  async function open(load: () => Promise<ArrangementDetail>): Promise<ArrangementDetail> {
    const clientId = sessionPrefix(size => crypto.getRandomValues(new Uint8Array(size * 2)))
    const release = holdPresence(clientId)
    try {
      const opened = await openWithUnsent({ clientId, store, transport, load, isLive: isPresent, isLeft: () => isLeft })
      if (isLeft) release()
      else begin(opened, release)
      return opened.detail
    }
    catch (error) {
      release()
      throw error
    }
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

  /** A person asks for it, so that what comes of it is said, also where the header then says what it said before. */
  async function saveNow(): Promise<void> {
    const wasRefused = status.value.hindrance?.kind === 'refused'
    if (wasRefused) editor.say('Asking the server once more …')
    await session?.saver.now()
    if (!wasRefused || isLeft) return
    const { hindrance, unsent } = status.value
    if (hindrance?.kind === 'refused') editor.say(`Still not saved: ${hindrance.reason}`)
    else editor.say(unsent ? '' : 'The server has taken it.')
  }

  onScopeDispose(() => {
    isLeft = true
    void session?.end()
  })
  return { status, readings, refused, open, choose, discard, fileOf, saveNow }
}
