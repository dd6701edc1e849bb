import { randomBytes } from 'node:crypto'
import { accessSync, chmodSync, constants, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { stop } from './run.mjs'

/** Characters that sealing a session takes at least. */
const LEAST = 32

/** The secret that seals session cookies: made once in this folder, kept readable for this user only. */
export function sessionSecret(folder) {
  const file = join(folder, 'session-secret')
  try {
    mkdirSync(folder, { recursive: true })
    accessSync(folder, constants.W_OK)
    // One that a full disk or a crash cut short is worth nothing: another takes its place, whole or not at all.
    if (!existsSync(file) || readFileSync(file, 'utf8').trim().length < LEAST) {
      writeFileSync(`${file}.new`, randomBytes(32).toString('base64url'), { mode: 0o600 })
      renameSync(`${file}.new`, file)
    }
    chmodSync(file, 0o600)
    return readFileSync(file, 'utf8').trim()
  }
  catch ({ code }) {
    return stop(`The folder ${folder} can't be written (${code}). Give this user the right to write there.`)
  }
}
