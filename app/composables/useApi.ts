/** The one way to the server: cookies of the visitor while the page is drawn there, and one shape for every refusal. */
export interface ApiOptions {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  body?: unknown
  query?: Record<string, string | number | undefined>
  headers?: Record<string, string>
  signal?: AbortSignal
}

/** Names the account that a page belongs to: where another one signed in since, in another tab, the server refuses the change. */
function asPerson(nuxt: ReturnType<typeof useNuxtApp>, { method = 'GET', headers }: ApiOptions): Record<string, string> {
  const me = (nuxt.$pinia as { state: { value: Record<string, { me?: { userId: string } | null } | undefined> } }).state.value.session?.me
  return { ...headers, ...(method !== 'GET' && me && { 'x-moorage-person': me.userId }) }
}

export function useApi() {
  const nuxt = useNuxtApp()
  const fetch = useRequestFetch() as (path: string, options?: unknown) => Promise<unknown>
  return async function api<Answer>(path: string, options: ApiOptions = {}): Promise<Answer> {
    try {
      return await fetch(path, { retry: 0, ...options, headers: asPerson(nuxt, options) }) as Answer
    } catch (thrown) {
      throw new ApiRefusal(refusalOf(thrown))
    }
  }
}
