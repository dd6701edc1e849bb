import type { BarPatch, Edit } from '../edits'
import { cursorAt, placeOf, selectedBars, spansOf, type Cursor, type EditorState, type IdSource, type Selection, type Transaction } from '../editor'
import { contextOf } from '../score/context'
import { isEqual } from '../score/equal'
import { compare, equals, max, ZERO } from '../score/fraction'
import { barLength, voiceTotal } from '../score/time'
import { VOICE_NAMES, type Bar, type Score, type ScoreEvent } from '../score/types'
import { replaceVoice } from './change'
import { scoreCommand, type Command } from './command'
import { keepingContexts } from './contexts'
import { restsBetween } from './rests'

/** Changes what a bar states; null where it does so already. */
export function patchBar(bar: Bar, after: BarPatch, label: string): Transaction | null {
  const before: BarPatch = Object.fromEntries(Object.keys(after).map(field => [field, bar[field as keyof BarPatch] ?? null]))
  return isEqual(before, after) ? null : { label, edits: [{ kind: 'patchBar', bar: bar.id, before, after }] }
}

const barHere = ({ score, selection }: EditorState): Bar => placeOf(score, selection.cursor).bar

/** What the bar at `index` has to state for a meter, key or tempo to hold from it on: null, nothing, where it holds anyway. */
export const statement = <F extends 'meter' | 'key' | 'tempo'>(score: Score, index: number, field: F, value: Required<Bar>[F]): Required<Bar>[F] | null =>
  (index > 0 && isEqual(contextOf(score, index - 1)[field], value) ? null : value)

const at = (bar: Bar, { voice, string }: Cursor): Selection => ({ cursor: cursorAt(bar, voice, 0, string), anchor: null })

function insertBar(editor: EditorState, ids: IdSource, where: 'before' | 'after' | 'end'): Transaction {
  const { bars } = editor.score
  const touched = selectedBars(editor.score, editor.selection)
  const index = where === 'end' ? bars.length : where === 'after' ? bars.indexOf(touched.at(-1)!) + 1 : bars.indexOf(touched[0]!)
  const bar: Bar = { id: ids.next(), voices: {}, ...(index === 0 && stated(bars[0]!)) }
  const insert: Edit = { kind: 'insertBars', after: bars[index - 1]?.id ?? null, bars: [bar] }
  return { label: 'Insert a bar', edits: keepingContexts(editor.score, [insert]), selection: at(bar, editor.selection.cursor) }
}

const stated = ({ meter, key, tempo }: Bar): Partial<Bar> => ({ ...(meter && { meter }), ...(key && { key }), ...(tempo && { tempo }) })

/** Takes the selected bars away; an arrangement's only bars are emptied to one. */
export function removeBars(editor: EditorState, ids: IdSource): Transaction {
  const { score, selection } = editor
  const going = selectedBars(score, selection)
  const first = score.bars.indexOf(going[0]!)
  const after = score.bars[first - 1]?.id ?? null
  const label = going.length > 1 ? `Remove ${going.length} bars` : 'Remove the bar'
  const remove: Edit = { kind: 'removeBars', after, bars: going }
  if (going.length === score.bars.length) {
    const fresh: Bar = { id: ids.next(), voices: {}, ...stated(going[0]!) }
    return { label, edits: [{ kind: 'insertBars', after: going.at(-1)!.id, bars: [fresh] }, remove], selection: at(fresh, selection.cursor) }
  }
  const left = score.bars[first + going.length] ?? score.bars[first - 1]!
  return { label, edits: keepingContexts(score, [remove]), selection: at(left, selection.cursor) }
}

/** Moves the selected bars by one bar; each keeps its meter, key and tempo. */
function moveBars({ score, selection }: EditorState, by: -1 | 1): Transaction | null {
  const moving = selectedBars(score, selection)
  const first = score.bars.indexOf(moving[0]!)
  const from = score.bars[first - 1]?.id ?? null
  const over = by > 0 ? score.bars[first + moving.length] : score.bars[first - 1]
  if (!over) return null
  const to = by > 0 ? over.id : score.bars[first - 2]?.id ?? null
  return { label: 'Move bars', edits: keepingContexts(score, [{ kind: 'moveBars', bars: moving.map(bar => bar.id), from, to }]) }
}

/** Says that the bar is meant to hold what it holds (a pickup, a short closing bar), or takes that back. */
function toggleMeant(editor: EditorState): Transaction | null {
  const bar = barHere(editor)
  if (bar.length) return patchBar(bar, { length: null }, 'Bar as long as its meter')
  const held = VOICE_NAMES.map(name => voiceTotal(bar.voices[name])).reduce(max)
  if (compare(held, ZERO) <= 0) return { label: 'Short bar', notice: 'This bar is empty: write what it holds first.' }
  if (equals(held, barLength(bar, contextOf(editor.score, placeOf(editor.score, editor.selection.cursor).index).meter))) {
    return { label: 'Short bar', notice: 'This bar fits its meter already.' }
  }
  return patchBar(bar, { length: held }, 'Bar is meant to hold what it holds')
}

