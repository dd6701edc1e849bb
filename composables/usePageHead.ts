import { useHead } from '#imports'
import { useSettings } from '~/stores/settings'

/** What every page's head has, the error page's as well: language, palette, title, description. */
export function usePageHead() {
  const settings = useSettings()
  useHead({
    titleTemplate: title => title ? `${title} · Copperwound` : 'Copperwound: guitar in altered tunings',
    htmlAttrs: { lang: 'en', class: () => settings.palette === 'system' ? '' : settings.palette },
    meta: [
      { name: 'description', content: 'Arrange solo guitar music in altered tunings: enter it by keyboard, hear it as the strings ring, export files that open everywhere.' },
      { name: 'theme-color', content: '#efe8da', media: '(prefers-color-scheme: light)' },
      { name: 'theme-color', content: '#14110d', media: '(prefers-color-scheme: dark)' },
    ],
  })
}
