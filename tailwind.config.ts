import type { Config } from 'tailwindcss'

/** Colours are the palette's variables, so that day and night share every class. */
const palette = ['ground', 'sheet', 'ink', 'ink-soft', 'line', 'line-strong', 'copper', 'copper-tint', 'verdigris', 'verdigris-tint', 'madder', 'ochre']

export default {
  content: [],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...Object.fromEntries(palette.map(name => [name, `var(--${name})`])),
    },
    fontFamily: {
      serif: ['Alegreya', 'Georgia', 'serif'],
      sans: ['"Alegreya Sans"', 'system-ui', 'sans-serif'],
    },
  },
} satisfies Config
