/**
 * A tiny text notation for scores in tests and in the commands' examples.
 *
 *   3/0q        string 3, fret 0, a quarter: w h q e s t, i (64th), dots behind: `3/0q.`
 *   zq  _q      a rest; a hidden rest
 *   (3/0 1/2)q  a chord
 *   3/0xq       marks stand before the length: x dead, < harmonic (`3/12<q`; another partial than the place's own: `3/3.2<6q`),
 *               h hammer-on, p pull-off, = tie, l let ring, ! ends as written, 'F#' respelled
 *   [3 3/0e 3/0e 3/0e]  a triplet; `[5:4 …]`; `[3:2q …]` where the base is not that of the first event
 *   |           bar line; `;` the lower voice follows, then `;` the middle one
 *   {6/8} {G} {Em} {q.=60} {len=1/8} {ring=let-ring} {|:} {:|} {:|3}   what a bar states
 *   ^           the cursor, before its event, or where the voice ends; `^2:` where its string is not the event's first
 *               (string 1 at the end); `^q` at the end: what is entered next, where it differs from the event before
 *   @           where the selection began, likewise
 *
 * Ids are deterministic: bars b1, b2 …, events e1, e2 … and notes n1, n2 … by their order in the text, tuplets t1, t2 …
 */
import { fraction } from '../../shared/score/fraction'
import { STANDARD_TUNING, STEEL_STRING_GUITAR } from '../../shared/score/create'
import { PARTIAL_AT_FRET } from '../../shared/score/sounding'
import type { Bar, Base, Head, Key, Length, LinkKind, Note, Respelling, Score, ScoreEvent, Tuplet, Voice, VoiceName } from '../../shared/score/types'
import { END, openEditor, type Cursor, type EditorState } from '../../shared/editor/state'

export const TEST_HEAD: Head = {
  title: 'Test piece', composer: '', arranger: '', rights: '', source: '', ring: 'written',
  instrument: STEEL_STRING_GUITAR, strings: STANDARD_TUNING, capos: [],
}

const LETTERS: Record<string, Base> = { w: 1, h: 2, q: 4, e: 8, s: 16, t: 32, i: 64 }
const LETTER_OF = Object.fromEntries(Object.entries(LETTERS).map(([letter, base]) => [base, letter])) as Record<Base, string>
const MAJOR = ['Cb', 'Gb', 'Db', 'Ab', 'Eb', 'Bb', 'F', 'C', 'G', 'D', 'A', 'E', 'B', 'F#', 'C#']
const MINOR = ['Abm', 'Ebm', 'Bbm', 'Fm', 'Cm', 'Gm', 'Dm', 'Am', 'Em', 'Bm', 'F#m', 'C#m', 'G#m', 'D#m', 'A#m']
const VOICE_ORDER: readonly VoiceName[] = ['upper', 'lower', 'middle']
const LINKS: Record<string, LinkKind> = { 'h': 'hammer-on', 'p': 'pull-off', '=': 'tie' }
const LINK_OF = Object.fromEntries(Object.entries(LINKS).map(([mark, link]) => [link, mark])) as Record<LinkKind, string>

/** Reads text into an editor standing at the cursor mark (without one: as `openEditor` does).
 * @throws SyntaxError naming the piece of text that can't be read */
export function parseState(text: string, head: Partial<Head> = {}): EditorState {
  const reader = new Reader()
  const score = { head: { ...TEST_HEAD, ...head }, bars: reader.read(text) }
  const state = openEditor(score)
  const cursor = reader.cursor ?? state.selection.cursor
  return { ...state, selection: { cursor, anchor: reader.anchor }, entry: reader.entry ?? impliedEntry(score, cursor) }
}

export const parseScore = (text: string, head: Partial<Head> = {}): Score => parseState(text, head).score

/** Without a letter at the cursor the entry length is that of the event under it or before it, else a quarter. */
function impliedEntry(score: Score, cursor: Cursor): EditorState['entry'] {
  const events = score.bars.find(bar => bar.id === cursor.barId)?.voices[cursor.voice]?.events ?? []
  const event = events.find(each => each.id === cursor.eventId) ?? events.at(-1)
  return event ? { base: event.length.base, dots: event.length.dots } : { base: 4, dots: 0 }
}

class Reader {
  cursor: Cursor | null = null
  anchor: Cursor | null = null
  entry: EditorState['entry'] | null = null
  private bars: Bar[] = []
  private events = 0
  private notes = 0
  private tuplets = 0
  private bar: Record<string, unknown> = {}
  private voice = 0
  private content: { events: ScoreEvent[], tuplets: Tuplet[] }[] = []
  private open: string[] = []
  private waiting: { mark: string, string: string | undefined, length: string | undefined }[] = []

