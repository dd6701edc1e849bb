import { commandForKey } from '#shared/commands/keys'
import type { CommandContext } from '#shared/commands/registry'
import { useEditorStore } from '~/stores/editor'
import { usePlatform } from './usePlatform'

const TEXT_FIELD = 'input:not([type=checkbox], [type=radio], [type=range], [type=button]), textarea, select, [contenteditable=""], [contenteditable=true]'
/** What a key does by itself on these is theirs: Space presses a button, arrows move a slider. */
const CONTROL = 'button, a[href], summary, input, [role=menuitem], [role=option]'

/** Where a key press belongs; null where it is none of ours: in text fields and dialogs, and what a control does with its own keys. */
export function contextOfTarget(target: EventTarget | null, key: string): CommandContext | null {
  if (!(target instanceof Element)) return null
  if (target.closest('dialog[open]') || target.closest(TEXT_FIELD)) return null
  if (target.closest('[data-context=score]')) return 'score'
  const isPlain = key === ' ' || key === 'Enter' || key.startsWith('Arrow')
  return isPlain && target.closest(CONTROL) ? null : 'desk'
}

/** The desk's one listener for keys: what a key means is looked up in the registry; keys without a meaning here go on to the browser.
 * @param only ids of the commands that act here; absent: all */
export function useKeyboard(only?: readonly string[]): (event: KeyboardEvent) => void {
  const editor = useEditorStore()
  const platform = usePlatform()
  return (event) => {
    const context = event.defaultPrevented ? null : contextOfTarget(event.target, event.key)
    const command = context && commandForKey(event, context, undefined, platform.value)
    if (!command || (only && !only.includes(command.id))) return
    event.preventDefault()
    editor.run(command.id)
  }
}
