/** Suites by cost: unit, reference and house are pure; integration has a real PostgreSQL; browser has Chromium against the built server. */
import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const alias = { '#shared': fileURLToPath(new URL('./shared', import.meta.url)) }
const pure = (name: string) => ({ resolve: { alias }, test: { name, include: [`tests/${name}/**/*.test.ts`], environment: 'node' as const, testTimeout: 60_000 } })
const served = (name: string, timeout: number) => ({
  resolve: { alias },
  test: {
    name, include: [`tests/${name}/**/*.test.ts`], environment: 'node' as const, fileParallelism: false,
    globalSetup: ['tests/support/postgres.ts'], testTimeout: timeout, hookTimeout: 120_000,
  },
})

export default defineConfig({
  test: {
    projects: [pure('unit'), pure('reference'), pure('house'), served('integration', 60_000), served('browser', 120_000)],
  },
})