  read(text: string): Bar[] {
    this.startBar()
    for (const token of text.match(/\{[^}]*\}|\[\S+|\]|\^(?:\d+:)?(?:[whqesti]\.*(?=[\s\]|;]|$))?|@(?:\d+:)?|\([^)]*\)\S*?(?=[\s\]|;]|$)|[^\s\]|;]+|[|;]/g) ?? []) this.token(token)
    this.endBar()
    return this.bars
  }

  private startBar() {
    this.bar = { id: `b${this.bars.length + 1}` }
    this.voice = 0
    this.content = VOICE_ORDER.map(() => ({ events: [], tuplets: [] }))
  }

  private endBar() {
    this.place(END, 1)
    const voices = Object.fromEntries(VOICE_ORDER.flatMap((name, index): [VoiceName, Voice][] => {
      const { events, tuplets } = this.content[index]!
      return events.length ? [[name, tuplets.length ? { events, tuplets } : { events }]] : []
    }))
    this.bars.push({ ...this.bar, voices } as unknown as Bar)
  }

  private nextBar() {
    this.endBar()
    this.startBar()
  }

  private nextVoice() {
    this.place(END, 1)
    this.voice++
  }

  private token(token: string) {
    if (token === '|') this.nextBar()
    else if (token === ';') this.nextVoice()
    else if (token === ']') this.open.pop()
    else if (token.startsWith('{')) this.attribute(token.slice(1, -1))
    else if (token.startsWith('[')) this.openTuplet(token)
    else if (/^[\^@]/.test(token)) {
      const [, mark, string, length] = /^([\^@])(?:(\d+):)?([whqesti]\.*)?$/.exec(token) ?? fail(token)
      this.waiting.push({ mark: mark!, string, length })
    }
    else this.event(token)
  }

  /** A cursor mark waits for the event behind it. */
  private place(eventId: string, string: number) {
    for (const { mark, string: own, length } of this.waiting) {
      const cursor = { barId: this.bar.id as string, voice: VOICE_ORDER[this.voice]!, eventId, string: own ? Number(own) : string }
      if (mark === '^') this.cursor = cursor
      else this.anchor = cursor
      if (length) this.entry = readLength(length)
    }
    this.waiting = []
  }

  private attribute(text: string) {
    const repeat = /^:\|(\d*)$/.exec(text)
    const length = /^len=(\d+)\/(\d+)$/.exec(text)
    const tempo = /^([whqesti]\.*)=(\d+)$/.exec(text)
    const meter = /^(\d+)\/(\d+)$/.exec(text)
    const key = readKey(text)
    if (text === '|:') this.bar.repeatStart = true
    else if (repeat) this.bar.repeatEnd = Number(repeat[1] || 2)
    else if (length) this.bar.length = fraction(Number(length[1]), Number(length[2]))
    else if (tempo) this.bar.tempo = { ...readLength(tempo[1]!), perMinute: Number(tempo[2]) }
    else if (meter) this.bar.meter = { beats: Number(meter[1]), unit: Number(meter[2]) }
    else if (text.startsWith('ring=')) this.bar.ring = text.slice(5)
    else if (key) this.bar.key = key
    else fail(text)
  }

  private openTuplet(token: string) {
    const [, actual, normal, letter] = /^\[(\d+)(?::(\d+)([whqesti])?)?$/.exec(token) ?? fail(token)
    const id = `t${++this.tuplets}`
    this.open.push(id)
    // The base of the first event serves where none is written; it is known only when that event is read.
    const base = (letter ? LETTERS[letter] : 0) as Base
    this.content[this.voice]!.tuplets.push({ id, actual: Number(actual), normal: Number(normal ?? 2), base })
  }

  private event(token: string) {
    const [, rest, chord, single, letters] = /^(?:([z_])|\(([^)]*)\)|(\d.*?))([whqesti]\.*)$/.exec(token) ?? fail(token)
    const plain = readLength(letters!)
    const content = this.content[this.voice]!
    content.tuplets = content.tuplets.map(each => (each.base ? each : { ...each, base: plain.base }))
    const notes = (chord ?? single ?? '').split(/\s+/).filter(Boolean).map(text => this.note(text))
    const length: Length = this.open.length ? { ...plain, tuplets: [...this.open] } : plain
    const event: ScoreEvent = { id: `e${++this.events}`, length, notes, ...(rest === '_' && { hidden: true as const }) }
    this.place(event.id, notes[0]?.string ?? 1)
    content.events.push(event)
  }

  private note(text: string): Note {
    const [, string, fret, marks, step, accidental] = /^(\d+)\/(\d+(?:\.\d+)?)((?:<\d*|[xhpl=!])*)(?:'([A-G])(#*|b*)')?$/.exec(text) ?? fail(text)
    const harmonic = /<(\d*)/.exec(marks!)
    const link = [...marks!].map(mark => LINKS[mark]).find(Boolean)
    const ring = marks!.includes('l') ? 'let-ring' : marks!.includes('!') ? 'written' : undefined
    return {
      id: `n${++this.notes}`, string: Number(string), fret: Number(fret),
      ...(harmonic && { harmonic: { partial: Number(harmonic[1] || PARTIAL_AT_FRET[Number(fret)] || fail(text)) } }),
      ...(marks!.includes('x') && { dead: true as const }),
      ...(ring && { ring } as const),
      ...(link && { link }),
      ...(step && { spelling: { step: step as Respelling['step'], alter: accidental!.startsWith('b') ? -accidental!.length : accidental!.length } }),
    }
  }
}

