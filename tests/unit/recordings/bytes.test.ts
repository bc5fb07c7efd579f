/** Bytes to text: sizes, content, encodings, and where bytes do not fit. */
import { describe, expect, it } from 'vitest'
import { decodeBytes, sizeProblem } from '../../../shared/recordings/decode'
import { readBytes } from '../../../shared/recordings/read'
import { PLAIN, bytesOf, table } from './support'

const utf16 = (text: string, little: boolean) => {
  const bytes = new Uint8Array(text.length * 2)
  const view = new DataView(bytes.buffer)
  for (let i = 0; i < text.length; i++) view.setUint16(2 * i, text.charCodeAt(i), little)
  return bytes
}
const latin = (text: string) => Uint8Array.from(text, one => one.charCodeAt(0))
const messageOf = (bytes: Uint8Array) => {
  const read = readBytes(bytes)
  return read.ok ? read.reading.problems.map(problem => problem.message).join(' ') : read.problem.message
}

describe('files without rows', () => {
  it.each([['0 bytes', []], ['only a byte order mark', [0xEF, 0xBB, 0xBF]], ['only blanks', [32, 10, 13, 10]], ['only a UTF-16 mark', [0xFF, 0xFE]]])('refuses %s', (_, bytes) => {
    expect(messageOf(Uint8Array.from(bytes))).toContain('no rows')
  })
  it('refuses a file of a header only', () => {
    expect(messageOf(bytesOf('interval;ratio;sem;n\n'))).toContain('no rows')
    expect(messageOf(bytesOf('interval;ratio;sem;n\ns;%;%;\n'))).toContain('no rows')
  })
})

describe('sizes', () => {
  it('are judged before a byte is read', () => {
    expect(sizeProblem(25 * 2 ** 20)).toBeNull()
    expect(sizeProblem(300 * 2 ** 20)).toEqual({ path: 'file', message: 'This file has 300 MB; at most 25 MB are taken.' })
    expect(sizeProblem(25 * 2 ** 20 + 1)!.message).toContain('26 MB; at most 25 MB')
  })
})

describe('content', () => {
  it.each([
    ['xlsx', [0x50, 0x4B, 3, 4, 20, 0], 'save as'], ['xls', [0xD0, 0xCF, 0x11, 0xE0, 0xA1], 'save as'], ['PDF', [...'%PDF-1.7'].map(one => one.charCodeAt(0)), 'as CSV'],
    ['PNG', [0x89, 0x50, 0x4E, 0x47, 13, 10], 'as CSV'], ['JPEG', [0xFF, 0xD8, 0xFF, 0xE0], 'as CSV'], ['gzip', [0x1F, 0x8B, 8], 'Unpack'], ['binary', [1, 2, 0, 4, 0, 0, 0, 9], 'as CSV or text'],
    ['web page', [...'<html><table>'].map(one => one.charCodeAt(0)), 'CSV'],
  ])('tells %s by its bytes, whatever the name', (_, bytes, cure) => {
    expect(messageOf(Uint8Array.from(bytes))).toContain('By its content')
    expect(messageOf(Uint8Array.from(bytes))).toContain(cure)
  })
})

describe('encodings', () => {
  const text = table(['50,0.150,0.008,9', '100,0.181,0.019,8'], 'interval (ms),ratio,sem,n\n# 50 µM')
  const decoded = (bytes: Uint8Array, chosen?: Parameters<typeof decodeBytes>[1]) => {
    const outcome = decodeBytes(bytes, chosen)
    if (!outcome.ok) throw new Error(outcome.problem.message)
    return outcome.decoded
  }
  it('reads UTF-8 with and without mark alike', () => {
    expect(decoded(bytesOf(text))).toMatchObject({ text, encoding: 'utf-8', byteOrderMark: false, sure: 'certain' })
    expect(decoded(bytesOf(`\uFEFF${text}`))).toMatchObject({ text, encoding: 'utf-8', byteOrderMark: true, sure: 'certain' })
  })
  it.each([['little', true, 'utf-16le'], ['big', false, 'utf-16be']] as const)('reads UTF-16, %s end first, with and without mark', (_, little, encoding) => {
    expect(decoded(utf16(`\uFEFF${text}`, little))).toMatchObject({ text, encoding, byteOrderMark: true, sure: 'certain' })
    expect(decoded(utf16(text, little))).toMatchObject({ text, encoding, byteOrderMark: false, sure: 'guess' })
  })
  it('reads Windows-1252 and says why', () => {
    const read = decoded(latin(text))
    expect(read).toMatchObject({ text, encoding: 'windows-1252', sure: 'guess', misfit: { offset: latin(text).indexOf(0xB5), line: 2 } })
    expect(read.sentence).toContain('“µ”')
    expect(decoded(Uint8Array.from([0x80, 0x96, 0x9F, 0x2C, 0x31])).text).toBe('€–Ÿ,1')
  })
  it('asks where invalid bytes stand among valid UTF-8, and names the place', () => {
    const bytes = Uint8Array.from([...bytesOf('µ,n\n1,2\n3,'), 0xC3, 0x28, 10])
    const read = decoded(bytes)
    expect(read).toMatchObject({ sure: 'asked', misfit: { offset: 11, line: 3 } })
    expect(read.sentence).toContain('Byte 12, on line 3, is no UTF-8')
    const outcome = readBytes(bytes)
    expect(outcome.ok && outcome.reading.questions.find(one => one.id === 'encoding')?.options.map(one => one.choices.encoding)).toContain('windows-1252')
    expect(decoded(bytes, 'utf-8')).toMatchObject({ sure: 'chosen', text: 'µ,n\n1,2\n3,\uFFFD(\n' })
    expect(decoded(bytes, 'windows-1252').text).toContain('Ã(')
  })
  it('refuses overlong and surrogate sequences of UTF-8', () => {
    for (const bad of [[0xC0, 0xAF], [0xE0, 0x80, 0x80], [0xED, 0xA0, 0x80], [0xF4, 0x90, 0x80, 0x80], [0xFF], [0xE2, 0x82]]) expect(decoded(Uint8Array.from([0x31, 0x2C, ...bad])).misfit).toEqual({ offset: 2, line: 1 })
  })
  it('reads the same points in every encoding and line end', () => {
    const plain = table(PLAIN)
    const points = (bytes: Uint8Array) => {
      const outcome = readBytes(bytes)
      return outcome.ok ? outcome.reading.conditions[0]!.points : []
    }
    const wanted = points(bytesOf(plain))
    expect(wanted).toHaveLength(4)
    for (const ends of ['\r\n', '\r']) expect(points(bytesOf(plain.replaceAll('\n', ends)))).toEqual(wanted)
    expect(points(utf16(`\uFEFF${plain}`, true))).toEqual(wanted)
  })
})
