/** Tables on their way from one worker to another: a head of f64 and the set's own bytes, which hold no address. */
import { SECTIONS, type Section, type TableSet } from './attempt-tables'
import type { KernelHost } from './host'

/** Raised with the layout of sets. */
const FORMAT = 0x41540001
const NUMBERS = ['classes', 'sites', 'waitSteps', 'ratio', 'lateDigits', 'landingSteps', 'bins', 'attemptChance', 'landingError', 'bytes'] as const
const HEAD = 3 + NUMBERS.length + SECTIONS.length

interface Travelling { set: TableSet, mobility: number }

/** Copies sets out of the kernel's memory. */
export function packTables(host: KernelHost, sets: Travelling[]): ArrayBuffer {
  const buffer = new ArrayBuffer(sets.reduce((sum, { set }) => sum + 8 * HEAD + set.bytes, 0))
  let at = 0
  for (const { set, mobility } of sets) {
    new Float64Array(buffer, at, HEAD).set([FORMAT, mobility, set.steady ? 1 : 0, ...NUMBERS.map(name => set[name]), ...SECTIONS.map(section => set.offsets[section])])
    new Uint8Array(buffer, at + 8 * HEAD, set.bytes).set(host.bytes(set.pointer, set.bytes))
    at += 8 * HEAD + set.bytes
  }
  return buffer
}

/** Copies sets into the kernel's memory. */
export function unpackTables(host: KernelHost, buffer: ArrayBuffer): Travelling[] {
  const found: Travelling[] = []
  for (let at = 0; at < buffer.byteLength;) {
    const head = new Float64Array(buffer, at, HEAD), [format, mobility, steady] = head as unknown as [number, number, number]
    if (format !== FORMAT) throw new RangeError(`Tables of format ${format}; this kernel reads ${FORMAT}.`)
    const numbers = Object.fromEntries(NUMBERS.map((name, i) => [name, head[3 + i]!])) as Record<typeof NUMBERS[number], number>
    const offsets = Object.fromEntries(SECTIONS.map((section, i) => [section, head[3 + NUMBERS.length + i]!])) as Record<Section, number>
    const pointer = host.place(new Uint8Array(buffer, at + 8 * HEAD, numbers.bytes))
    found.push({ mobility, set: { ...numbers, steady: steady === 1, offsets, pointer } })
    at += 8 * HEAD + numbers.bytes
  }
  return found
}
