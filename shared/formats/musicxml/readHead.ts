import type { XmlElement } from '@rgrove/parse-xml'
import { STANDARD_TUNING, STEEL_STRING_GUITAR } from '../../score/create'
import { pitchText } from '../../score/pitch'
import { TEXT_MOST } from '../../score/schema'
import { capoOffset, openMidi } from '../../score/sounding'
import { shortened } from '../../score/text'
import type { Capo, Head, OpenString } from '../../score/types'
import { validateHead } from '../../score/validate'
import type { RawStaff } from './attributes'
import { statedMidi, type RawMeasure } from './readMeasures'
import type { Remarks } from './remarks'
import { FIELD, SOFTWARE, caposFromText, staffTuning, stringsFromText } from './terms'
import { all, has, one, textAt } from './tree'

/** True for a file that Copperwound wrote and no other program rewrote. */
export const isOwn = (root: XmlElement): boolean => textAt(root, 'identification', 'encoding', 'software') === SOFTWARE

function fieldsOf(root: XmlElement): Readonly<Record<string, string>> {
  const fields = all(one(root, 'identification', 'miscellaneous'), 'miscellaneous-field')
  return Object.fromEntries(fields.map(each => [each.attributes.name ?? '', each.text]))
}

/** Fields of the first bar that the arrangement itself left to the default. */
export const unstatedOf = (root: XmlElement): readonly string[] => (fieldsOf(root)[FIELD.unstated] ?? '').split(' ').filter(Boolean)

function creators(root: XmlElement, type: string): string {
  return all(one(root, 'identification'), 'creator').filter(each => (each.attributes.type ?? 'composer') === type).map(each => each.text).join(', ')
}

function remarkIdentification(root: XmlElement, remarks: Remarks): void {
  for (const each of all(one(root, 'identification'), 'creator')) {
    const type = each.attributes.type ?? 'composer'
    if (type !== 'composer' && type !== 'arranger') remarks.say(`Left out: the ${type}, ${each.text.trim()}.`)
  }
  if (has(root, 'credit')) remarks.say('Left out: text on the page (credits).')
}

/** Strings as the tab staff states them, string 1 first; null where it states none or not all. */
function stringsOf(tab: RawStaff | null): OpenString[] | null {
  if (!tab?.tunings.size) return null
  const count = Math.max(tab.lines ?? 0, ...tab.tunings.keys())
  const strings = Array.from({ length: count }, (_, index) => {
    const tuning = tab.tunings.get(count - index)
    return tuning && Math.abs(tuning.alter) <= 2 && Number.isInteger(tuning.alter) ? { pitch: pitchText(tuning) } : null
  })
  return strings.every(each => each !== null) ? strings : null
}

interface Setup { readonly strings: readonly OpenString[], readonly capos: readonly Capo[] }

function setupOf(tab: RawStaff | null, remarks: Remarks): Setup | { readonly problem: string } {
  const capos = tab?.capo ? [{ fret: tab.capo }] : []
  const strings = stringsOf(tab)
  if (!strings) {
    const lines = tab?.lines ?? 6
    if (lines !== 6) return { problem: `The tablature has ${lines} lines and no tuning for each. Add the tuning of every string (staff-tuning) where the file was made, and export it again.` }
    remarks.say('The file states no tuning: standard tuning was taken.')
    return { strings: STANDARD_TUNING, capos }
  }
  return { strings, capos }
}

/** Own fields hold while they say the same as the staff; after a change by another program the staff is right. */
function exactSetup(setup: Setup, head: Head, fields: Readonly<Record<string, string>>, remarks: Remarks): Setup {
  if (!fields[FIELD.strings]) return setup
  const exact = { strings: stringsFromText(fields[FIELD.strings] ?? ''), capos: caposFromText(fields[FIELD.capos] ?? '') }
  const exactHead = { ...head, ...exact }
  const agrees = validateHead(exactHead) === null && exact.strings.length === setup.strings.length
    && capoOffset(exactHead) === capoOffset({ ...head, ...setup })
    && setup.strings.every((open, index) => open.pitch === pitchText(staffTuning(exactHead, index + 1)))
  if (agrees) return exact
  remarks.say('The tuning was changed after Copperwound wrote the file: a partial capo or short string is taken as a tuning of its string.')
  return setup
}

