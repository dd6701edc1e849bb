/** Which folders each folder may import from, besides itself and packages. */
const allowed = {
  'shared/score': [],
  'shared/edits': ['shared/score'],
  'shared/tunings': ['shared/score'],
  'shared/hand': ['shared/score', 'shared/tunings'],
  'shared/formats': ['shared/score'],
  'shared/permissions': ['shared/score'],
  'shared/schemas': ['shared/score', 'shared/edits', 'shared/permissions'],
  'shared/ring': ['shared/score', 'shared/tunings'],
  'shared/sound': ['shared/score', 'shared/tunings', 'shared/ring'],
  'shared/engraving': ['shared/score', 'shared/tunings', 'shared/ring'],
  'shared/editor': ['shared/score', 'shared/edits'],
  'shared/commands': ['shared/score', 'shared/edits', 'shared/editor'],
  'stores': ['shared'],
  'composables': ['stores', 'shared'],
  'components': ['composables', 'stores', 'shared'],
  'server/db': [],
  'server/utils': ['server/db', 'shared'],
  'server/api': ['server/utils', 'shared'],
}

const folders = Object.keys(allowed)
const all = [...folders, 'pages', 'layouts']
const may = (folder, target) => target === folder || allowed[folder].some(each => target === each || target.startsWith(`${each}/`))

/** One entry a folder: the import patterns it must not use. */
export const boundaries = folders.map(folder => ({
  folder,
  allowed: allowed[folder],
  forbidden: all.filter(target => !may(folder, target)).flatMap((target) => {
    const local = target.split('/').at(-1)
    const sibling = target.split('/')[0] === folder.split('/')[0] ? [`../${local}/**`, `../${local}`] : []
    return [`#shared/${target.replace('shared/', '')}/**`, `~/${target}/**`, `~~/${target}/**`, `**/${target}/**`, ...sibling]
      .filter(pattern => target.startsWith('shared/') || !pattern.startsWith('#shared'))
  }),
  message: `${folder} may import from itself${allowed[folder].length ? `, ${allowed[folder].join(', ')}` : ''} and packages only.`,
}))
