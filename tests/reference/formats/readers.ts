import { existsSync, readFileSync } from 'node:fs'
import { parseXml, type XmlElement } from '@rgrove/parse-xml'
import { parseMidi } from 'midi-file'
import type { VerovioToolkit } from 'verovio/esm'
import { validateXML } from 'xmllint-wasm'

/** Independent readers of what is exported: the W3C schema by xmllint (libxml2), and Verovio's MusicXML import. */

const STANDARDS = '../shared/standards'
export const SCHEMA_FOLDER = `${STANDARDS}/musicxml-4.0/schema`
export const EXAMPLES_FOLDER = `${STANDARDS}/musicxml-4.0/examples`
export const LINKED_STAVES_FILE = `${STANDARDS}/linked-staves-capo2.musicxml`
export const hasStandards = existsSync(SCHEMA_FOLDER)
export const SKIPPED = `skipped: ${STANDARDS} is not there (the W3C schema and examples are read in place)`

/** What the W3C XSD of MusicXML 4.0 finds wrong with texts; nothing where all are valid. */
export async function schemaProblems(texts: readonly string[]): Promise<string[]> {
  const file = (name: string) => ({ fileName: name, contents: readFileSync(`${SCHEMA_FOLDER}/${name}`, 'utf8') })
  const result = await validateXML({
    xml: texts.map((contents, index) => ({ fileName: `score-${index}.xml`, contents })),
    schema: [file('musicxml.xsd')], preload: [file('xml.xsd'), file('xlink.xsd')],
    initialMemoryPages: 1024, maxMemoryPages: 4096,
  })
  return result.valid ? [] : result.errors.map(error => error.rawMessage)
}

export interface HeardNote { readonly midi: number, /** In quarters from the start. */ readonly start: number, readonly length: number }

let toolkit: Promise<VerovioToolkit> | undefined

async function createToolkit(): Promise<VerovioToolkit> {
  const [{ default: createModule }, verovio] = await Promise.all([import('verovio/wasm'), import('verovio/esm')])
  return new verovio.VerovioToolkit(await createModule())
}

export async function verovio(text: string): Promise<VerovioToolkit> {
  const loaded = await (toolkit ??= createToolkit())
  if (!loaded.loadData(text)) throw new Error('Verovio could not load the file')
  return loaded
}

/** What Verovio plays, by staff, in order of time and pitch. Its notes: on and off of its MIDI file, read by midi-file. */
export async function heardByVerovio(text: string): Promise<HeardNote[][]> {
  const midi = parseMidi(Buffer.from((await verovio(text)).renderToMIDI(), 'base64'))
  const ticks = midi.header.ticksPerBeat ?? 120
  return midi.tracks.map((track) => {
    const open = new Map<number, number[]>()
    const notes: HeardNote[] = []
    let at = 0
    for (const event of track) {
      at += event.deltaTime
      if (event.type === 'noteOn' && event.velocity > 0) open.set(event.noteNumber, [...(open.get(event.noteNumber) ?? []), at])
      else if (event.type === 'noteOff' || event.type === 'noteOn') {
        const start = open.get(event.noteNumber)?.shift()
        if (start !== undefined) notes.push({ midi: event.noteNumber, start: start / ticks, length: (at - start) / ticks })
      }
    }
    return notes.sort((a, b) => a.start - b.start || a.midi - b.midi || a.length - b.length)
  }).filter(notes => notes.length > 0)
}

export interface TabNote { readonly course: number, readonly fret: number, /** Open pitch of the course, without capo. */ readonly open: number }

const SEMITONES: Readonly<Record<string, number>> = { c: 0, d: 2, e: 4, f: 5, g: 7, a: 9, b: 11 }
const ACCIDENTALS: Readonly<Record<string, number>> = { s: 1, f: -1, ss: 2, ff: -2 }

function* walk(element: XmlElement): Generator<XmlElement> {
  yield element
  for (const child of element.children) {
    if (child.type === 'element') yield* walk(child as XmlElement)
  }
}

/** The tab staff in Verovio's own document (MEI): strings, frets and tuning in the order written, bar by bar, voice by voice. */
export async function tabByVerovio(text: string): Promise<TabNote[]> {
  const { root } = parseXml((await verovio(text)).getMEI())
  const elements = root ? [...walk(root)] : []
  // Courses in the order of the lines, the lowest first; Verovio numbers them from the wrong end where the first line is a high string.
  const lines = elements.filter(each => each.name === 'course').map(({ attributes: { pname = '', oct, accid = '' } }) =>
    12 * (Number(oct) + 1) + (SEMITONES[pname] ?? Number.NaN) + (ACCIDENTALS[accid] ?? 0))
  return elements.filter(each => each.name === 'note' && each.attributes['tab.course'] !== undefined).map(({ attributes }) => ({
    course: Number(attributes['tab.course']), fret: Number(attributes['tab.fret']), open: lines.at(-Number(attributes['tab.course'])) ?? Number.NaN,
  }))
}
