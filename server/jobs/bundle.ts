/**
 * Build step: the examining thread becomes one self-contained script beside the server's, with the kernel's bytes inside.
 * It is built apart, because a chunk of the server's own bundle would start a second server when it is loaded.
 */
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const SCRIPT = fileURLToPath(new URL('./examiner.worker.ts', import.meta.url))
const KERNEL = fileURLToPath(new URL('../../workers/kernel/kernel.wasm', import.meta.url))
const KERNEL_MODULE = 'virtual:moorage-kernel'
const EXAMINER_MODULE = 'virtual:moorage-examiner'
const FILE_NAME = 'examiner.mjs'

const kernelModule = {
  name: 'moorage-kernel',
  resolveId: (id: string) => id === KERNEL_MODULE ? `\0${id}` : null,
  load: (id: string) => id === `\0${KERNEL_MODULE}` ? `export default ${JSON.stringify(readFileSync(KERNEL).toString('base64'))}` : null,
}

async function buildExaminer(): Promise<string> {
  const { build } = await import('vite')
  const built = await build({
    configFile: false, logLevel: 'warn', plugins: [kernelModule], ssr: { noExternal: true, target: 'node' },
    build: { ssr: SCRIPT, write: false, target: 'node20', minify: false, rollupOptions: { output: { format: 'es', inlineDynamicImports: true } } },
  })
  const [bundle] = [built].flat() as { output: { type: string, code?: string }[] }[]
  const code = bundle?.output.find(file => file.type === 'chunk')?.code
  if (!code) throw new Error('examinerBundle: the examining thread was not built')
  return code
}

interface BundleContext {
  emitFile(file: { type: 'asset', fileName: string, source: string }): string
  addWatchFile(path: string): void
}

/** Rollup plugin for Nitro. */
export function examinerBundle() {
  return {
    name: 'moorage-examiner',
    resolveId: (id: string) => id === EXAMINER_MODULE ? `\0${id}` : null,
    async load(this: BundleContext, id: string) {
      if (id !== `\0${EXAMINER_MODULE}`) return null
      for (const path of [KERNEL, SCRIPT]) this.addWatchFile(path)
      this.emitFile({ type: 'asset', fileName: FILE_NAME, source: await buildExaminer() })
      // Nitro's import.meta names the server's entry, and that only once everything is loaded: hence a function.
      return `export default () => new URL('./${FILE_NAME}', import.meta.url)`
    },
  }
}
