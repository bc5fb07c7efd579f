/** The project's own files, and what they import, as the house rules see them. */
import { existsSync, readFileSync, readdirSync } from 'node:fs'
import { dirname, join, posix, relative } from 'node:path'
import { fileURLToPath } from 'node:url'

export const ROOT = fileURLToPath(new URL('../../..', import.meta.url)).replace(/\/$/, '')
/** What is made by tools, or not ours. */
const NOT_OURS = new Set(['node_modules', '.nuxt', '.output', '.data', '.git', 'coverage', 'shots'])

function* walk(folder: string): Generator<string> {
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    if (NOT_OURS.has(entry.name)) continue
    const path = join(folder, entry.name)
    if (entry.isDirectory()) yield* walk(path)
    else yield path
  }
}

/** Files under a folder of the project whose name ends in one of the endings, as paths from the project's root. */
export function filesIn(folder: string, endings: string[]): string[] {
  const start = join(ROOT, folder)
  if (!existsSync(start)) return []
  return [...walk(start)].filter(path => endings.some(ending => path.endsWith(ending))).map(path => relative(ROOT, path)).sort()
}

/** Text of a file of the project. */
export const textOf = (path: string): string => readFileSync(join(ROOT, path), 'utf8')

/** Code without comments; strings stay. */
export const withoutComments = (text: string): string =>
  text.replace(/\/\*[\s\S]*?\*\//g, ' ').replace(/<!--[\s\S]*?-->/g, ' ').replace(/(^|[\s;{}(,])\/\/.*$/gm, '$1')

const IMPORT = /(?:\bfrom\s*|\bimport\s*\(\s*|\bimport\s+|\bnew URL\(\s*)(["'])([^"'\s]+)\1/g

/** Module names that a file imports: static, dynamic, for their effect, as a type, or as a worker's address. */
export function importsOf(path: string): string[] {
  return [...withoutComments(textOf(path)).matchAll(IMPORT)].map(found => found[2]!)
}

const ALIASES: [RegExp, string][] = [[/^#shared\//, 'shared/'], [/^(?:~~|@@)\//, ''], [/^(?:~|@)\//, 'app/'], [/^#server\//, 'server/']]

/** Where an import leads: a path from the project's root, or null when it names a package. */
export function targetOf(from: string, specifier: string): string | null {
  if (specifier.startsWith('.')) return posix.normalize(posix.join(dirname(from), specifier))
  const alias = ALIASES.find(([pattern]) => pattern.test(specifier))
  return alias ? posix.normalize(specifier.replace(...alias)) : null
}

/** Name of a package without the path inside it. */
export const packageOf = (specifier: string): string => specifier.split('/').slice(0, specifier.startsWith('@') ? 2 : 1).join('/')
