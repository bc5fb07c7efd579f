/** One instance of the kernel's WASM and its memory, as the engines of the different algorithms use it. */

/** Exports that every algorithm needs; an algorithm's own file widens this by intersection. */
export interface KernelExports {
  memory: WebAssembly.Memory
  allocate(bytes: number): number
  release(pointer: number): void
  planBytes(): number
  walkStep: WalkCall
  walkStirred: WalkCall
}
/** Walks replicates [from, to) of a placed plan into a zeroed tally. */
export type WalkCall = (plan: number, tally: number, low: number, high: number, from: number, to: number) => void

export class KernelHost {
  readonly exports: KernelExports

  constructor(instance: WebAssembly.Instance) {
    this.exports = instance.exports as unknown as KernelExports
  }

  /** Reserves memory, 16-byte aligned; 0 bytes get an address too. */
  allocate(bytes: number): number {
    return this.exports.allocate(Math.max(16, bytes)) >>> 0
  }

  release(pointer: number): void {
    this.exports.release(pointer)
  }

  /** Views go stale when memory grows: take one after the last allocation. */
  bytes(pointer: number, length: number): Uint8Array {
    return new Uint8Array(this.exports.memory.buffer, pointer, length)
  }

  doubles(pointer: number, length: number): Float64Array {
    return new Float64Array(this.exports.memory.buffer, pointer, length)
  }

  words(pointer: number, length: number): Uint32Array {
    return new Uint32Array(this.exports.memory.buffer, pointer, length)
  }

  /** Copies an array into memory of its own. */
  place(array: Uint8Array | Int32Array | Uint32Array | Float32Array | Float64Array): number {
    const pointer = this.allocate(array.byteLength)
    this.bytes(pointer, array.byteLength).set(new Uint8Array(array.buffer, array.byteOffset, array.byteLength))
    return pointer
  }
}
