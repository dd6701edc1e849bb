import type { Score } from '#shared/score/types'

export type ReadFile = { readonly score: Score, readonly remarks: readonly string[] } | { readonly problem: string }

/** Larger than any arrangement of the most bars; a photograph picked by mistake should not be read as text. */
const MOST_BYTES = 20 * 1024 * 1024

/** An arrangement out of a file of ours or a MusicXML file, told apart by content. The readers load when the first file is chosen. */
export async function readArrangementFile(file: Pick<File, 'name' | 'size' | 'text'>): Promise<ReadFile> {
  if (file.size > MOST_BYTES) return { problem: `${file.name} is too large for an arrangement (more than 20 MB).` }
  const content = (await file.text()).replace(/^\uFEFF/, '').trimStart()
  if (content.startsWith('PK')) return { problem: `${file.name} is compressed. Export it as plain MusicXML (.musicxml or .xml) where it came from.` }
  if (content.startsWith('{')) {
    const { readSaved } = await import('#shared/formats/saved')
    const read = readSaved(content)
    return 'problem' in read ? read : { score: read.score, remarks: [] }
  }
  if (!content.startsWith('<')) return { problem: `${file.name} is neither a saved arrangement (.json) nor MusicXML (.musicxml, .xml).` }
  const { readMusicXml } = await import('#shared/formats/musicxml')
  return readMusicXml(content)
}
