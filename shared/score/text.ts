/** The first characters of a text, `most` UTF-16 units at most; never half of a surrogate pair, which no database keeps. */
export const shortened = (text: string, most: number): string => text.slice(0, most).replace(/[\uD800-\uDBFF]$/, '')
