// What `npm start` and `npm test` need before anything of the project can run. Only Node's own modules.
import { createHash } from 'node:crypto'
import { existsSync, readFileSync, readdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { root, run, stop } from './run.mjs'

/** What a build does not read, besides what begins with a dot: a log written beside the sources must not bring a build with every start. */
const NOT_SOURCE = new Set(['node_modules', 'tests', 'docs', 'scripts', 'dist', 'coverage', 'test-results', 'playwright-report'])
const isSource = name => !name.startsWith('.') && !NOT_SOURCE.has(name) && !/\.(md|log)$|^(playwright|vitest|eslint|drizzle)\./.test(name)

/** Hash of the content of these files and folders, by path. */
function fingerprint(paths) {
  const hash = createHash('sha256')
  const visit = (path) => {
    const full = join(root, path)
    hash.update(path)
    hash.update(readFileSync(full))
  }
  const walk = (folder) => {
    for (const entry of readdirSync(join(root, folder), { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1))) {
      if (entry.isDirectory()) walk(join(folder, entry.name))
      else visit(join(folder, entry.name))
    }
  }
  for (const path of paths) {
    if (path.endsWith('/')) walk(path)
    else visit(path)
  }
  return hash.digest('hex')
}

function isStale(stamp, now) {
  const file = join(root, stamp)
  return !existsSync(file) || readFileSync(file, 'utf8') !== now
}

/** Installs from the lock file when it changed since the last time, or when nothing is installed. */
export function ensureDependencies() {
  const stamp = 'node_modules/.copperwound-lock'
  const now = fingerprint(['package-lock.json'])
  if (!isStale(stamp, now)) return
  console.log('Installing what the lock file names (about a minute)…')
  // What builds is among the development dependencies, which NODE_ENV=production would leave out.
  if (run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund']) !== 0) stop('npm ci failed; its messages above say why. Run the command again once that is mended.')
  writeFileSync(join(root, stamp), now)
}

/** Builds when any source changed since the last build. */
export function ensureBuild() {
  const stamp = '.output/.copperwound-source'
  const sources = readdirSync(root, { withFileTypes: true })
    .filter(entry => isSource(entry.name))
    .map(entry => (entry.isDirectory() ? `${entry.name}/` : entry.name))
  const now = fingerprint(sources.sort())
  if (!isStale(stamp, now)) return
  console.log('Building (about half a minute)…')
  if (run('npx', ['nuxt', 'build']) !== 0) stop('The build failed; its messages above say why.')
  writeFileSync(join(root, stamp), now)
}

/** Browser tests need Chromium: installed by apt where it is missing and this user may. */
export function ensureChromium() {
  const path = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium'
  if (existsSync(path)) return
  console.log('Installing Chromium from Debian…')
  const may = process.getuid?.() === 0
  if (!may || run('apt-get', ['update', '-qq']) !== 0 || run('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], { DEBIAN_FRONTEND: 'noninteractive' }) !== 0) {
    stop(`No Chromium at ${path}, and it could not be installed. Install it (apt-get install chromium) or name it in CHROMIUM_PATH.`)
  }
}
