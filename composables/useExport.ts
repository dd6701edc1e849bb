import type { ExportFile } from '#shared/commands/registry'
import { fileName } from '#shared/formats/filename'
import type { Score } from '#shared/score/types'
import { download } from './useDownload'

/** Makes the file and hands it to the browser. The writers load when they are asked for. */
export async function exportScore(score: Score, file: ExportFile): Promise<void> {
  if (file === 'musicxml') {
    const { writeMusicXml } = await import('#shared/formats/musicxml')
    return download(fileName(score.head.title, 'musicxml'), 'application/vnd.recordare.musicxml+xml', writeMusicXml(score))
  }
  const { writeSaved } = await import('#shared/formats/saved')
  download(fileName(score.head.title, 'json'), 'application/json', writeSaved(score))
}
