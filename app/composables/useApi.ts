/** The one way to the server: cookies of the visitor while the page is drawn there, and one shape for every refusal. */
export interface ApiOptions {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  body?: unknown
  query?: Record<string, string | number | undefined>
  headers?: Record<string, string>
  signal?: AbortSignal
}

export function useApi() {
  const fetch = useRequestFetch() as (path: string, options?: unknown) => Promise<unknown>
  return async function api<Answer>(path: string, options: ApiOptions = {}): Promise<Answer> {
    try {
      return await fetch(path, { retry: 0, ...options }) as Answer
    } catch (thrown) {
      throw new ApiRefusal(refusalOf(thrown))
    }
  }
}
