import type { Head } from '#shared/score/types'

/** The line under the title: who composed, who arranged; one person for both is named once. */
export function peopleLine({ composer, arranger }: Pick<Head, 'composer' | 'arranger'>): string {
  const [wrote, set] = [composer.trim(), arranger.trim()]
  if (wrote && wrote === set) return `composed and arranged by ${wrote}`
  return [wrote && (/^traditional/i.test(wrote) ? wrote : `composed by ${wrote}`), set && `arranged by ${set}`].filter(Boolean).join(', ')
}
