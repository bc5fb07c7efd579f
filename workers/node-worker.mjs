/** Starts the worker thread from the source tree: a thread has no TypeScript loader of its own. */
import { register } from 'tsx/esm/api'

register()
await import('./node-worker.ts')
