export { readMusicXml, type ReadMusicXml } from './read'
export { writeMusicXml, type WriteOptions } from './write'
