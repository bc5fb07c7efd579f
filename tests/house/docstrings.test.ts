/** Every exported function of the science says what it is, and the unit of each number that it takes and gives. */
import ts from 'typescript'
import { describe, expect, it } from 'vitest'
import { filesIn, textOf } from './support/sources'

const ROOMS = ['shared/kinetics', 'shared/walk', 'shared/fitting', 'shared/transmission']
const NUMERIC = /^(?:readonly\s+)?(?:number|bigint)(?:\[\])*$|^(?:Float64|Float32|Int32|Uint32)Array$/

interface Exported { name: string, node: ts.SignatureDeclaration, holder: ts.Node }

/** Exported function declarations, and exported constants that are functions. */
function exportedFunctions(source: ts.SourceFile): Exported[] {
  const found: Exported[] = []
  const isExported = (node: ts.HasModifiers) => node.modifiers?.some(one => one.kind === ts.SyntaxKind.ExportKeyword)
  for (const statement of source.statements) {
    if (ts.isFunctionDeclaration(statement) && isExported(statement)) found.push({ name: statement.name?.text ?? 'default', node: statement, holder: statement })
    if (!ts.isVariableStatement(statement) || !isExported(statement)) continue
    for (const one of statement.declarationList.declarations)
      if (one.initializer && ts.isArrowFunction(one.initializer)) found.push({ name: one.name.getText(source), node: one.initializer, holder: statement })
  }
  return found
}

/** What is missing from a function's docstring. */
function complaints(source: ts.SourceFile, { name, node, holder }: Exported): string[] {
  const leading = ts.getLeadingCommentRanges(source.text, holder.pos)?.at(-1)
  const doc = leading ? source.text.slice(leading.pos, leading.end) : ''
  if (!doc.startsWith('/**')) return [`${name} has no docstring`]
  const one = /^\/\*\*[^\n]*\*\/$/.test(doc)
  const numbers = node.parameters.filter(parameter => parameter.type && NUMERIC.test(parameter.type.getText(source)))
  const missing = numbers.map(parameter => parameter.name.getText(source))
    .filter(parameter => !(one ? /\[[^\]]+\]/.test(doc) : new RegExp(`@param\\s+${parameter}\\b[^@]*\\[[^\\]]+\\]`).test(doc)))
    .map(parameter => `${name}: @param ${parameter} names no [unit]`)
  const gives = node.type && NUMERIC.test(node.type.getText(source))
  if (gives && !(one ? /\[[^\]]+\]/.test(doc) : /@returns[^@]*\[[^\]]+\]/.test(doc))) missing.push(`${name}: @returns names no [unit]`)
  return missing
}

const complaintsIn = (text: string) => {
  const source = ts.createSourceFile('one.ts', text, ts.ScriptTarget.ES2022, true)
  return exportedFunctions(source).flatMap(one => complaints(source, one))
}

describe('docstrings of the science', () => {
  it('are missed where they are missing', () => {
    expect(complaintsIn('export function f(x: number): number { return x }')).toEqual(['f has no docstring'])
    expect(complaintsIn('/**\n * Doubles.\n * @param x - length\n * @returns length [m]\n */\nexport function f(x: number): number { return 2 * x }')).toEqual(['f: @param x names no [unit]'])
    expect(complaintsIn('/** Doubles a length [m]. */\nexport const f = (x: number): number => 2 * x')).toEqual([])
  })

  it('name a unit for each number', () => {
    const files = ROOMS.flatMap(room => filesIn(room, ['.ts']))
    expect(files.length).toBeGreaterThan(10)
    expect(files.flatMap(path => complaintsIn(textOf(path)).map(line => `${path}: ${line}`))).toEqual([])
  })
})
