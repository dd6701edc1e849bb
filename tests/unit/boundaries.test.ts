import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { dirname, join, normalize } from 'node:path'
import { describe, expect, it } from 'vitest'
import { boundaries } from '../support/boundaries.mjs'

/** Everything that a file imports, by path from the root where it is ours: statements, re-exports and calls of import(). */
function importsOf(file: string): { readonly target: string, readonly typeOnly: boolean }[] {
  const text = readFileSync(file, 'utf8')
  const statements = text.matchAll(/(?:^|[;\n])\s*(?:import|export)\s+(type\s)?[^'";]*?from\s*['"]([^'"]+)['"]|import\(\s*['"]([^'"]+)['"]|(?:^|[;\n])\s*import\s*['"]([^'"]+)['"]/g)
  return [...statements].map(match => ({ target: resolved(file, match[2] ?? match[3] ?? match[4]!), typeOnly: Boolean(match[1]) }))
}

function resolved(file: string, specifier: string): string {
  if (specifier.startsWith('.')) return normalize(join(dirname(file), specifier))
  return specifier.replace(/^#shared\//, 'shared/').replace(/^(~~|~|@)\//, '')
}

const filesIn = (folder: string): string[] => (existsSync(folder) ? readdirSync(folder, { recursive: true, encoding: 'utf8' }) : [])
  .filter(name => /\.(ts|mts|vue)$/.test(name)).map(name => join(folder, name))

const isOurs = (target: string): boolean => /^(shared|stores|composables|components|pages|layouts|server|middleware|plugins|tests)\//.test(target)

describe.each(boundaries.map(({ folder, allowed }) => ({ folder, allowed })))('$folder', ({ folder, allowed }) => {
  it(`imports from itself${allowed.length ? `, ${allowed.join(', ')}` : ''} and packages only`, () => {
    const may = (target: string) => [folder, ...allowed].some(each => target === each || target.startsWith(`${each}/`))
    const found = filesIn(folder).flatMap(file => importsOf(file)
      .filter(({ target }) => isOurs(target) && !may(target)).map(({ target }) => `${file} → ${target}`))
    expect(found).toEqual([])
  })
})

describe('shared', () => {
  it('is every folder under the law but types, which only declares', () => {
    const folders = readdirSync('shared', { withFileTypes: true }).filter(entry => entry.isDirectory()).map(entry => `shared/${entry.name}`)
    expect(folders.filter(folder => !boundaries.some(each => each.folder === folder))).toEqual(['shared/types'])
    expect(filesIn('shared/types').filter(file => !file.endsWith('.d.ts'))).toEqual([])
  })

  it('knows neither Vue nor Nuxt nor the server’s framework, and no browser or clock of its own', () => {
    const frameworks = /^(vue|pinia|nuxt|h3|nitropack|#imports|#app|#nitro|@vueuse|drizzle-orm|node:)/
    const found = filesIn('shared').flatMap(file => importsOf(file).filter(({ target }) => frameworks.test(target)).map(({ target }) => `${file} → ${target}`))
    expect(found).toEqual([])
    const core = ['shared/score', 'shared/edits', 'shared/editor', 'shared/commands'].flatMap(filesIn)
    expect(core.length).toBeGreaterThan(20)
    expect(core.filter(file => /\b(Date\.now|Math\.random|new Date|document\.|window\.|localStorage|crypto\.)/.test(readFileSync(file, 'utf8')))).toEqual([])
  })

  it('has no circle of imports in the core', () => {
    const core = ['shared/score', 'shared/edits', 'shared/editor', 'shared/commands'].flatMap(filesIn)
    const graph = new Map(core.map(file => [file, importsOf(file).filter(({ typeOnly }) => !typeOnly).flatMap(({ target }) => [`${target}.ts`, `${target}/index.ts`]).filter(file => core.includes(file))]))
    const circles: string[] = []
    const done = new Set<string>()
    const visit = (file: string, path: readonly string[]) => {
      if (path.includes(file)) circles.push([...path.slice(path.indexOf(file)), file].join(' → '))
      else if (!done.has(file)) for (const next of graph.get(file) ?? []) visit(next, [...path, file])
      done.add(file)
    }
    for (const file of core) visit(file, [])
    expect(circles).toEqual([])
  })
})

describe('the check itself', () => {
  it('sees imports of every form', () => {
    const own = importsOf('tests/unit/boundaries.test.ts').map(({ target }) => target)
    expect(own).toContain('tests/support/boundaries.mjs')
    expect(importsOf('shared/commands/registry.ts').map(({ target }) => target)).toEqual(expect.arrayContaining(['shared/editor', 'shared/commands/fret']))
    expect(importsOf('shared/editor/index.ts').map(({ target }) => target)).toContain('shared/editor/place')
  })
})
