import { spawnSync } from 'node:child_process'
import { fileURLToPath } from 'node:url'

export const root = fileURLToPath(new URL('..', import.meta.url))

/** Runs a command in the project's root with its output shown; answers its exit code. */
export function run(command, args, env = {}) {
  const { status, error } = spawnSync(command, args, { cwd: root, stdio: 'inherit', shell: process.platform === 'win32', env: { ...process.env, NUXT_TELEMETRY_DISABLED: '1', ...env } })
  if (error) console.error(`${command}: ${error.message}`)
  return status ?? 1
}

/** One clear line, and the end. */
export function stop(message) {
  console.error(message)
  process.exit(1)
}
