/** Everything the editor asks of the server about one scenario, each call one function. */
import type { RevisionDetail, RevisionRow, ScenarioDetail } from '#shared/schemas/api/scenario'
import type { Scenario } from '#shared/schemas/scenario'

export interface ScenarioEdit { document: Scenario, message: string, tags: string[] }

export function useScenarioApi() {
  const api = useApi()
  const at = (id: string) => `/api/scenarios/${encodeURIComponent(id)}`
  const from = (revision: number) => ({ 'If-Match': `"${revision}"` })
  return {
    load: (id: string) => api<ScenarioDetail>(at(id)),
    revisions: (id: string) => api<RevisionRow[]>(`${at(id)}/revisions`),
    revision: (id: string, revision: number) => api<RevisionDetail>(`${at(id)}/revisions/${revision}`),
    create: (benchId: string, edit: ScenarioEdit) => api<ScenarioDetail>(`/api/benches/${benchId}/scenarios`, { method: 'POST', body: edit }),
    save: (id: string, revision: number, edit: ScenarioEdit) => api<ScenarioDetail>(at(id), { method: 'PUT', body: edit, headers: from(revision) }),
    tag: (id: string, tags: string[]) => api<ScenarioDetail>(at(id), { method: 'PATCH', body: { tags } }),
    restoreRevision: (id: string, old: number, revision: number) =>
      api<ScenarioDetail>(`${at(id)}/revisions/${old}/restore`, { method: 'POST', body: {}, headers: from(revision) }),
    duplicate: (id: string, title?: string) => api<ScenarioDetail>(`${at(id)}/duplicate`, { method: 'POST', body: title ? { title } : {} }),
    bin: (id: string) => api<unknown>(at(id), { method: 'DELETE' }),
  }
}
