/** Exports of the kernel that the attempt sampler uses, and how its argument blocks are written. */
import type { KernelHost } from './host'

export interface AttemptExports {
  solveWaits(job: number): void
  solveLandings(job: number): void
  solveFar(job: number, out: number): void
  makeWaitRow(waits: number, stride: number, steps: number, lateFirst: number, lateSecond: number, gone: number, cells: number, room: number): void
  makeEarlyRow(waits: number, stride: number, steps: number, cells: number, room: number): number
  makeRow(weights: number, count: number, cells: number, room: number): void
  geometricRows(ratio: number, digits: number, cells: number, scratch: number): void
  walkAttempt(plan: number, attempt: number, tally: number, low: number, high: number, from: number, to: number): void
}

export const attemptExports = (host: KernelHost) => host.exports as unknown as AttemptExports

/** A word of an argument block: i32, f32 or f64 (8-byte aligned, as the kernel's classes are). */
export type Word = number | { single: number } | { double: number }

/** Writes an argument block in the kernel's field order. */
export function placeWords(host: KernelHost, words: readonly Word[]): number {
  const bytes = new DataView(new ArrayBuffer(8 * words.length + 8))
  let at = 0
  for (const word of words) {
    if (typeof word === 'number') bytes.setInt32(at, word | 0, true)
    else if ('single' in word) bytes.setFloat32(at, word.single, true)
    else {
      at = Math.ceil(at / 8) * 8
      bytes.setFloat64(at, word.double, true)
      at += 4
    }
    at += 4
  }
  return host.place(new Uint8Array(bytes.buffer, 0, Math.ceil(at / 8) * 8))
}

/** Memory that is given back together. */
export class Scratch {
  private readonly pointers: number[] = []

  constructor(private readonly host: KernelHost) {}

  room(bytes: number): number {
    const pointer = this.host.allocate(bytes)
    this.pointers.push(pointer)
    return pointer
  }

  place(array: Parameters<KernelHost['place']>[0]): number {
    const pointer = this.host.place(array)
    this.pointers.push(pointer)
    return pointer
  }

  words(words: readonly Word[]): number {
    const pointer = placeWords(this.host, words)
    this.pointers.push(pointer)
    return pointer
  }

  release(): void {
    for (const pointer of this.pointers.splice(0)) this.host.release(pointer)
  }
}
