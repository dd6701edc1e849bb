import { computed } from 'vue'
import { keysOf } from '#shared/commands/keys'
import { keyLabel } from '#shared/commands/labels'
import { commandById } from '#shared/commands/registry'
import { useEditorStore } from '~/stores/editor'
import { usePlatform } from './usePlatform'

/** One command as a control shows it.
 * @throws RangeError when there is none of that name */
export function useCommand(id: string) {
  const editor = useEditorStore()
  const command = commandById(id)
  if (!command) throw new RangeError(`no command ${id}`)
  const key = keysOf(command)[0]
  const platform = usePlatform()
  return {
    command,
    /** "Ctrl Z"; null for a command without a key. */
    keys: computed(() => (key === undefined ? null : keyLabel(key, platform.value))),
    /** Whether there is anything for it to do; asked only by what is on the screen. */
    enabled: computed(() => editor.state !== null && command.run(editor.state, editor.ids) !== null),
    run: () => editor.run(id),
  }
}
