/** The first characters of a text, `most` UTF-16 units at most; never half of a surrogate pair, which no database keeps. */
export const shortened = (text: string, most: number): string => text.slice(0, most).replace(/[\uD800-\uDBFF]$/, '')

/** The fractions that Unicode has as one character (block Number Forms and Latin-1). */
export const VULGAR: Readonly<Record<string, string>> = {
  '1/2': '½', '1/3': '⅓', '2/3': '⅔', '1/4': '¼', '3/4': '¾', '1/5': '⅕', '2/5': '⅖', '3/5': '⅗', '4/5': '⅘',
  '1/6': '⅙', '5/6': '⅚', '1/7': '⅐', '1/8': '⅛', '3/8': '⅜', '5/8': '⅝', '7/8': '⅞', '1/9': '⅑', '1/10': '⅒',
}
