/** Keys worth having before one's eyes, with the one word that says what they do; the keys themselves come from the registry. */
export const HINTS: readonly { readonly command: string, readonly word: string }[] = [
  { command: 'length.quarter', word: 'quarter' },
  { command: 'note.hammerOn', word: 'hammer-on' },
  { command: 'cursor.otherVoice', word: 'voice' },
  { command: 'desk.keys', word: 'all keys' },
]
