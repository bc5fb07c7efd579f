/** Build step: the examining thread becomes a script of its own beside the server's, with the kernel's bytes inside. */
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const SCRIPT = fileURLToPath(new URL('./examiner.worker.ts', import.meta.url))
const KERNEL = fileURLToPath(new URL('../../workers/kernel/kernel.wasm', import.meta.url))
const MODULES = ['virtual:moorage-kernel', 'virtual:moorage-examiner']

interface BundleContext { emitFile(file: { type: 'chunk', id: string, name: string }): string, addWatchFile(path: string): void }

/** Rollup plugin for Nitro. */
export function examinerBundle() {
  return {
    name: 'moorage-examiner',
    resolveId: (id: string) => MODULES.includes(id) ? `\0${id}` : null,
    load(this: BundleContext, id: string) {
      if (id === `\0${MODULES[0]}`) {
        this.addWatchFile(KERNEL)
        return `export default ${JSON.stringify(readFileSync(KERNEL).toString('base64'))}`
      }
      if (id !== `\0${MODULES[1]}`) return null
      const reference = this.emitFile({ type: 'chunk', id: SCRIPT, name: 'examiner' })
      return `export default import.meta.ROLLUP_FILE_URL_${reference}`
    },
  }
}
