import { randomBytes } from 'node:crypto'
import { existsSync, linkSync, readFileSync, realpathSync, renameSync, rmSync, statSync, utimesSync, writeFileSync } from 'node:fs'
import { hostname } from 'node:os'
import { resolve } from 'node:path'

/** The embedded database does not notice a second process on its folder; both would destroy it. This lock does. */

interface Holder { readonly pid: number, readonly started: string, readonly host: string }

/** A holder on another machine can't be asked; it shows that it lives by touching the file this often. */
const BEAT_MS = 5_000
const SILENT_MS = 30_000

/** When a process began, so that a number used again is not taken for the old process. Empty where the system has no /proc. */
function startOf(pid: number): string {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? ''
  }
  catch {
    return ''
  }
}

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  }
  catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM'
  }
}

function isAlive(holder: Holder, path: string): boolean {
  if (holder.host !== hostname()) return Date.now() - statSync(path).mtimeMs < SILENT_MS
  if (holder.pid === process.pid) return false
  return isRunning(holder.pid) && (!holder.started || startOf(holder.pid) === holder.started)
}

const code = (error: unknown) => (error as NodeJS.ErrnoException).code

function link(from: string, to: string): boolean {
  try {
    linkSync(from, to)
    return true
  }
  catch (error) {
    if (code(error) === 'EEXIST') return false
    throw error
  }
}

function read(path: string): string | null {
  try {
    return readFileSync(path, 'utf8')
  }
  catch (error) {
    if (code(error) === 'ENOENT') return null
    throw error
  }
}

function parse(text: string): Holder | null {
  try {
    return JSON.parse(text) as Holder
  }
  catch {
    return null
  }
}

/** Takes a dead holder's file away. Another process may have put its own there meanwhile: then that one goes back. */
function clear(path: string, stale: string, aside: string): void {
  try {
    renameSync(path, aside)
  }
  catch (error) {
    if (code(error) === 'ENOENT') return
    throw error
  }
  if (readFileSync(aside, 'utf8') !== stale) link(aside, path)
  rmSync(aside, { force: true })
}

export class FolderInUse extends Error {
  constructor(readonly pid: number, readonly host: string) {
    super(`in use by process ${pid} on ${host}`)
  }
}

/** One folder has one lock, by whatever way it is named. */
const realPath = (dir: string): string => (existsSync(dir) ? realpathSync(dir) : resolve(dir))

/**
 * Locks a data folder by a file beside it. A lock left by a killed process does not block.
 * @returns releases it
 * @throws FolderInUse when another living process holds it
 */
export function lockFolder(dir: string): () => void {
  const path = `${realPath(dir)}.lock`
  const mine = `${path}.${process.pid}.${randomBytes(4).toString('hex')}`
  const holding = JSON.stringify({ pid: process.pid, started: startOf(process.pid), host: hostname() } satisfies Holder)
  writeFileSync(mine, holding)
  try {
    for (let attempt = 0; !link(mine, path); attempt++) {
      const text = read(path)
      if (text === null) continue
      const holder = parse(text)
      if (holder && (attempt > 4 || isAlive(holder, path))) throw new FolderInUse(holder.pid, holder.host)
      clear(path, text, `${mine}.stale`)
    }
  }
  finally {
    rmSync(mine, { force: true })
  }
  const beat = setInterval(() => touch(path), BEAT_MS)
  beat.unref()
  return () => {
    clearInterval(beat)
    // Whoever slept for long may have been taken for dead: another's lock stays.
    if (read(path) === holding) rmSync(path, { force: true })
  }
}

/** A folder that was taken away under the server shows at the next query; a heartbeat is not the place to fail. */
function touch(path: string): void {
  try {
    const now = new Date()
    utimesSync(path, now, now)
  }
  catch {
    // see above
  }
}
