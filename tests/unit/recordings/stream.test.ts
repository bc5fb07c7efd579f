/** Large files in pieces: the same rows wherever they are cut, no long hold of the thread. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { RowPieces } from '../../../shared/recordings/pieces'
import { readRecording } from '../../../shared/recordings/read'
import { splitRows } from '../../../shared/recordings/rows'
import { FileStream, PIECE_BYTES } from '../../../shared/recordings/stream'
import { bytesOf, fixture } from './support'

describe('rows in pieces', () => {
  it('are those of the whole text, wherever it is cut', () => {
    const row = fc.array(fc.oneof(fc.string({ unit: fc.constantFrom(...'ab1 .'), maxLength: 5 }), fc.string({ unit: fc.constantFrom(...'a"\n;'), maxLength: 5 }).map(text => `"${text.replaceAll('"', '""')}"`)), { minLength: 1, maxLength: 4 })
    fc.assert(fc.property(fc.array(row, { minLength: 1, maxLength: 10 }), fc.constantFrom('\n', '\r\n', '\r'), fc.array(fc.nat(60), { maxLength: 12 }), (rows, end, cuts) => {
      const text = rows.map(cells => cells.join(';')).join(end), whole = splitRows(text, ';'), pieces = new RowPieces(';'), found: ReturnType<RowPieces['push']> = []
      let from = 0
      for (const length of cuts) {
        found.push(...pieces.push(text.slice(from, from + length)))
        from += length
      }
      found.push(...pieces.push(text.slice(from)), ...pieces.end())
      const lastEmpty = (list: typeof found) => list.at(-1)?.cells.join('') === '' ? list.slice(0, -1) : list
      expect(lastEmpty(found)).toEqual(lastEmpty(whole.rows))
    }), { numRuns: 500 })
  })
  it('are not torn where a stray quote stands inside a plain cell', () => {
    const text = ['t,c,note', '1,2,5" pipette', ...Array.from({ length: 200_000 }, (_, i) => `${i},${i % 7},plain`)].join('\n'), pieces = new RowPieces(','), found = []
    for (let from = 0; from < text.length; from += 70_001) found.push(...pieces.push(text.slice(from, from + 70_001)))
    found.push(...pieces.end())
    expect(found).toHaveLength(200_002)
    expect(found.every((row, i) => row.cells.length === 3 && row.line === i + 1)).toBe(true)
    expect(pieces.unclosed).toBeNull()
  })
  it('name the line of an unclosed quote', () => {
    const pieces = new RowPieces(',')
    pieces.push('a,b\n1,2\n"3')
    pieces.push(',4\n5,6\n')
    pieces.end()
    expect(pieces.unclosed?.line).toBe(3)
  })
})

describe('a file in pieces', () => {
  it.each([1, 3, 7, 64])('of %i bytes previews as the whole', (length) => {
    const bytes = fixture('control_messy.csv'), stream = new FileStream(bytes.length)
    for (let from = 0; from < bytes.length; from += length) {
      // A first piece of a few bytes says too little: pages give whole ones.
      const size = from === 0 ? Math.max(length, 120) : length
      stream.push(bytes.subarray(from, from + size))
      if (from === 0) from += size - length
    }
    expect(stream.end()).toEqual({ bytes: 316, lines: 19, rows: 18 })
    expect(stream.preview()!.conditions[0]!.points).toHaveLength(11)
    expect(stream.preview()!.guesses.find(guess => guess.id === 'encoding')!.shown).toBe('UTF-8 with byte order mark')
  })
  it('is refused by its size before anything is read', () => {
    const stream = new FileStream(300 * 2 ** 20)
    expect(stream.problem!.message).toContain('at most 25 MB')
    expect(stream.push(bytesOf('1,2\n'))).toEqual({ bytes: 4, lines: 0, rows: 0 })
    expect(stream.preview()).toBeNull()
  })
  it('is refused by its content', () => {
    const stream = new FileStream(1000)
    stream.push(Uint8Array.from([0x50, 0x4B, 3, 4, 0, 0, 0]))
    expect(stream.problem!.message).toContain('zip')
  })
  it('says on which line bytes beyond the first piece do not fit', () => {
    const stream = new FileStream(1000)
    stream.push(bytesOf('time_s,Cm_fF\n0,1\n'))
    stream.push(Uint8Array.from([...bytesOf('1,2\n2,'), 0xB5, 10]))
    stream.end()
    expect(stream.misfitLine).toBe(3)
  })
  it('of 20 MB holds the thread for a few milliseconds a piece', () => {
    const rows = ['time_s,Cm_fF,Vcmd_mV']
    for (let i = 0; i < 950_000; i++) rows.push(`${(i / 1000).toFixed(3)},${(5200 + i % 97 / 10).toFixed(2)},-70.0`)
    const bytes = bytesOf(rows.join('\r\n')), stream = new FileStream(bytes.length), held: number[] = []
    expect(bytes.length).toBeGreaterThan(20 * 2 ** 20)
    const before = process.cpuUsage()
    for (let from = 0; from < bytes.length; from += PIECE_BYTES) {
      const began = performance.now()
      stream.push(bytes.subarray(from, from + PIECE_BYTES))
      held.push(performance.now() - began)
    }
    const used = process.cpuUsage(before), sorted = held.sort((a, b) => a - b)
    expect(stream.end()).toEqual({ bytes: bytes.length, lines: 950_001, rows: 950_001 })
    // A piece takes about 1 ms alone. Neighbours of a shared machine lengthen some waits, not the middle one and not the work done.
    expect(sorted[Math.floor(sorted.length / 2)]).toBeLessThan(30)
    expect((used.user + used.system) / 1000 / held.length).toBeLessThan(30)
    expect(stream.preview()).toMatchObject({ kind: 'trace', fileLines: 950_001 })
  })
  it('previews its head within the patience of a page', () => {
    const text = ['interval_ms;ratio;sem;n', ...Array.from({ length: 20_000 }, (_, i) => `${i + 1};0,5${i % 10};0,01;9`)].join('\n')
    const stream = new FileStream(text.length)
    stream.push(bytesOf(text).subarray(0, PIECE_BYTES))
    stream.preview()
    const times = Array.from({ length: 7 }, () => {
      const began = performance.now()
      expect(stream.preview()!.conditions[0]!.points.length).toBeGreaterThan(300)
      return performance.now() - began
    }).sort((a, b) => a - b)
    expect(times[0]).toBeLessThan(100)
  })
  it('gives the same reading as the whole text where it is small', () => {
    const bytes = fixture('summary.csv'), stream = new FileStream(bytes.length)
    stream.push(bytes)
    stream.end()
    expect(stream.preview()!.conditions).toEqual(readRecording(new TextDecoder().decode(bytes)).conditions)
  })
})
