import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { defineConfig } from '@playwright/test'

const port = Number(process.env.E2E_PORT ?? 4310)
const baseURL = `http://127.0.0.1:${port}`
// Workers load this file too: the folder is made once and handed on.
const data = process.env.E2E_DATA ??= mkdtempSync(join(tmpdir(), 'copperwound-e2e-'))

export default defineConfig({
  testDir: './tests/e2e',
  timeout: 60_000,
  workers: 1,
  forbidOnly: Boolean(process.env.CI),
  use: {
    baseURL,
    browserName: 'chromium',
    viewport: { width: 1440, height: 900 },
    launchOptions: {
      executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
      args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking',
        '--disable-component-update', '--disable-sync', '--autoplay-policy=no-user-gesture-required'],
    },
  },
  webServer: {
    command: `node ${process.env.COPPERWOUND_OUTPUT ?? '.output'}/server/index.mjs`,
    url: `${baseURL}/api/ready`,
    timeout: 60_000,
    reuseExistingServer: false,
    env: {
      PORT: String(port),
      HOST: '127.0.0.1',
      NODE_ENV: 'production',
      COPPERWOUND_MODE: 'local',
      PGLITE_DIR: join(data, 'pglite'),
      NUXT_SESSION_PASSWORD: 'only-for-tests-only-for-tests-only',
    },
  },
})
