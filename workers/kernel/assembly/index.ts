/** What the kernel offers its host. Pointers are byte addresses in the kernel's memory; see README.md beside this folder for the layout. */
import { planBytes } from './plan'
import { walkStep } from './step'
import { walkStirred } from './stirred'

export { planBytes, walkStep, walkStirred }

/** Memory for the host, 16-byte aligned. */
export function allocate(bytes: usize): usize {
  return heap.alloc(bytes)
}

export function release(pointer: usize): void {
  heap.free(pointer)
}
