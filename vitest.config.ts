import { fileURLToPath } from 'node:url'
import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))
const alias = { '~~': root, '~': root, '@': root, '#shared': `${root}shared` }
const project = (name: string, more: object = {}) => ({
  resolve: { alias },
  ...(name === 'nuxt' && { plugins: [vue()] }),
  test: { name, include: [`tests/${name}/**/*.test.ts`], ...more },
})

export default defineConfig({
  test: {
    projects: [
      project('unit'),
      project('reference', { testTimeout: 60_000, hookTimeout: 60_000 }),
      project('api', { testTimeout: 30_000, hookTimeout: 60_000 }),
      project('nuxt', { environment: 'happy-dom' }),
    ],
  },
})