function fail(text: string): never {
  throw new SyntaxError(`can't read “${text}”`)
}

function readLength(text: string): EditorState['entry'] {
  return { base: LETTERS[text[0]!] ?? fail(text), dots: text.length - 1 }
}

function readKey(text: string): Key | null {
  const major = MAJOR.indexOf(text)
  if (major >= 0) return { fifths: major - 7, mode: 'major' }
  const minor = MINOR.indexOf(text)
  return minor < 0 ? null : { fifths: minor - 7, mode: 'minor' }
}

/** Prints the score with its cursor and selection. */
export const printState = (state: EditorState): string => print(state.score, state)
export const printScore = (score: Score): string => print(score, null)

function print(score: Score, state: EditorState | null): string {
  return score.bars.map((bar) => {
    const voices = VOICE_ORDER.map(name => printVoice(bar, name, state))
    while (voices.length > 1 && !voices.at(-1)) voices.pop()
    return [...printAttributes(bar), voices.join(' ; ').trim()].filter(Boolean).join(' ')
  }).join(' | ').replace(/\|(?: {2}\|)+/g, run => run.replaceAll('  ', ' ')).trim()
}

function printAttributes(bar: Bar): string[] {
  return [
    bar.meter && `{${bar.meter.beats}/${bar.meter.unit}}`,
    bar.key && `{${(bar.key.mode === 'major' ? MAJOR : MINOR)[bar.key.fifths + 7]}}`,
    bar.tempo && `{${printLength(bar.tempo)}=${bar.tempo.perMinute}}`,
    bar.length && `{len=${bar.length.n}/${bar.length.d}}`,
    bar.ring && `{ring=${bar.ring}}`,
    bar.repeatStart && '{|:}',
    bar.repeatEnd && `{:|${bar.repeatEnd === 2 ? '' : bar.repeatEnd}}`,
  ].filter(text => typeof text === 'string')
}

function printVoice(bar: Bar, name: VoiceName, state: EditorState | null): string {
  const voice = bar.voices[name] ?? { events: [] }
  const at = (eventId: string, usual: number) => printMarks(bar, name, state, eventId, usual)
  const parts: string[] = []
  let open: readonly string[] = []
  for (const event of voice.events) {
    const inside = event.length.tuplets ?? []
    const shared = inside.filter((id, index) => open[index] === id).length
    parts.push(...open.slice(shared).map(() => ']'), ...inside.slice(shared).map(id => printTuplet(voice, id, event)))
    open = inside
    parts.push(at(event.id, event.notes[0]?.string ?? 1) + printEvent(event))
  }
  parts.push(...open.map(() => ']'), at(END, 1))
  return parts.filter(Boolean).join(' ').replaceAll(' ]', ']')
}

function printMarks(bar: Bar, voice: VoiceName, state: EditorState | null, eventId: string, usual: number): string {
  if (!state) return ''
  const { cursor, anchor } = state.selection
  const mark = (sign: string, place: Cursor | null) =>
    place?.barId === bar.id && place.voice === voice && place.eventId === eventId ? sign + (place.string === usual ? '' : `${place.string}:`) : ''
  const end = mark('^', cursor)
  const implied = impliedEntry(state.score, cursor)
  const differs = eventId === END && (implied.base !== state.entry.base || implied.dots !== state.entry.dots)
  return [mark('@', anchor), end && end + (differs ? printLength(state.entry) : '')].filter(Boolean).join(eventId === END ? ' ' : '')
}

function printTuplet(voice: Voice, id: string, first: ScoreEvent): string {
  const { actual, normal, base } = voice.tuplets!.find(each => each.id === id)!
  const own = base === first.length.base ? '' : LETTER_OF[base]
  return `[${actual}${normal === 2 && !own ? '' : `:${normal}${own}`}`
}

const printLength = (length: Pick<Length, 'base' | 'dots'>): string => LETTER_OF[length.base] + '.'.repeat(length.dots)

/** One event as text, without marks: "(3/0 1/2)q". */
export function printEvent(event: ScoreEvent): string {
  const notes = event.notes.map(printNote)
  const content = notes.length > 1 ? `(${notes.join(' ')})` : notes[0] ?? (event.hidden ? '_' : 'z')
  return content + printLength(event.length)
}

function printNote(note: Note): string {
  const partial = note.harmonic && (PARTIAL_AT_FRET[note.fret] === note.harmonic.partial ? '' : note.harmonic.partial)
  return [
    `${note.string}/${note.fret}`, note.dead && 'x', note.harmonic && `<${partial}`, note.link && LINK_OF[note.link],
    note.ring && (note.ring === 'let-ring' ? 'l' : '!'),
    note.spelling && `'${note.spelling.step}${note.spelling.alter < 0 ? 'b'.repeat(-note.spelling.alter) : '#'.repeat(note.spelling.alter)}'`,
  ].filter(Boolean).join('')
}
