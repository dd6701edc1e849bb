import { barLabel, lengthLabel } from '#shared/editor/describe'
import type { Conflict } from '#shared/editor/rebase'
import type { Score, Voice } from '#shared/score/types'

/** A voice as plain tab, string 1 on top: one column an event, two characters wide. */
export function tabText(voice: Voice, strings: number): string {
  const rows = Array.from({ length: strings }, (_, index) => voice.events.map((event) => {
    const note = event.notes.find(each => each.string === index + 1)
    return (note ? (note.dead ? 'x' : note.harmonic ? `<${note.fret}>` : String(note.fret)) : '').padEnd(3, '-').padStart(4, '-')
  }).join(''))
  return rows.map(row => `|${row}-|`).join('\n')
}

const lengths = (voice: Voice): string => voice.events.map(event => `${lengthLabel(event.length)}${event.notes.length ? '' : ' rest'}`).join(', ')

export interface Side { readonly title: string, readonly tab: string | null, readonly words: string }

const ofVoice = (title: string, voice: Voice | null, strings: number): Side =>
  ({ title, tab: voice ? tabText(voice, strings) : null, words: voice ? lengths(voice) : 'This voice is empty.' })

const FIELDS: Readonly<Record<string, string>> = {
  title: 'title', composer: 'composer', arranger: 'arranger', rights: 'rights', source: 'source', ring: 'ring rule', instrument: 'instrument', strings: 'tuning',
  capos: 'capos', meter: 'meter', key: 'key', tempo: 'tempo', length: 'length', repeatStart: 'beginning of a repeat', repeatEnd: 'end of a repeat',
}

/** A field's value as one reads it; lists and records as their values. */
function valueText(value: unknown): string {
  if (value === null || value === undefined || value === '') return 'nothing'
  if (value === true) return 'yes'
  if (Array.isArray(value)) return value.length ? value.map(valueText).join(' ') : 'none'
  if (typeof value === 'object') return Object.values(value).map(valueText).join(' / ')
  return String(value)
}

/** What two readings are of, and both of them. `theirs` is what stands in the score now. */
export function compareReadings(score: Score, conflict: Conflict): { readonly what: string, readonly mine: Side, readonly theirs: Side } {
  const strings = score.head.strings.length
  const bar = (id: string | null) => {
    const index = score.bars.findIndex(each => each.id === id)
    return index < 0 ? 'a bar that is gone' : barLabel(score, index).replace('Pickup', 'the pickup').toLowerCase()
  }
  const words = (title: string, text: string): Side => ({ title, tab: null, words: text })
  switch (conflict.kind) {
    case 'voice': {
      const now = score.bars.find(each => each.id === conflict.bar)?.voices[conflict.voice] ?? null
      return { what: `The ${conflict.voice} voice of ${bar(conflict.bar)}`, mine: ofVoice('Yours', conflict.mine, strings), theirs: ofVoice('In the score now', now, strings) }
    }
    case 'field':
      return {
        what: `The ${FIELDS[conflict.field] ?? conflict.field} of ${conflict.bar === null ? 'the arrangement' : bar(conflict.bar)}`,
        mine: words('Yours', valueText(conflict.mine)), theirs: words('In the score now', valueText(conflict.theirs)),
      }
    case 'bars': {
      const count = conflict.mine.length === 1 ? 'A bar' : `${conflict.mine.length} bars`
      const [mine, theirs] = {
        removed: ['You took this away.', 'It was changed meanwhile and stands in the score.'],
        inserted: ['You put this in.', 'It does not fit the instrument as it is now.'],
        moved: ['You moved this.', 'The order was changed meanwhile and stands.'],
      }[conflict.what] as [string, string]
      return { what: count, mine: words('Yours', mine), theirs: words('In the score now', theirs) }
    }
  }
}
