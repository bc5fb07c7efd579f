/** A page whose script could not be fetched: reloaded there when a newer build took its place, never while the connection is away. */
export default defineNuxtPlugin((nuxtApp) => {
  const router = useRouter()
  const lost = new Set<unknown>()
  router.beforeEach(() => {
    lost.clear()
  })
  nuxtApp.hook('app:chunkError', ({ error }) => {
    lost.add(error)
  })
  router.onError((error, to) => {
    if (lost.has(error) && navigator.onLine) reloadNuxtApp({ path: to.fullPath, persistState: true })
  })
})
