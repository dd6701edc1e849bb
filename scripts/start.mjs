// `npm start`: everything from a fresh clone to a running server. Only Node's own modules, since nothing may be installed yet.
import { createServer } from 'node:net'
import { join, resolve } from 'node:path'
import { pathToFileURL } from 'node:url'
import { ensureBuild, ensureDependencies } from './prepare.mjs'
import { root, stop } from './run.mjs'
import { sessionSecret } from './secret.mjs'

const [major, minor] = process.versions.node.split('.').map(Number)
if (major < 20 || (major === 20 && minor < 19)) stop(`Copperwound needs Node 20.19 or newer; this is ${process.versions.node}.`)

const port = Number(process.env.PORT || 3000)
const host = process.env.HOST || '127.0.0.1'
if (!Number.isInteger(port) || port < 1 || port > 65535) stop(`PORT is “${process.env.PORT}”; it must be a number from 1 to 65535.`)

/** Asked before anything takes time. */
const checkPort = () => new Promise((done) => {
  const probe = createServer()
  probe.once('error', ({ code }) => stop({
    EADDRINUSE: `Port ${port} is in use by another program. Stop that one, or set PORT to another number.`,
    EACCES: `This user may not open port ${port}. Set PORT to a number above 1023.`,
  }[code] ?? `Port ${port} on ${host} can't be opened (${code}). Check HOST and PORT.`))
  probe.listen(port, host, () => probe.close(done))
})

await checkPort()
const secret = process.env.NUXT_SESSION_PASSWORD || sessionSecret(join(root, '.data'))
ensureDependencies()
ensureBuild()
Object.assign(process.env, {
  NODE_ENV: 'production',
  PORT: String(port),
  HOST: host,
  NUXT_SESSION_PASSWORD: secret,
  PGLITE_DIR: resolve(root, process.env.PGLITE_DIR || '.data/pglite'),
  // A public address makes it a server for others; without one it is run for oneself.
  COPPERWOUND_MODE: process.env.COPPERWOUND_MODE || (process.env.APP_URL ? 'production' : 'local'),
})
await import(pathToFileURL(join(root, '.output', 'server', 'index.mjs')).href)
