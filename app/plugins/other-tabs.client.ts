/** Follows a sign-in or sign-out in another tab: the pages of the one who left are closed, walks under way go on. */
import { SESSION_CHANNEL } from '~/utils/sessionChannel'

export default defineNuxtPlugin((nuxt) => {
  nuxt.hook('app:mounted', () => {
    const session = useSessionStore()
    new BroadcastChannel(SESSION_CHANNEL).addEventListener('message', async () => {
      const before = session.me?.userId ?? null
      await session.load()
      const now = session.me?.userId ?? null
      if (before !== null && now !== before) await navigateTo(now === null ? '/sign-in' : '/bench')
    })
  })
})