/** Fills the selected bars of this voice with rests. */
function padWithRests({ score, selection }: EditorState, ids: IdSource): Transaction {
  const label = 'Fill with rests'
  let uneven = false
  const edits = spansOf(score, selection).flatMap(({ index, bar, name, voice }) => {
    const { meter } = contextOf(score, index)
    const from = voiceTotal(voice)
    const rests = restsBetween(from, barLength(bar, meter), meter)
    uneven ||= rests === null
    if (!rests?.length) return []
    const events = rests.map((length): ScoreEvent => ({ id: ids.next(), length, notes: [] }))
    return [replaceVoice(bar, name, { ...voice, events: [...voice.events, ...events] })]
  })
  if (edits.length) return { label, edits }
  return { label, notice: uneven ? 'An unfinished tuplet stands in the way: no rest comes out even here.' : 'There is no room to fill here.' }
}

/** Rewrites where the passage begins or ends that is played again. */
const toggleRepeatStart = (editor: EditorState): Transaction | null => {
  const bar = selectedBars(editor.score, editor.selection)[0]!
  return patchBar(bar, { repeatStart: bar.repeatStart ? null : true }, 'Repeat from here')
}
const toggleRepeatEnd = (editor: EditorState): Transaction | null => {
  const bar = selectedBars(editor.score, editor.selection).at(-1)!
  return patchBar(bar, { repeatEnd: bar.repeatEnd ? null : 2 }, 'Repeat to here')
}

/** Lets the cursor's bar ring or end as written, or takes its own rule back. */
function toggleBarRing(editor: EditorState): Transaction | null {
  const bar = barHere(editor)
  const other = editor.score.head.ring === 'written' ? 'let-ring' : 'written'
  return patchBar(bar, { ring: bar.ring ? null : other }, other === 'written' ? 'Bar ends as written' : 'Let the bar ring')
}

const barCommand = (id: string, title: string, run: Command['run'], before: string, after: string, help?: string): Command =>
  scoreCommand({ id: `bar.${id}`, title, group: 'Bars', keys: [], run, example: { before, after }, ...(help && { help }) })

export const barCommands: readonly Command[] = [
  barCommand('insertAfter', 'Insert a bar after this one', (s, ids) => insertBar(s, ids, 'after'), '^3/0w | 3/2w', '3/0w | ^3:w | 3/2w'),
  barCommand('insertBefore', 'Insert a bar before this one', (s, ids) => insertBar(s, ids, 'before'), '{3/4} {G} ^3/0h. | 3/2h.', '{3/4} {G} ^3:h. | 3/0h. | 3/2h.'),
  barCommand('append', 'Add a bar at the end', (s, ids) => insertBar(s, ids, 'end'), '^3/0w | 3/2w', '3/0w | 3/2w | ^3:w'),
  barCommand('remove', 'Remove bars', removeBars, '{3/4} ^3/0h. | 3/2h. | {4/4} 3/4w', '{3/4} ^3/2h. | {4/4} 3/4w', 'The cursor’s, or all that are selected. The others keep their meter, key and tempo.'),
  barCommand('moveEarlier', 'Move bars one earlier', s => moveBars(s, -1), '3/0w | ^3/2w', '^3/2w | 3/0w'),
  barCommand('moveLater', 'Move bars one later', s => moveBars(s, 1), '{3/4} ^3/0h. | 3/2h.', '{3/4} 3/2h. | ^3/0h.'),
  barCommand('meant', 'This bar is meant to hold what it holds', toggleMeant, '^3/0e | 3/2w', '{len=1/8} ^3/0e | 3/2w', 'A pickup or a short closing bar. Again: as long as the meter.'),
  barCommand('pad', 'Fill with rests', padWithRests, '{6/8} ^3/0e', '{6/8} ^3/0e ze ze zq.'),
  barCommand('repeatStart', 'Repeat from here', toggleRepeatStart, '3/0w | ^3/2w', '3/0w | {|:} ^3/2w'),
  barCommand('repeatEnd', 'Repeat to here', toggleRepeatEnd, '3/0w | ^3/2w', '3/0w | {:|} ^3/2w'),
  barCommand('ring', 'Let this bar ring, or end as written', toggleBarRing, '^3/0w', '{ring=let-ring} ^3/0w'),
]
