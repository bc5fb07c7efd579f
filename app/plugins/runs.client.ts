/** Brings back runs that this device keeps, sends what waits when the connection returns, and warns before a run would be lost. */
export default defineNuxtPlugin((nuxt) => {
  const runs = useRunsStore()
  const session = useSessionStore()
  nuxt.hook('app:mounted', () => {
    watch(() => session.me?.userId, () => runs.restore(), { immediate: true })
    addEventListener('online', () => runs.retryAll())
    addEventListener('beforeunload', (event) => {
      if (runs.atRisk) event.preventDefault()
    })
  })
})
