/** Files stay small, say first what they are for, and hold nothing unfinished. */
import { describe, expect, it } from 'vitest'
import { filesIn, textOf } from './support/sources'

const ROOMS = ['app', 'server', 'shared', 'workers', 'scripts', 'tests']
const SOURCE = ['.ts', '.vue', '.mjs', '.c', '.h', '.py', '.css']
const files = ROOMS.flatMap(room => filesIn(room, SOURCE))
const LIMIT = 400

describe('source files', () => {
  it('are found', () => {
    expect(files.length).toBeGreaterThan(50)
  })

  it(`have at most ${LIMIT} lines`, () => {
    const long = files.map(path => ({ path, lines: textOf(path).split('\n').length - 1 })).filter(({ lines }) => lines > LIMIT)
    expect(long.map(({ path, lines }) => `${path}: ${lines}`)).toEqual([])
  })

  it('say in the first lines what they are for', () => {
    const silent = files.filter(path => !/\/\*|\/\/|<!--|"""|^#/m.test(textOf(path).split('\n').slice(0, 3).join('\n')))
    expect(silent).toEqual([])
  })

  it('hold no word of unfinished work', () => {
    // Written in pieces, so that this file does not name what it looks for.
    const words = ['TO' + 'DO', 'FIX' + 'ME', 'XX' + 'X', 'HA' + 'CK', 'lorem ' + 'ipsum', 'not ' + 'implemented', 'coming ' + 'soon', 'for ' + 'now']
    const pattern = new RegExp(`\\b(${words.join('|')})\\b`)
    expect(files.filter(path => pattern.test(textOf(path))).map(path => `${path}: ${pattern.exec(textOf(path))![0]}`)).toEqual([])
  })
})