function textsOf(root: XmlElement, remarks: Remarks): Pick<Head, keyof typeof TEXT_MOST> {
  const fitted = (field: keyof typeof TEXT_MOST, text: string): string => {
    const fits = shortened(text, TEXT_MOST[field])
    if (fits !== text) remarks.say(`Shortened to ${TEXT_MOST[field]} characters: the ${field}.`)
    return fits
  }
  return {
    title: fitted('title', textAt(root, 'work', 'work-title') ?? textAt(root, 'movement-title') ?? ''),
    composer: fitted('composer', creators(root, 'composer')), arranger: fitted('arranger', creators(root, 'arranger')),
    rights: fitted('rights', all(one(root, 'identification'), 'rights').map(each => each.text).join('\n')),
    source: fitted('source', textAt(root, 'identification', 'source') ?? ''),
  }
}

export function readHead(root: XmlElement, tab: RawStaff | null, highestFret: number, remarks: Remarks): Head | { readonly problem: string } {
  const setup = setupOf(tab, remarks)
  if ('problem' in setup) return setup
  remarkIdentification(root, remarks)
  const fields = fieldsOf(root)
  const [scaleLength, frets] = (fields[FIELD.instrument] ?? '').split(' ').map(Number)
  const isStated = scaleLength !== undefined && frets !== undefined && scaleLength >= 300 && scaleLength <= 1000 && frets >= 5 && frets <= 36
  const instrument = isStated ? { scaleLength, frets } : STEEL_STRING_GUITAR
  const capo = setup.capos[0]?.fret ?? 0
  const head: Head = {
    ...textsOf(root, remarks),
    ring: fields[FIELD.ring] === 'let-ring' ? 'let-ring' : 'written',
    instrument: { ...instrument, frets: isStated ? instrument.frets : Math.min(36, Math.max(instrument.frets, capo + highestFret)) },
    ...setup,
  }
  return { ...head, ...exactSetup(setup, head, fields, remarks) }
}

/** What the pitches of notes with string and fret say of the capo. */
export type PitchRule = 'sounding' | 'without-capo' | 'unclear'

/**
 * Compares stated pitch with tuning + fret, with and without the capo. MusicXML says that the tuning is without the capo
 * (XSD, staff-tuning and capo), which makes the sounding pitch include it; files differ.
 */
export function pitchRule(head: Head, measures: readonly RawMeasure[], staff: number, remarks: Remarks): PitchRule {
  const capo = capoOffset(head)
  let withCapo = 0
  let without = 0
  const odd: string[] = []
  for (const measure of measures) {
    for (const note of measure.notes) {
      const midi = statedMidi(note)
      if (note.staff !== staff || midi === null || note.string === undefined || note.fret === undefined || note.harmonic !== 'none') continue
      if (note.string < 1 || note.string > head.strings.length) continue
      const sounding = openMidi(head, note.string) + note.fret
      if (midi === sounding) withCapo++
      else if (midi === sounding - capo) without++
      else odd.push(measure.number)
    }
  }
  for (const bar of odd) remarks.count('{n} notes had a pitch that does not fit string and fret, which were kept ({bars}).', bar)
  if (withCapo + without === 0) return 'unclear'
  const rule = withCapo >= without ? 'sounding' : 'without-capo'
  if (capo) {
    remarks.say(rule === 'sounding'
      ? `Pitches in the file are tuning + capo + fret, as they sound with capo ${capo}.`
      : `Pitches in the file are tuning + fret, without the capo: string, fret and capo ${capo} were kept, so that it sounds ${capo} half steps higher than the file's pitches.`)
  }
  return rule
}

/** For placing notes: the sounding pitch that a stated one means. */
export const meantMidi = (head: Head, rule: PitchRule, midi: number): number => (rule === 'without-capo' ? midi + capoOffset(head) : midi)
