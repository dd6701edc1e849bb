import withNuxt from './.nuxt/eslint.config.mjs'

/** What each folder may import besides itself; tests/unit/boundaries.test.ts checks the same table over the whole tree. */
import { boundaries } from './tests/support/boundaries.mjs'

export default withNuxt(
  ...boundaries.map(({ folder, forbidden, message }) => ({
    files: [`${folder}/**/*.{ts,vue}`],
    rules: { 'no-restricted-imports': ['error', { patterns: forbidden.map(group => ({ group: [group], message })) }] },
  })),
)
