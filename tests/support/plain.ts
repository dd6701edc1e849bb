import { VOICE_NAMES, type Score, type Voice } from '../../shared/score/types'

function plainVoice(voice: Voice, rename: (id: string) => string): Voice {
  return {
    events: voice.events.map(event => ({
      ...event, id: rename(event.id),
      length: { ...event.length, ...(event.length.tuplets && { tuplets: event.length.tuplets.map(rename) }) },
      notes: event.notes.map(note => ({ ...note, id: rename(note.id) })),
    })),
    ...(voice.tuplets && { tuplets: voice.tuplets.map(tuplet => ({ ...tuplet, id: rename(tuplet.id) })) }),
  }
}

/** The score with ids counted in the order in which they stand, so that two of equal content are equal. */
export function withPlainIds(score: Score): Score {
  const names = new Map<string, string>()
  const rename = (id: string): string => {
    const name = names.get(id) ?? `id-${names.size}`
    names.set(id, name)
    return name
  }
  return {
    ...score,
    bars: score.bars.map(bar => ({
      ...bar, id: rename(bar.id),
      voices: Object.fromEntries(VOICE_NAMES.flatMap((name) => {
        const voice = bar.voices[name]
        return voice?.events.length ? [[name, plainVoice(voice, rename)]] : []
      })),
    })),
  }
}
