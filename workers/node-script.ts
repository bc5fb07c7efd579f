/** The worker thread's script as one piece of JavaScript, bundled once a process: a thread that had to load TypeScript file by file would take seconds to start. */
import { createRequire } from 'node:module'
import { fileURLToPath } from 'node:url'

interface Bundler { buildSync(options: Record<string, unknown>): { outputFiles: { text: string }[] } }
let script: string | undefined

/** Script of `node-worker.ts` for `new Worker(script, { eval: true })`. */
export function threadScript(): string {
  // esbuild is the engine of tsx, which these command lines run on; it is found from there and need not be hoisted.
  const bundler = createRequire(createRequire(import.meta.url).resolve('tsx/package.json'))('esbuild') as Bundler
  return script ??= bundler.buildSync({
    entryPoints: [fileURLToPath(new URL('./node-worker.ts', import.meta.url))],
    bundle: true, write: false, platform: 'node', format: 'cjs', target: 'node20', logLevel: 'silent',
  }).outputFiles[0]!.text
}
