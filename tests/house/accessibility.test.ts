/** Every page is looked over by the accessibility check, and every component stands on such a page, or a written excuse says why not. */
import { basename } from 'node:path'
import { describe, expect, it } from 'vitest'
import list from './accessibility.json'
import { filesIn, importsOf, textOf, withoutComments } from './support/sources'

const pages = filesIn('app/pages', ['.vue'])
const components = filesIn('app/components', ['.vue'])
const nameOf = (path: string) => basename(path, '.vue').replace(/\.(client|server)$/, '')
const kebab = (name: string) => name.replace(/([a-z0-9])([A-Z])/g, '$1-$2').toLowerCase()

/** Components that a file names, as a tag, a lazy tag or in its script. */
function namedIn(path: string): string[] {
  const text = withoutComments(textOf(path))
  return components.filter(one => new RegExp(`\\b(?:Lazy)?${nameOf(one)}\\b|<(?:lazy-)?${kebab(nameOf(one))}[\\s>/]`).test(text) && one !== path)
}

/** Everything that is reached from the files given. */
function reachedFrom(files: string[]): Set<string> {
  const reached = new Set<string>(), queue = [...files]
  for (let path = queue.pop(); path !== undefined; path = queue.pop())
    for (const one of namedIn(path)) {
      if (reached.has(one)) continue
      reached.add(one)
      queue.push(one)
    }
  return reached
}

const excused = Object.keys(list.excuses)
const inPages = (file: string) => `app/pages/${file}`

describe('accessibility', () => {
  it('names only pages and components that are there', () => {
    expect(Object.keys(list.pages).filter(file => !pages.includes(inPages(file)))).toEqual([])
    expect(excused.filter(file => !pages.includes(inPages(file)) && !components.includes(`app/components/${file}`))).toEqual([])
    for (const [file, why] of Object.entries(list.excuses)) expect(why.split(' ').length, file).toBeGreaterThan(7)
  })

  it('looks over every page', () => {
    const known = [...Object.keys(list.pages), ...excused].map(inPages)
    expect(pages.filter(path => !known.includes(path))).toEqual([])
  })

  it('meets every component on a page that is looked over', () => {
    const frame = ['app/app.vue', 'app/error.vue', ...filesIn('app/layouts', ['.vue'])].filter(path => filesIn('app', ['.vue']).includes(path))
    const reached = reachedFrom([...Object.keys(list.pages).map(inPages), ...frame])
    const missed = components.filter(path => !reached.has(path) && !excused.includes(path.slice('app/components/'.length)))
    expect(missed).toEqual([])
  })

  it('is a check of the browser suite on this very list', () => {
    const checks = filesIn('tests/browser', ['.ts']).filter(path => importsOf(path).some(one => one.endsWith('house/accessibility.json')))
    expect(checks.length).toBeGreaterThan(0)
    const all = [...checks, ...filesIn('tests/browser', ['.ts']), ...filesIn('tests/support', ['.ts'])]
    expect(all.some(path => importsOf(path).includes('@axe-core/playwright'))).toBe(true)
  })
})
