const NAMESPACE = 'http://www.w3.org/2000/svg'

type Attributes = Readonly<Record<string, string | number>>

/** An SVG element with its attributes and children. */
export function svg<Name extends keyof SVGElementTagNameMap>(name: Name, attributes: Attributes = {}, ...children: readonly (Element | string)[]): SVGElementTagNameMap[Name] {
  const element = document.createElementNS(NAMESPACE, name)
  for (const key in attributes) element.setAttribute(key, `${attributes[key]}`)
  if (children.length) element.append(...children)
  return element
}

/** Rounded to hundredths, so that equal drawings are equal texts. */
export const at = (value: number): number => Math.round(value * 100) / 100

/** A SMuFL glyph of Bravura: 40 points are four staff spaces. */
export const glyph = (code: number, x: number, y: number, size = 40, attributes: Attributes = {}): SVGTextElement =>
  svg('text', { 'x': at(x), 'y': at(y), 'font-family': 'Bravura', 'font-size': size, ...attributes }, String.fromCodePoint(code))

/** Words and digits on the sheet. */
export const words = (text: string, x: number, y: number, attributes: Attributes = {}): SVGTextElement =>
  svg('text', { x: at(x), y: at(y), ...attributes }, text)

/** A tie or slur: thin at its ends, thicker in the middle. `side` −1 bows upward, 1 downward. */
export function arc(x1: number, y1: number, x2: number, y2: number, side: 1 | -1, attributes: Attributes = {}): SVGPathElement {
  const rise = Math.min(13, 5 + Math.abs(x2 - x1) * 0.07) * side
  const third = (x2 - x1) / 3
  const curve = (bow: number, from: number, to: number, a: number, b: number): string =>
    `C${at(from + third * Math.sign(to - from || 1) * Math.sign(third || 1))} ${at(a + bow)} ${at(to - third * Math.sign(to - from || 1) * Math.sign(third || 1))} ${at(b + bow)} ${at(to)} ${at(b)}`
  return svg('path', {
    d: `M${at(x1)} ${at(y1)}${curve(rise, x1, x2, y1, y2)}${curve(rise + 2 * side, x2, x1, y2, y1)}Z`,
    stroke: 'none', ...attributes,
  })
}
