import { fileName } from '#shared/formats/filename'
import type { Score } from '#shared/score/types'
import { download } from './useDownload'

/** Files that the desk hands out. The writers load when they are asked for. */
export const EXPORTS = [
  { id: 'musicxml', label: 'MusicXML, for other programs' },
  { id: 'saved', label: 'Copperwound file, complete' },
] as const
export type ExportId = typeof EXPORTS[number]['id']

export async function exportScore(score: Score, id: ExportId): Promise<void> {
  if (id === 'musicxml') {
    const { writeMusicXml } = await import('#shared/formats/musicxml')
    return download(fileName(score.head.title, 'musicxml'), 'application/vnd.recordare.musicxml+xml', writeMusicXml(score))
  }
  const { writeSaved } = await import('#shared/formats/saved')
  download(fileName(score.head.title, 'json'), 'application/json', writeSaved(score))
}
