import { XmlElement, XmlError, parseXml } from '@rgrove/parse-xml'

/** Looking things up in parsed XML. */

export const elements = (parent: XmlElement): XmlElement[] => parent.children.filter(node => node instanceof XmlElement)
export const all = (parent: XmlElement | undefined, name: string): XmlElement[] =>
  parent ? elements(parent).filter(each => each.name === name) : []
export const one = (parent: XmlElement | undefined, ...path: readonly string[]): XmlElement | undefined =>
  path.reduce<XmlElement | undefined>((at, name) => (at ? elements(at).find(each => each.name === name) : undefined), parent)
export const textAt = (parent: XmlElement | undefined, ...path: readonly string[]): string | undefined => one(parent, ...path)?.text
export const has = (parent: XmlElement | undefined, ...path: readonly string[]): boolean => one(parent, ...path) !== undefined

/** A number that stands in an element; undefined where it is absent or none. */
export function numberAt(parent: XmlElement | undefined, ...path: readonly string[]): number | undefined {
  const text = textAt(parent, ...path)?.trim()
  if (!text) return undefined
  const value = Number(text)
  return Number.isFinite(value) ? value : undefined
}

export function numberOf(element: XmlElement, attribute: string): number | undefined {
  const value = Number(element.attributes[attribute] ?? Number.NaN)
  return Number.isFinite(value) ? value : undefined
}

/** The outermost element, or what is wrong with the text and where. */
export function parseTree(text: string): { readonly root: XmlElement } | { readonly problem: string } {
  try {
    const { root } = parseXml(text.replace(/^\uFEFF/, '').trimStart())
    return root ? { root } : { problem: 'The file is empty.' }
  }
  catch (error) {
    if (!(error instanceof XmlError)) throw error
    const reason = error.message.split('\n')[0]?.replace(/ \(line \d+, column \d+\)$/, '') ?? ''
    return { problem: `This is no well-formed XML: line ${error.line}, column ${error.column}: ${reason}. Export the file again from where it was made.` }
  }
}
