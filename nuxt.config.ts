export default defineNuxtConfig({
  modules: ['@pinia/nuxt', '@nuxtjs/tailwindcss', 'nuxt-auth-utils', '@nuxt/eslint'],
  devtools: { enabled: false },
  runtimeConfig: {
    session: { name: 'copperwound-session', password: '', maxAge: 60 * 60 * 24 * 30, cookie: { secure: true } },
  },
  srcDir: '.',
  compatibilityDate: '2026-01-01',
  // The folder is relative to server/.
  nitro: { serverAssets: [{ baseName: 'migrations', dir: './db/migrations' }] },
  typescript: { strict: true, tsConfig: { compilerOptions: { noUncheckedIndexedAccess: true } } },
  telemetry: false,
  eslint: { config: { stylistic: { quotes: 'single', semi: false, indent: 2 } } },
  tailwindcss: { cssPath: '~/assets/css/main.css' },
})
