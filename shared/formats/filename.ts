/** Characters that Windows forbids in file names (Microsoft, "Naming Files, Paths, and Namespaces"); "/" everywhere else too. */
const FORBIDDEN = /[<>:"/\\|?*]/g
const INVISIBLE = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu
/** Device names that Windows refuses whatever the extension (same source). */
const RESERVED = /^(?:con|prn|aux|nul|com[1-9¹²³]|lpt[1-9¹²³])(?:\.|$)/i
/** File systems in use allow 255 bytes; room is left for an extension and a browser's "(1)". */
const LONGEST = 200

const bytes = new TextEncoder()

function shortened(text: string): string {
  let result = ''
  let size = 0
  for (const character of text) {
    size += bytes.encode(character).length
    if (size > LONGEST) break
    result += character
  }
  return result
}

/** A file name that every common system accepts, made from a title: letters keep their accents, forbidden signs become "-".
 * @param extension with or without its dot: "musicxml" */
export function fileName(title: string, extension: string): string {
  const plain = title.normalize('NFC').replace(INVISIBLE, ' ').replace(FORBIDDEN, '-').replace(/\s+/g, ' ')
  const trimmed = shortened(plain.replace(/^[\s.-]+|[\s.-]+$/g, '')).replace(/[\s.]+$/, '')
  const name = RESERVED.test(trimmed) ? `_${trimmed}` : trimmed
  return `${name || 'untitled'}.${extension.replace(/^\./, '')}`
}
