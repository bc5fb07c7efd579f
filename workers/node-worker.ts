/** The worker thread's script under Node: the walker behind comlink, its kernel's bytes from the one who starts it. */
import { parentPort, workerData } from 'node:worker_threads'
import { expose, transfer } from 'comlink'
import { nodeEndpoint } from './node-endpoint'
import { createWalker } from './walker'

const { kernelBytes } = workerData as { kernelBytes: Uint8Array<ArrayBuffer> }
const walker = createWalker(async () => kernelBytes)
expose({
  ...walker,
  exportTables() {
    const tables = walker.exportTables()
    return tables && transfer(tables, [tables])
  },
}, nodeEndpoint(parentPort!))
