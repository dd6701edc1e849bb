/** Writing XML 1.0: the little that a MusicXML file needs, as plain text for speed. */

const ESCAPES: Readonly<Record<string, string>> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', '\n': '&#10;', '\t': '&#9;' }
/** Not allowed in XML 1.0 at all (its production 2, Char); a lone surrogate is no character. */
// eslint-disable-next-line no-control-regex
const IMPOSSIBLE = /[\u0000-\u0008\u000B\u000C\u000E-\u001F\uFFFE\uFFFF]|[\uD800-\uDBFF](?![\uDC00-\uDFFF])|(?<![\uD800-\uDBFF])[\uDC00-\uDFFF]/g
const SPECIAL = /[&<>"\n\t]/g

/** Text for content or an attribute. Characters that XML can't hold are left out, and every line end is a line feed as in XML (2.11). */
export const escaped = (text: string): string => text.replace(/\r\n?/g, '\n').replace(IMPOSSIBLE, '').replace(SPECIAL, sign => ESCAPES[sign] ?? sign)

export type Attributes = Readonly<Record<string, string | number | undefined>>

function opening(name: string, attributes: Attributes | undefined): string {
  if (!attributes) return name
  let result = name
  for (const [key, value] of Object.entries(attributes)) {
    if (value !== undefined) result += ` ${key}="${escaped(String(value))}"`
  }
  return result
}

/** An element with text. */
export const leaf = (name: string, text: string | number, attributes?: Attributes): string =>
  `<${opening(name, attributes)}>${typeof text === 'number' ? text : escaped(text)}</${name}>`

/** An element without content. */
export const empty = (name: string, attributes?: Attributes): string => `<${opening(name, attributes)}/>`

/** An element around others; `content` is XML already. Nothing at all where there is no content. */
export const around = (name: string, content: string, attributes?: Attributes): string =>
  content ? `<${opening(name, attributes)}>${content}</${name}>` : ''
