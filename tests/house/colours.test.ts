/** Colours stand in one file, as tokens with a value for light and for dark. */
import { describe, expect, it } from 'vitest'
import { filesIn, textOf, withoutComments } from './support/sources'

const TOKENS = 'app/assets/css/main.css'
/** A hash and 3, 4, 6 or 8 hexadecimal digits, but no link to a part of a page; or a colour function with numbers in it, but the black and the transparent that browsers answer where nothing is set. */
const LITERAL = /(?<!href="|to="|href: '|&)#(?:[0-9a-f]{8}|[0-9a-f]{6}|[0-9a-f]{3,4})(?![\w-])|\b(?:rgba?|hsla?|oklch|oklab|hwb|lch)\(\s*[\d.](?!(?:, 0){2,3}\))/i

describe('colour literals', () => {
  it('are recognised', () => {
    for (const text of ['color: #fff', '\'#8E2A6B\'', 'bg-[#0072B2]', 'rgb(1 2 3)', 'rgba(0, 0, 0, .5)']) expect(text).toMatch(LITERAL)
    for (const text of ['#shared/units', 'href="#add"', '&#8722;', 'rgb(var(--ink))', 'rgba(0, 0, 0, 0)', '#each-row']) expect(text).not.toMatch(LITERAL)
  })

  it('stand in the token file only', () => {
    expect(textOf(TOKENS)).toMatch(LITERAL)
    const stray = filesIn('app', ['.vue', '.ts', '.css']).filter(path => path !== TOKENS).filter(path => LITERAL.test(withoutComments(textOf(path))))
    expect(stray.map(path => `${path}: ${LITERAL.exec(withoutComments(textOf(path)))![0]}`)).toEqual([])
  })
})
