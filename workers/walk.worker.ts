/** The browser's worker: the walker behind comlink, its kernel from a hashed file of the same origin. */
import { expose, transfer } from 'comlink'
import kernelUrl from './kernel/kernel.wasm?url&no-inline'
import { createWalker } from './walker'

const walker = createWalker(async () => {
  const answer = await fetch(kernelUrl)
  if (!answer.ok) throw new Error(`The kernel could not be loaded: ${answer.status}.`)
  return answer.arrayBuffer()
})
expose({
  ...walker,
  exportTables() {
    const tables = walker.exportTables()
    return tables && transfer(tables, [tables])
  },
})
