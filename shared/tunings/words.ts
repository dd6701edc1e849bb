/** Counting in words, as the sentences of a chart need it. */
const NUMBERS = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve']

/** "three"; figures from 13 on. */
export const numberWord = (count: number): string => NUMBERS[count] ?? String(count)

/** "one fret", "two frets". */
export const counted = (count: number, noun: string): string => `${numberWord(count)} ${noun}${count === 1 ? '' : 's'}`

/** "D", "D and G", "D, G and A". */
export const listed = (items: readonly string[], last = 'and'): string =>
  (items.length < 2 ? items.join('') : `${items.slice(0, -1).join(', ')} ${last} ${items.at(-1)}`)

export const capitalised = (text: string): string => text.slice(0, 1).toUpperCase() + text.slice(1)

/** "string 4", "strings 6, 2 and 1". */
export const stringsWord = (strings: readonly number[]): string =>
  `string${strings.length === 1 ? '' : 's'} ${listed(strings.map(String))}`

/** "an octave up", "two octaves down", "at pitch". */
export const octavesWord = (octaves: number): string =>
  (octaves === 0 ? 'at pitch' : `${Math.abs(octaves) === 1 ? 'an octave' : `${numberWord(Math.abs(octaves))} octaves`} ${octaves > 0 ? 'up' : 'down'}`)
