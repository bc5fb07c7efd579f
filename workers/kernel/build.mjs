/** Builds kernel.wasm; with --compare builds to a temporary file instead and exits 1 when its bytes differ from the committed ones. */
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import asc from 'assemblyscript/asc'

const here = fileURLToPath(new URL('.', import.meta.url))
const committed = join(here, 'kernel.wasm')

async function build(output) {
  // Relative paths keep the build independent of where the checkout lies.
  process.chdir(here)
  const { error, stderr } = await asc.main([
    'assembly/index.ts', '--outFile', output, '-O3', '--noAssert', '--enable', 'simd', '--runtime', 'minimal', '--use', 'abort=',
  ])
  if (error) {
    console.error(stderr.toString())
    throw error
  }
}

if (process.argv.includes('--compare')) {
  const folder = mkdtempSync(join(tmpdir(), 'moorage-kernel-'))
  try {
    const rebuilt = join(folder, 'kernel.wasm')
    await build(rebuilt)
    const same = readFileSync(rebuilt).equals(readFileSync(committed))
    console.log(same ? 'kernel.wasm is what its source builds to.' : 'kernel.wasm differs from what its source builds to: run npm run kernel:build.')
    process.exitCode = same ? 0 : 1
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
} else {
  await build('kernel.wasm')
  console.log(`kernel.wasm: ${readFileSync(committed).length} bytes`)
}
