/** One place for how the application is built and served. */
import { fileURLToPath } from 'node:url'
import { examinerBundle } from './server/jobs/bundle'

export default defineNuxtConfig({
  modules: ['@pinia/nuxt', '@nuxtjs/tailwindcss', 'nuxt-auth-utils', 'nuxt-security', '@nuxt/eslint'],
  // Vite's development server answers worker scripts without the header that `require-corp` asks for.
  $development: { security: { headers: { crossOriginEmbedderPolicy: false } } },
  components: [{ path: '~/components', pathPrefix: false }],
  devtools: { enabled: false },
  app: {
    head: {
      htmlAttrs: { lang: 'en' },
      title: 'Moorage',
      meta: [{ name: 'viewport', content: 'width=device-width, initial-scale=1' }],
    },
  },
  css: ['~/assets/css/fonts.css'],
  vue: {
    compilerOptions: { isCustomElement: tag => (tag.startsWith('Tres') && tag !== 'TresCanvas') || tag === 'primitive' },
  },
  runtimeConfig: {
    /** Application role's address, e.g. postgresql://moorage_app:…@127.0.0.1:5432/moorage (env NUXT_DATABASE_URL). */
    databaseUrl: '',
    /** scrypt; never below N = 2^17, r = 8, p = 1. Node refuses work above maxMemory [bytes]; N·r·128 bytes are needed. */
    hash: { scrypt: { cost: 131_072, blockSize: 8, parallelization: 1, maxMemory: 268_435_456 } },
    /** The cookie carries a sealed random key only; sessions themselves stand in the database (env NUXT_SESSION_PASSWORD seals it). */
    session: { name: 'moorage-session', password: '', maxAge: 2_592_000, cookie: { sameSite: 'lax' } },
    /** Set only behind a proxy of your own: X-Forwarded-For then names the other end. */
    trustProxy: false,
    /** Failed sign-ins before answers are slowed, per account and per address, within the window. Tests set them. */
    throttle: { windowSeconds: 900, perAccount: 5, perAddress: 30, slowMilliseconds: 1000, refuseAfter: 100 },
    /** What a browser may send at most [bytes]. */
    bodyLimitBytes: 262_144,
    runBodyLimitBytes: 8_388_608,
    /** Time for walking one saved run's blocks again; one block is always walked, blocks under way are finished [ms]. */
    auditBudgetMs: 20_000,
    /** Accounts are printed and offered on the sign-in page only on loopback. */
    demoAccounts: false,
    public: {
      /** The accounts of the invented bench are offered on the sign-in page; set on loopback only (NUXT_PUBLIC_DEMO_ACCOUNTS). */
      demoAccounts: false,
    },
  },
  routeRules: {
    '/_nuxt/**': { headers: { 'cross-origin-embedder-policy': 'require-corp', 'cross-origin-resource-policy': 'same-origin' } },
  },
  experimental: {
    // app/plugins/lost-chunk.client.ts decides: a reload without a connection would lose the page.
    emitRouteChunkError: 'manual',
    defaults: { nuxtLink: { prefetch: false } } },
  compatibilityDate: '2026-01-01',
  nitro: {
    preset: 'node-server',
    compressPublicAssets: { gzip: true, brotli: true },
    esbuild: { options: { target: 'es2022' } },
    rollupConfig: { plugins: [examinerBundle()], output: {} as never },
  },
  vite: {
    worker: { format: 'es' },
    build: { target: 'es2022' },
  },
  typescript: {
    strict: true,
    tsConfig: {
      include: ['../workers/**/*.ts', '../tests/**/*.ts'],
      exclude: ['../workers/kernel/assembly/**'],
      compilerOptions: { noUncheckedIndexedAccess: true },
    },
    nodeTsConfig: { include: ['../scripts/**/*', '../*.config.ts'] },
  },
  telemetry: false,
  hooks: {
    // Ours comes first and answers /api; Nuxt's own goes on writing the error page.
    'nitro:config'(config) {
      config.errorHandler = [fileURLToPath(new URL('./server/error.ts', import.meta.url)), ...[config.errorHandler ?? []].flat()]
    },
    // The server build leaves shared/ to Nitro; a relative import of it must stay absolute, or its path is read from the wrong folder.
    'vite:extendConfig'(config, { isServer }) {
      if (isServer && config.build?.rollupOptions) config.build.rollupOptions.makeAbsoluteExternalsRelative = false
    },
  },
  auth: { loadStrategy: 'none' },
  eslint: { config: { stylistic: { braceStyle: '1tbs' } } },
  security: {
    nonce: true,
    rateLimiter: false,
    requestSizeLimiter: false,
    xssValidator: false,
    headers: {
      crossOriginEmbedderPolicy: 'require-corp',
      contentSecurityPolicy: {
        'default-src': ['\'self\''],
        'base-uri': ['\'none\''],
        'connect-src': ['\'self\''],
        'font-src': ['\'self\''],
        'form-action': ['\'self\''],
        'frame-ancestors': ['\'none\''],
        'img-src': ['\'self\'', 'data:', 'blob:'],
        'object-src': ['\'none\''],
        'script-src': ['\'self\'', '\'nonce-{{nonce}}\'', '\'strict-dynamic\'', '\'wasm-unsafe-eval\''],
        'script-src-attr': ['\'none\''],
        'style-src': ['\'self\'', '\'unsafe-inline\''],
        'worker-src': ['\'self\''],
        'upgrade-insecure-requests': false,
      },
    },
  },
  tailwindcss: { cssPath: '~/assets/css/main.css', viewer: false },
})
