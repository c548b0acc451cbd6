// The arrows of the house: who may import whom, and that no SQL is pasted together.
import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join, relative, resolve } from 'node:path'
import ts from 'typescript'
import { describe, expect, it } from 'vitest'

const root = resolve(import.meta.dirname, '../..')
const aliases: Record<string, string> = { '@shared/': 'shared/', '@server/': 'server/', '@client/': 'client/' }

const filesIn = (folder: string): string[] =>
  readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.(ts|tsx|mts)$/.test(entry.name))
    .map((entry) => relative(root, join(entry.parentPath, entry.name)))

const targetOf = (file: string, specifier: string): string => {
  for (const [alias, folder] of Object.entries(aliases))
    if (specifier.startsWith(alias)) return folder + specifier.slice(alias.length)
  return specifier.startsWith('.') ? relative(root, resolve(root, dirname(file), specifier)) : specifier
}
const importsOf = (file: string): string[] =>
  ts
    .preProcessFile(readFileSync(join(root, file), 'utf8'), true, true)
    .importedFiles.map(({ fileName }) => targetOf(file, fileName))

const files = ['shared', 'server', 'client', 'migrations'].flatMap(filesIn)
const imports = files.flatMap((file) => importsOf(file).map((target) => ({ file, target })))
const faults = (isWrong: (file: string, target: string) => boolean): string[] =>
  imports.filter(({ file, target }) => isWrong(file, target)).map(({ file, target }) => `${file} imports ${target}`)
const within = (path: string, ...folders: string[]): boolean =>
  folders.some((folder) => path === folder || path.startsWith(`${folder}/`))

/** Pure packages about music and shapes. */
const sharedPackages = ['zod', 'tonal', 'chord-symbol']
const isPackage = (target: string) => !within(target, 'shared', 'server', 'client', 'migrations', 'seeds', 'tests')
const nameOf = (target: string) =>
  target
    .split('/')
    .slice(0, target.startsWith('@') ? 2 : 1)
    .join('/')
const featureOf = (path: string) => /^client\/features\/([^/]+)/.exec(path)?.[1]

describe('imports', () => {
  it('were found at all', () => {
    expect(files.length).toBeGreaterThan(100)
    expect(imports.length).toBeGreaterThan(300)
    expect(imports.some(({ target }) => target.startsWith('shared/contracts/'))).toBe(true)
  })
  it('of shared stay in shared and a few pure packages', () => {
    expect(
      faults(
        (file, target) =>
          within(file, 'shared') && !within(target, 'shared') && !sharedPackages.includes(nameOf(target))
      )
    ).toEqual([])
  })
  it('never cross between server and client', () => {
    expect(faults((file, target) => within(file, 'server') && within(target, 'client'))).toEqual([])
    expect(
      faults((file, target) => within(file, 'client') && (within(target, 'server') || target.startsWith('node:')))
    ).toEqual([])
  })
  it('run from routes, realtime and jobs to services to repositories', () => {
    const upper = ['server/routes', 'server/realtime', 'server/jobs', 'server/http']
    expect(
      faults(
        (file, target) =>
          within(file, 'server/repositories') && within(target, 'server/services', 'server/routes', 'server/realtime')
      )
    ).toEqual([])
    expect(
      faults((file, target) => within(file, 'server/services') && within(target, 'server/routes', 'server/realtime'))
    ).toEqual([])
    expect(
      faults((file, target) => within(file, 'server/routes') && within(target, 'server/repositories', 'server/db'))
    ).toEqual([])
    expect(
      faults(
        (file, target) =>
          within(file, 'server/media') && within(target, ...upper, 'server/services', 'server/repositories')
      )
    ).toEqual([])
  })
  it('of knex stay in repositories and db, of express in http and app', () => {
    const mayKnow = (file: string) => within(file, 'server/repositories', 'server/db', 'migrations')
    expect(faults((file, target) => nameOf(target) === 'knex' && !mayKnow(file))).toEqual([])
    const mayServe = (file: string) => within(file, 'server/http') || file === 'server/app.ts'
    // Types of a handler are all that the socket side needs of it.
    const isTypeOnly = (file: string) =>
      /import type \{[^}]*\} from 'express'/.test(readFileSync(join(root, file), 'utf8'))
    expect(faults((file, target) => nameOf(target) === 'express' && !mayServe(file) && !isTypeOnly(file))).toEqual([])
  })
  it('of services make no circle', () => {
    const next = new Map<string, string[]>()
    for (const { file, target } of imports)
      if (within(file, 'server/services') && within(target, 'server/services'))
        next.set(file, [...(next.get(file) ?? []), target.endsWith('.ts') ? target : `${target}.ts`])
    const circles: string[] = []
    const walk = (file: string, path: string[]): void => {
      if (path.includes(file)) {
        circles.push([...path.slice(path.indexOf(file)), file].join(' -> '))
        return
      }
      for (const target of next.get(file) ?? []) walk(target, [...path, file])
    }
    for (const file of next.keys()) walk(file, [])
    expect(circles).toEqual([])
  })
  it('of a client feature never reach another feature; only app puts them together', () => {
    expect(
      faults((file, target) => {
        const [from, to] = [featureOf(file), featureOf(target)]
        return from !== undefined && to !== undefined && from !== to
      })
    ).toEqual([])
    const lower = ['client/transport', 'client/timeline', 'client/ui', 'client/lib']
    expect(faults((file, target) => within(file, ...lower) && within(target, 'client/features', 'client/app'))).toEqual(
      []
    )
    expect(faults((file, target) => featureOf(file) !== undefined && within(target, 'client/app'))).toEqual([])
  })
  it('have no barrel files to go through', () => {
    expect(files.filter((file) => /\/index\.tsx?$/.test(file))).toEqual([])
  })
  it('of migrations know no app code', () => {
    expect(faults((file, target) => within(file, 'migrations') && !isPackage(target))).toEqual([])
  })
})

describe('raw SQL (ASVS V1.2.4)', () => {
  /** Names of constants that are SQL text of their own file, without anything from outside. */
  const safe = new Set(['standingColumns'])
  it('takes values by binding only: nothing is put into its text', () => {
    const found: string[] = []
    for (const file of files.filter((one) => within(one, 'server', 'migrations'))) {
      const source = ts.createSourceFile(file, readFileSync(join(root, file), 'utf8'), ts.ScriptTarget.ES2022, true)
      const visit = (node: ts.Node): void => {
        if (ts.isCallExpression(node) && ts.isPropertyAccessExpression(node.expression)) {
          const called = node.expression.name.text
          const [text] = node.arguments
          if (/raw$/i.test(called) && text) {
            const isPlain =
              ts.isStringLiteral(text) || ts.isNoSubstitutionTemplateLiteral(text) || ts.isIdentifier(text)
            const isOfConstants =
              ts.isTemplateExpression(text) &&
              text.templateSpans.every(({ expression }) => ts.isIdentifier(expression) && safe.has(expression.text))
            if (!isPlain && !isOfConstants) found.push(`${file}: ${text.getText().slice(0, 80)}`)
          }
          if (called === 'query' && text && ts.isTemplateExpression(text) && !/escapeIdentifier/.test(text.getText()))
            found.push(`${file}: ${text.getText().slice(0, 80)}`)
        }
        ts.forEachChild(node, visit)
      }
      visit(source)
    }
    expect(found).toEqual([])
  })
})
