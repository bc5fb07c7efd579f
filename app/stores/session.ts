/** Who is signed in, on which bench, and what that role may do. The server decides again at every request. */
import { may, type Action, type Role } from '#shared/permissions'
import type { Me } from '#shared/schemas/api/account'
import { SESSION_CHANNEL } from '~/utils/sessionChannel'

export const useSessionStore = defineStore('session', () => {
  const api = useApi()
  const me = ref<Me | null>(null)
  /** False until the first answer, so that a page can tell "signed out" from "not known yet". */
  const known = ref(false)
  /** Why it is not known: the server or its database is away. */
  const away = shallowRef<Refusal | null>(null)
  const chosenBench = useCookie<string | null>('moorage-bench', { default: () => null, maxAge: 31_536_000, sameSite: 'lax', path: '/' })

  const bench = computed(() => me.value?.benches.find(one => one.benchId === chosenBench.value) ?? me.value?.benches[0] ?? null)
  const role = computed<Role | null>(() => bench.value?.role ?? null)
  const allows = (action: Action, item?: { owns: boolean, shared?: boolean }) => role.value !== null && may(role.value, action, item)

  async function load(): Promise<void> {
    try {
      me.value = await api<Me>('/api/account/me')
    } catch (thrown) {
      const refusal = refusalOf(thrown)
      if (refusal.status !== 401) { // the server is away: keep what is known, ask again at the next page
        away.value = refusal
        return
      }
      me.value = null
    }
    away.value = null
    known.value = true
  }
  /** Other tabs of this browser share the cookie; app/plugins/other-tabs.client.ts listens there. */
  function announce(): void {
    if (!import.meta.client) return
    const channel = new BroadcastChannel(SESSION_CHANNEL)
    channel.postMessage(me.value?.userId ?? null)
    channel.close()
  }
  async function signIn(given: { mail: string, passPhrase: string }): Promise<void> {
    me.value = await api<Me>('/api/account/sign-in', { method: 'POST', body: given })
    known.value = true
    announce()
  }
  async function register(given: { mail: string, name: string, passPhrase: string }): Promise<void> {
    me.value = await api<Me>('/api/account/register', { method: 'POST', body: given })
    known.value = true
    announce()
  }
  async function signOut(everywhere = false): Promise<void> {
    if (everywhere) await api('/api/account/sessions', { method: 'DELETE' })
    else await api('/api/account/sign-out', { method: 'POST' })
    me.value = null
    announce()
  }
  function chooseBench(benchId: string): void {
    chosenBench.value = benchId
  }

  return { me, known, away, bench, role, allows, load, signIn, register, signOut, chooseBench }
})
