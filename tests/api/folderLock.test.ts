import { execFileSync, spawn } from 'node:child_process'
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, symlinkSync, utimesSync, writeFileSync } from 'node:fs'
import { hostname } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, it } from 'vitest'
import { FolderInUse, lockFolder } from '../../server/db/folderLock'
import { tempDir } from '../support/server'

const home = tempDir()
let count = 0
const folder = () => join(home, `data-${count++}`)
const held = (dir: string, holder: object) => writeFileSync(`${dir}.lock`, JSON.stringify(holder))
afterAll(() => rmSync(home, { recursive: true, force: true }))

it('is there while it is held and gone afterwards', () => {
  const dir = folder()
  const release = lockFolder(`${dir}/`)
  expect(JSON.parse(readFileSync(`${dir}.lock`, 'utf8'))).toMatchObject({ pid: process.pid, host: hostname() })
  release()
  expect(existsSync(`${dir}.lock`)).toBe(false)
  expect(readdirSync(home)).toEqual([])
})

it('holds against a process that lives', () => {
  const other = spawn('sleep', ['60'])
  const dir = folder()
  held(dir, { pid: other.pid, started: '', host: hostname() })
  expect(() => lockFolder(dir)).toThrow(FolderInUse)
  other.kill()
})

it('does not hold for a process that was killed', () => {
  const dir = folder()
  const gone = Number(execFileSync('sh', ['-c', 'echo $$'], { encoding: 'utf8' }))
  held(dir, { pid: gone, started: '1', host: hostname() })
  lockFolder(dir)()
})

it('does not take a new process for an old one with the same number', () => {
  const other = spawn('sleep', ['60'])
  const dir = folder()
  // It began, says the file, one tick after the machine; `sleep` did not.
  held(dir, { pid: other.pid, started: '1', host: hostname() })
  lockFolder(dir)()
  other.kill()
})

it('believes a holder on another machine while its file is fresh', () => {
  const dir = folder()
  held(dir, { pid: 1, started: '', host: 'another-machine' })
  expect(() => lockFolder(dir)).toThrow(/another-machine/)
  const old = new Date(Date.now() - 60_000)
  utimesSync(`${dir}.lock`, old, old)
  lockFolder(dir)()
})

it('is not stopped by a file that was cut short', () => {
  const dir = folder()
  writeFileSync(`${dir}.lock`, '{"pid":')
  lockFolder(dir)()
})

it('is one, by whatever way the folder is named', () => {
  const other = spawn('sleep', ['60'])
  const dir = folder()
  mkdirSync(dir)
  const link = folder()
  symlinkSync(dir, link)
  held(dir, { pid: other.pid, started: '', host: hostname() })
  expect(() => lockFolder(link)).toThrow(FolderInUse)
  other.kill()
})

it('that another took over meanwhile stays with the other', () => {
  const dir = folder()
  const release = lockFolder(dir)
  held(dir, { pid: 1, started: '', host: 'another-machine' })
  release()
  expect(() => lockFolder(dir)).toThrow(/another-machine/)
})

it('goes to one of many processes that find the same stale file', { timeout: 120_000 }, async () => {
  const dir = folder()
  held(dir, { pid: 999_999_999, started: '1', host: hostname() })
  const script = `import { lockFolder } from ${JSON.stringify(join(process.cwd(), 'server/db/folderLock.ts'))}
    try { lockFolder(${JSON.stringify(dir)}); console.log('got'); setInterval(() => {}, 1000) } catch { console.log('no') }`
  const file = join(home, 'contender.ts')
  writeFileSync(file, script)
  const children = Array.from({ length: 6 }, () => spawn(process.execPath, ['node_modules/jiti/lib/jiti-cli.mjs', file]))
  const tries = children.map(child => new Promise<string>((done) => {
    let said = ''
    child.stdout.on('data', (chunk: Buffer) => {
      said += chunk.toString()
      done(said.trim())
    })
    child.on('exit', () => done(said.trim()))
  }))
  const said = await Promise.all(tries)
  // The one that got it holds it until the last has asked, however slow the machine.
  for (const child of children) child.kill()
  expect(said.sort()).toEqual(['got', 'no', 'no', 'no', 'no', 'no'])
})
